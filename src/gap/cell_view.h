/* Gaps: what each codec, level and layout leaves above the floor. */
#ifndef GAP_CELL_VIEW_H
#define GAP_CELL_VIEW_H

#include "gap/lengths.h"

/* Fills view->cells; needs its orders and floor. */
MUST_USE enum status cells_init(struct corpus_view *view,
				const struct ground *ground,
				const struct lengths *lengths);

/*
 * The identity achieved = floor + restart + family + effort + framing of one
 * sound cell.
 */
struct gap_stack gap_stack_of(const struct corpus_fact *fact,
			      const struct lengths *lengths,
			      const struct cell_fact *cell);

#endif
