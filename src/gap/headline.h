/* One figure for each estimator, with its interval. */
#ifndef GAP_HEADLINE_H
#define GAP_HEADLINE_H

#include "gap/ground.h"

/* Whether the table says that the row's bits could be decoded. */
bool method_is_code(const char *method);

/*
 * The series a code row is judged by: the shortest. Choosing among several is
 * charged, log2 of their number. false where there is none.
 */
bool code_contribution(const struct method_fact *fact,
		       struct contribution *contribution, unsigned *order);

/* Fills view->estimates; needs its orders. */
MUST_USE enum status headlines_init(struct corpus_view *view,
				    const struct ground *ground);

#endif
