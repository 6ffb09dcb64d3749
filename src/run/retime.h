/* Measures times and memory of one cell again, against its yardstick. */
#ifndef RUN_RETIME_H
#define RUN_RETIME_H

#include "base/status.h"
#include "corpus/set_file.h"
#include "run/work_plan.h"
#include "verdict/baseline.h"

#include <signal.h>

/* What to measure again. All borrowed. */
struct retime_job {
	const struct set *set;
	const struct plan *plan; /* of the whole set */
	const char *corpus;
	const char *sha256; /* the bytes must still be these */
	const char *yardstick;
	const struct cell_key *key;
	unsigned rounds;                   /* 1 to RETIME_ROUNDS_MAX */
	const volatile sig_atomic_t *stop; /* as in run_rules; may be NULL */
};
#define RETIME_ROUNDS_MAX 31

/*
 * In each round the yardstick and the cell are timed one after the other, so
 * that a drift of the machine meets both; the ratio is the median over the
 * rounds. Short ones are repeated within a round until the clock can tell.
 * Memory is measured once. STATUS_NOT_FOUND: the set has no such corpus, cell
 * or yardstick; STATUS_MISMATCH: the corpus has other bytes now; those of
 * opening it; STATUS_CODEC; STATUS_CANCELLED; STATUS_NO_MEMORY.
 */
MUST_USE enum status retime(const struct retime_job *job,
			    struct relative ratios[RATIO_COUNT],
			    struct reason *why);

#endif
