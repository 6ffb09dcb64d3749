/* Runs estimators on many samples of sources of known rate. */
#ifndef RUN_CALIBRATION_RUN_H
#define RUN_CALIBRATION_RUN_H

#include "verdict/calibration.h"

#include <signal.h>

#define CALIBRATION_LENGTHS_MAX 4

struct calibration_rules {
	/* Symbols a sample, and how many samples, pair by pair. */
	uint64_t symbols[CALIBRATION_LENGTHS_MAX];
	size_t runs[CALIBRATION_LENGTHS_MAX]; /* at least 2 */
	/* Sources with fewer symbols are left out at this length. */
	unsigned alphabet_least[CALIBRATION_LENGTHS_MAX];
	/* Of the samples of a source, so many are given to the slow codes. */
	size_t codes[CALIBRATION_LENGTHS_MAX];
	bool gap[CALIBRATION_LENGTHS_MAX]; /* calibrate the gap of zlib 9 */
	size_t length_count;
	const char *source; /* only this one; NULL: all frozen ones */
	unsigned orders;    /* K */
	uint64_t seed;
	unsigned jobs;
	/* Called after every piece of work by one thread; may be NULL. */
	void (*watch)(void *context, double share, double seconds);
	void *context;
	const volatile sig_atomic_t *stop; /* as in run_rules; may be NULL */
};

struct calibration {
	struct calibration_rules rules;
	struct calibration_case *cases; /* owned; by length, then source */
	size_t case_count;
	double seconds; /* by the wall */
};

/*
 * The same for any number of jobs, but for seconds. STATUS_BAD_USAGE: no such
 * frozen source (source/frozen.h); STATUS_CANCELLED; STATUS_NO_MEMORY; a row
 * that fails on a sample ends it all with that row's status.
 */
MUST_USE enum status calibration_run(const struct calibration_rules *rules,
				     struct calibration *calibration,
				     struct reason *why);
void calibration_release(struct calibration *calibration);

#endif
