/* One survey as the ledger holds it: facts in memory, nothing derived. */
#ifndef LEDGER_SURVEY_H
#define LEDGER_SURVEY_H

#include "cost/cell.h"
#include "cost/findings.h"
#include "symbols/sequence.h"

#include <stdbool.h>

#define LEDGER_NAME_BYTES 64
#define LEDGER_PATH_BYTES 512

/* How a row, cell or corpus ended. */
enum outcome {
	OUTCOME_DONE,
	OUTCOME_FAILED,   /* a failure: exit code 1 */
	OUTCOME_DECLINED, /* a normal "cannot say", with its reason */
	OUTCOME_SKIPPED   /* a corpus that is not there and could be fetched */
};

struct method_fact {
	char method[LEDGER_NAME_BYTES]; /* estimator row */
	size_t page_bytes;              /* 0: whole */
	enum outcome outcome;
	char *reason;             /* owned; "" when done */
	struct findings findings; /* empty unless done */
};

struct cell_fact {
	struct cell_key key;
	size_t page_bytes; /* 0: whole */
	enum outcome outcome;
	char *reason; /* owned */
	struct cell_facts facts;
	bool timed;
	struct cell_timing timing;
};

struct corpus_fact {
	char name[LEDGER_NAME_BYTES];
	enum outcome outcome;
	char *reason; /* owned */
	enum symbol_kind kind;
	uint64_t file_bytes;      /* of the file */
	uint64_t canonical_bytes; /* what codecs saw */
	uint64_t n, distinct, alphabet;
	uint64_t records; /* 0: none declared */
	bool rolling;     /* feed = rolling: other bytes in every survey */
	char sha256[65];  /* of the file */
	char licence[LEDGER_NAME_BYTES];
	char *origin; /* owned */
	bool rate_known;
	double known_rate;           /* bits per symbol, from the set file */
	size_t blocks;               /* resampling blocks m; 0: too short */
	uint64_t *block_symbols;     /* owned; symbols in each */
	uint64_t *block_bytes;       /* owned; canonical bytes in each */
	struct method_fact *methods; /* owned, in table order */
	size_t method_count;
	struct cell_fact *cells; /* owned, in set order */
	size_t cell_count;
};

struct library_fact {
	char name[LEDGER_NAME_BYTES], version[LEDGER_NAME_BYTES];
};

struct survey {
	int64_t id;
	char set_name[LEDGER_NAME_BYTES];
	char program[LEDGER_NAME_BYTES]; /* "ratefloor 0.1.0" */
	uint64_t seed;
	unsigned orders;  /* K */
	double gap_limit; /* 0.40 for 40%; NaN never: negative is "none" */
	char yardstick[LEDGER_NAME_BYTES]; /* "zstd 3", or "" */
	double tolerance;       /* of sizes, share of achieved: 0.003 */
	double speed_tolerance; /* of times and memory: 0.15 */
	/* Of the run, no facts: where and when. "" where not known. */
	char set_path[LEDGER_PATH_BYTES]; /* of the set file, as given */
	char started[LEDGER_NAME_BYTES];  /* 2031-05-02T01:00:00Z */
	bool finished;
	struct library_fact *libraries; /* owned */
	size_t library_count;
	struct corpus_fact *corpora; /* owned, in set order */
	size_t corpus_count;
};

/* The corpus of that name; NULL where the survey has none. */
const struct corpus_fact *survey_corpus(const struct survey *survey,
					const char *name);

/* Each accepts an initialised-empty one. */
void method_fact_release(struct method_fact *method);
void cell_fact_release(struct cell_fact *cell);
/*
 * Bytes of memory: of the facts, or else the peak that was seen while timing;
 * CELL_MEMORY_UNKNOWN.
 */
uint64_t cell_encode_memory(const struct cell_fact *cell);
uint64_t cell_decode_memory(const struct cell_fact *cell);
void corpus_fact_release(struct corpus_fact *corpus);
void survey_release(struct survey *survey);

#endif
