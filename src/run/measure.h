/* One piece of work: rows of table 1 or a cell of table 2 on a corpus. */
#ifndef RUN_MEASURE_H
#define RUN_MEASURE_H

#include "ledger/survey.h"
#include "run/work_plan.h"

/* What a group of rows needs; all borrowed. */
struct measure_rows {
	const struct plan_item *item;
	const struct sequence *sequence;
	const struct cuts *cuts;
	unsigned orders;
	/* Takes each row's fact as it is found; the fact is borrowed. */
	void (*put)(void *context, const struct plan_item *item, size_t place,
		    const struct method_fact *method);
	void *context;
};

/* Never fails: a failure is a fact with its outcome and reason. */
void measure_rows(const struct measure_rows *job);
/* Likewise; the fact is released by the caller. */
void measure_cell(const struct plan_cell *cell, const struct sequence *sequence,
		  const struct cuts *cuts, struct cell_fact *fact);

/*
 * Fills the libraries that the codecs run on, with versions at run time; of
 * the set's own codecs the digest of the program or object; and last the
 * reference with its version.
 */
MUST_USE enum status measure_libraries(const struct plan *plan,
				       struct survey *survey);

#endif
