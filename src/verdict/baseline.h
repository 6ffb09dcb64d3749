/* What a gate compares: the figures of one survey, pinned or tonight's. */
#ifndef VERDICT_BASELINE_H
#define VERDICT_BASELINE_H

#include "gap/analysis.h"

/* Counts up when an older baseline can no longer be read. */
#define BASELINE_SCHEMA 1
#define BASELINE_REASON_BYTES 200
#define BASELINE_NAME_BYTES (3 * CELL_NAME_BYTES + 8)

/* Times and memory, each relative to the yardstick's on the same corpus. */
enum ratio {
	RATIO_ENCODE_TIME,
	RATIO_DECODE_TIME,
	RATIO_ENCODE_MEMORY,
	RATIO_DECODE_MEMORY,
	RATIO_COUNT
};

struct relative {
	bool known; /* false: not measured, the yardstick's is zero, or a
		       pass takes less than a millisecond */
	double value;
};

/* Not known where either is 0. */
struct relative relative_of(double value, double yardstick);
/*
 * Nor where either is CELL_MEMORY_UNKNOWN: what is not the same twice says
 * nothing about a build.
 */
struct relative relative_memory(uint64_t bytes, uint64_t yardstick);

/*
 * For data of this kind: the codec's bits per symbol less those of the
 * yardstick, or of the reference for the yardstick itself and where the set
 * names none. Paired by block.
 */
struct baseline_pair {
	bool known;
	char against[BASELINE_NAME_BYTES]; /* "zstd 3", "mix" */
	double mean, standard_error;       /* bits per symbol */
	double effective_blocks;
	char reason[BASELINE_REASON_BYTES]; /* why it is not known */
};

struct baseline_cell {
	char corpus[LEDGER_NAME_BYTES];
	struct cell_key key;
	/* Tonight's only: a pinned cell ran and was lossless. */
	bool ran, lossless;
	char reason[BASELINE_REASON_BYTES];
	uint64_t bytes;
	struct baseline_pair pair; /* rolling corpora */
	bool has_gap;
	double gap;       /* share of the floor */
	double gap_least; /* lower end of its interval; the gap itself where
			     the corpus is fixed or there is no interval */
	struct relative ratios[RATIO_COUNT];
};

struct baseline_corpus {
	char name[LEDGER_NAME_BYTES];
	enum outcome outcome; /* tonight's; a pinned one is done */
	char reason[BASELINE_REASON_BYTES];
	char broken[BASELINE_REASON_BYTES]; /* a method that failed, or "" */
	enum symbol_kind kind;
	bool rolling;
	uint64_t n;
	char sha256[65];
	bool floor_known, floor_by_codec;
	char floor_held_by[BASELINE_NAME_BYTES];
	double floor_bits_per_symbol;
};

struct baseline {
	char program[LEDGER_NAME_BYTES], set_name[LEDGER_NAME_BYTES];
	int64_t survey;
	char started[LEDGER_NAME_BYTES]; /* 2031-05-02T01:00:00Z, or "" */
	uint64_t seed;
	unsigned orders;
	char yardstick[LEDGER_NAME_BYTES]; /* "" where there is none */
	double gap_limit;                  /* negative: none */
	double tolerance, speed_tolerance;
	struct library_fact *libraries; /* owned, sorted by name */
	size_t library_count;
	struct baseline_corpus *corpora; /* owned, sorted by name */
	size_t corpus_count;
	struct baseline_cell
		*cells; /* owned, by corpus, codec, level, layout */
	size_t cell_count;
};

/* Reads the figures off an analysis. STATUS_NO_MEMORY. */
MUST_USE enum status baseline_init(struct baseline *baseline,
				   const struct analysis *analysis,
				   struct reason *why);
/*
 * Reads the text of a baseline file; path is for messages. STATUS_BAD_INPUT:
 * not one, or a key is missing or wrong (named); STATUS_MISMATCH: of another
 * schema; STATUS_NO_MEMORY.
 */
MUST_USE enum status baseline_parse(struct baseline *baseline, const char *text,
				    size_t length, const char *path,
				    struct reason *why);
void baseline_release(struct baseline *baseline);

/*
 * Leaves out the corpora that were skipped. STATUS_CODEC: a corpus, method or
 * cell failed, which a pin would hide; why names the first.
 */
MUST_USE enum status baseline_settle(struct baseline *baseline,
				     struct reason *why);

/* NULL where there is none. */
const struct baseline_corpus *
baseline_corpus_find(const struct baseline *baseline, const char *name);
struct baseline_cell *baseline_cell_find(const struct baseline *baseline,
					 const char *corpus,
					 const struct cell_key *key);
/* "" where it is not known. */
const char *baseline_version(const struct baseline *baseline,
			     const char *library);

/* "zstd 3 4096" of a key: for messages; layout whole is not said. */
struct cell_words {
	char text[3 * CELL_NAME_BYTES + 8];
};
struct cell_words cell_words(const struct cell_key *key);

/* The cell that others are timed against; NULL where it was not run. */
const struct cell_fact *yardstick_cell(const struct corpus_fact *corpus,
				       const char *yardstick);

/* Puts libraries, corpora and cells in their order; for the room's own use. */
void baseline_sort(struct baseline *baseline);

#endif
