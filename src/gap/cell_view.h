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
 * sound cell. known is false, and all else but best_level zero, where no
 * reference was restarted at the cell's layout. STATUS_NO_MEMORY.
 */
MUST_USE enum status gap_stack_find(const struct ground *ground,
				    const struct lengths *lengths,
				    const struct cell_fact *cell,
				    struct gap_stack *stack);

#endif
