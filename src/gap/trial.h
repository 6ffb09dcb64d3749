/* What one run of a source of known rate shows: for calibration. */
#ifndef GAP_TRIAL_H
#define GAP_TRIAL_H

#include "gap/analysis.h"

#define TRIAL_ROWS_MAX 12
#define TRIAL_NAME_BYTES 24

/* One estimator at the order that suits the source, bits per symbol. */
struct trial_row {
	char name[TRIAL_NAME_BYTES];
	bool known; /* false: declined on this sample; nothing below is set */
	double bits_per_symbol;
	bool has_interval;
	double low, high;
};

struct trial {
	struct trial_row rows[TRIAL_ROWS_MAX];
	size_t row_count;
	unsigned trusted_order;
	bool drift_known, drifts; /* of the plug-in blocks at that order */
	bool bracket_known, open_below, not_calibrated;
	unsigned bracket_order;
	double bracket_low, bracket_high; /* low is 0 where open below */
	/* First cell against the corrected entropy, both with blocks. */
	bool gap_known;
	double gap, gap_low, gap_high;
	double unpaired_width; /* root of the sum of squared widths */
};

/*
 * order: of the grams at which plug-in, Grassberger, Chao-Wang-Jost and
 * crossfit are read. The rows: those four, known or not, then every code row
 * that ran, so that trials of the same methods have the same rows.
 * seed names the draws. STATUS_NO_MEMORY.
 */
MUST_USE enum status trial_find(const struct corpus_fact *fact, uint64_t seed,
				const struct analysis_rules *rules,
				unsigned order, struct trial *trial);

#endif
