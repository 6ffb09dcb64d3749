/* What one run of a source of known rate shows: for calibration. */
#ifndef GAP_TRIAL_H
#define GAP_TRIAL_H

#include "gap/analysis.h"

#define TRIAL_ROWS_MAX 12
#define TRIAL_NAME_BYTES 24

/* One estimator at the order that suits the source, bits per symbol. */
struct trial_row {
	char name[TRIAL_NAME_BYTES];
	bool known;   /* false: declined on this sample; nothing below is set */
	bool skipped; /* not known because it was not asked */
	double bits_per_symbol;
	bool has_interval;
	double low, high;
};

/* A bracket, or that there is none. */
struct trial_bracket {
	bool known, open_below;
	double low, high; /* low is 0 where open below */
};

struct trial {
	struct trial_row rows[TRIAL_ROWS_MAX];
	size_t row_count;
	unsigned trusted_order;
	bool drift_known, drifts; /* of the plug-in blocks at that order */
	bool bracket_known, open_below, not_calibrated;
	unsigned bracket_order;
	double bracket_low, bracket_high; /* low is 0 where open below */
	/* The same with the rows of the slow codes; not where none ran. */
	bool codes_ran;
	struct trial_bracket with_codes;
	/* First cell against the corrected entropy, both with blocks. */
	bool gap_known;
	double gap, gap_low, gap_high;
	double unpaired_width; /* root of the sum of squared widths */
};

/* The slow codes: only the bracket with_codes and their own rows see them. */
extern const char *const trial_codes[]; /* ended by NULL */

/*
 * order: of the grams at which plug-in, Grassberger, Chao-Wang-Jost and
 * crossfit are read. The rows: those four, known or not, then every quick code
 * row that ran, then the slow codes, ran or not, so that trials of the same
 * methods have the same rows. The slow codes stand last among fact's methods;
 * quick is the number of those before them.
 * seed names the draws. STATUS_NO_MEMORY.
 */
MUST_USE enum status trial_find(const struct corpus_fact *fact, size_t quick,
				uint64_t seed,
				const struct analysis_rules *rules,
				unsigned order, struct trial *trial);

#endif
