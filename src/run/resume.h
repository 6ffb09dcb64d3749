/* Which part of a plan an unfinished survey already holds. */
#ifndef RUN_RESUME_H
#define RUN_RESUME_H

#include "ledger/survey.h"
#include "run/survey_run.h"

#define RESUME_DIGEST_BYTES 65

/*
 * The same text for the same set file, program, seed, orders and selection,
 * and for every part, so that parts can be merged.
 */
MUST_USE enum status resume_digest(const struct plan *plan,
				   const struct run_rules *rules,
				   char text[RESUME_DIGEST_BYTES]);

/* Whether all that the item would measure is there. */
bool resume_holds(const struct survey *held, const struct plan *plan,
		  const struct plan_item *item);

/* Rows and cells that are recorded as failed. */
size_t resume_failed(const struct survey *held);

#endif
