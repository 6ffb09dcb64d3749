/* Runs a plan into a ledger: the one room that knows both tables. */
#ifndef RUN_SURVEY_RUN_H
#define RUN_SURVEY_RUN_H

#include "base/status.h"
#include "ledger/ledger.h"
#include "run/work_plan.h"

#include <signal.h>

/* How far a survey is; handed to the watcher after every piece of work. */
struct run_progress {
	size_t done, total;  /* pieces of work */
	double share;        /* of the estimated CPU time, 0 to 1 */
	double seconds;      /* since the run began */
	double seconds_left; /* estimate; negative while there is none */
	const char *corpus;  /* just worked on; borrowed */
	const char *what;    /* "xz 9e", "ngram", "timing" */
};

/* Counts for the exit code. */
struct run_outcome {
	int64_t survey;
	size_t failed, skipped;
	bool stopped; /* on request; --resume goes on */
};

struct run_rules {
	unsigned jobs;   /* threads for the sizes; at least 1 */
	unsigned orders; /* K, 1 to 32 */
	unsigned rounds; /* of timing; 0: no times */
	uint64_t seed;
	bool resume;  /* go on with the newest unfinished like survey */
	bool outside; /* corpora may lie outside the set file's folder */
	unsigned part, parts;
	const char *program; /* "ratefloor 0.1.0" */
	/* Called from any thread, one at a time; may be NULL. */
	void (*watch)(void *context, const struct run_progress *progress);
	void *context;
	/* Set to non-zero (a signal handler may) to stop after what is running.
	 */
	const volatile sig_atomic_t *stop;
};

/*
 * Measures every item of the plan that the ledger does not hold yet, one
 * transaction each, on rules->jobs threads, then the times alone. A failing
 * piece is recorded and the others go on. Facts are the same for any number of
 * jobs. STATUS_LEDGER, STATUS_IO, STATUS_NO_MEMORY: the ledger could not be
 * written; what is in it stays good.
 */
MUST_USE enum status survey_run(const struct plan *plan, struct ledger *ledger,
				const struct run_rules *rules,
				struct run_outcome *outcome,
				struct reason *why);

#endif
