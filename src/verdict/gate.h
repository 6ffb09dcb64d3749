/* Tonight's survey judged against a pinned one, rule by rule. */
#ifndef VERDICT_GATE_H
#define VERDICT_GATE_H

#include "verdict/baseline.h"

/*
 * The share of nights on which chance alone may breach the rule on data of
 * this kind, over the whole matrix: one in 1000 nights, as for the trend.
 */
#define GATE_ALPHA 0.001
#define GATE_WORDS_BYTES 480
#define GATE_COMMAND_BYTES 1024

enum gate_rule {
	GATE_LOSSLESS,    /* decoded to other bytes */
	GATE_BROKEN,      /* a codec or a method failed */
	GATE_SIZE,        /* this file: exact bytes over the tolerance */
	GATE_SIZE_KIND,   /* data of this kind: beyond tolerance and chance */
	GATE_GAP_LIMIT,   /* over the set's gap limit, not so at the pin */
	GATE_FLOOR_TAKEN, /* a codec holds the floor, not so at the pin */
	GATE_CORPUS_CHANGED, /* a fixed corpus has other bytes, or none */
	GATE_SPEED,          /* slower against the yardstick */
	GATE_MEMORY,         /* more memory against the yardstick */
	GATE_MISSING,        /* pinned, but not measured tonight */
	GATE_NOTE,           /* worth knowing, never a breach */
	GATE_RULE_COUNT
};

enum gate_outcome {
	GATE_PASSED,
	GATE_BREACHED,
	GATE_SUSPECTED, /* speed, memory: a repeat decides */
	GATE_UNJUDGED,  /* words say why */
	GATE_NOTED
};

/* One rule applied to one cell, or to a corpus (key.codec ""), or the set. */
struct gate_check {
	enum gate_rule rule;
	enum gate_outcome outcome;
	char corpus[LEDGER_NAME_BYTES]; /* "": the set as a whole */
	struct cell_key key;
	enum ratio ratio;     /* GATE_SPEED, GATE_MEMORY */
	double pinned, found; /* ratios, bytes or bits per symbol */
	double p;             /* GATE_SIZE_KIND: one-sided, before Holm */
	char words[GATE_WORDS_BYTES]; /* what, and by how much */
	/* The first survey of the unbroken run of breaches; 0: tonight's. */
	int64_t since;
	char since_started[LEDGER_NAME_BYTES];
};

struct gate {
	const struct baseline *pin, *tonight; /* borrowed */
	struct gate_check *checks;            /* owned */
	size_t count, room;
	enum status status; /* the first failure to add one: no memory */
};

/*
 * Pure. Tolerances and limits are tonight's. Sorted by corpus, cell and rule.
 * STATUS_MISMATCH: the two cannot be compared; why names every difference:
 * set, symbol kinds, feeds, orders, seed, yardstick, version of the reference.
 * STATUS_NO_MEMORY.
 */
MUST_USE enum status gate_init(struct gate *gate, const struct baseline *pin,
			       const struct baseline *tonight,
			       struct reason *why);
void gate_release(struct gate *gate);

size_t gate_count(const struct gate *gate, enum gate_outcome outcome);
const char *gate_rule_name(enum gate_rule rule); /* "size", "speed" */

/*
 * Settles a suspected check with a ratio measured again: it is breached only
 * if the repeat is over the tolerance, too. unrest: of the machine meanwhile,
 * as a share; over half of the tolerance the suspicion stays one.
 */
void gate_repeat(const struct gate *gate, struct gate_check *check,
		 const struct relative *again, double unrest);
/* Whether a ratio measured again is over the tolerance. */
bool gate_over(const struct gate *gate, const struct gate_check *check,
	       const struct relative *again);
/* The ratio up to which no closer look is taken. */
double gate_enough(const struct gate *gate, const struct gate_check *check);

/*
 * Reaches further back: older is a survey judged against the same pin. Checks
 * that are breached in it as well get its id and time; call it from the newest
 * to the oldest, stop when it returns false (no run of breaches goes on).
 */
bool gate_reach_back(struct gate *gate, const struct gate *older);

/* The shell command that measures it again; set_path "" becomes SET. */
void gate_command(const struct gate_check *check, const char *set_path,
		  char command[GATE_COMMAND_BYTES]);

#endif
