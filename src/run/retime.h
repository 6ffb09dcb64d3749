/* Measures times and memory of one cell again, against its yardstick. */
#ifndef RUN_RETIME_H
#define RUN_RETIME_H

#include "base/status.h"
#include "corpus/set_file.h"
#include "run/work_plan.h"
#include "verdict/baseline.h"

#include <signal.h>

#define RETIME_ROUNDS 9

/* What to measure again. All borrowed. */
struct retime_job {
	const struct set *set;
	const struct plan *plan; /* of the whole set */
	const char *corpus;
	const char *sha256; /* the bytes must still be these */
	const char *yardstick;
	const struct cell_key *key;
	/*
	 * Ratios of times that need no closer look: once both are at or below
	 * theirs after three rounds, the rest of the rounds is saved. NULL: all
	 * rounds.
	 */
	const double *enough; /* RATIO_COUNT of them; times are read */
	bool memory;          /* measure memory, too */
	const volatile sig_atomic_t *stop; /* as in run_rules; may be NULL */
};

struct retime_result {
	struct relative ratios[RATIO_COUNT];
	/* How far the yardstick's rounds lie above its best, as a share, by
	 * the median: a busy machine shows here. */
	double unrest;
};

/*
 * In each of RETIME_ROUNDS rounds (fewer where a pass takes long) the yardstick
 * and the cell are timed one after the other, several times where a pass is
 * short. What disturbs a pass only ever lengthens it, so the ratio is that of
 * the two shortest passes. STATUS_NOT_FOUND: the set has no such corpus, cell
 * or yardstick; STATUS_MISMATCH: the corpus has other bytes now; those of
 * opening it; STATUS_CODEC; STATUS_CANCELLED; STATUS_NO_MEMORY.
 */
MUST_USE enum status retime(const struct retime_job *job,
			    struct retime_result *result, struct reason *why);
/* Lets a disturbance pass before the next attempt. */
void retime_wait(unsigned seconds);

#endif
