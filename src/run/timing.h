/* The timing phase: codecs one after another with nothing else running. */
#ifndef RUN_TIMING_H
#define RUN_TIMING_H

#include "run/stopwatch.h"
#include "run/survey_run.h"

struct timing_job {
	const struct plan *plan;
	const struct run_rules *rules; /* rounds, stop, watch */
	struct ledger *ledger;
	int64_t survey;
	const struct stopwatch *watch;
};

/* Nothing else runs: all CPU is the codec's, its own threads' too. */
extern const struct cell_clock timing_clock;

/*
 * Times every cell that the survey holds as done and not yet timed, rounds
 * times, the codecs of a corpus in turn so that a drift of the machine meets
 * all alike; keeps medians and spreads. STATUS_LEDGER and the like: as
 * survey_run.
 */
MUST_USE enum status timing_run(const struct timing_job *job,
				struct reason *why);

#endif
