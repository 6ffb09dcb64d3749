/* The cells of a plan: what the codec sections of a set multiply to. */
#ifndef RUN_PLAN_CELLS_H
#define RUN_PLAN_CELLS_H

#include "run/work_plan.h"

/* True when the name is given, or none is. */
bool names_hold(const struct names *names, const char *name);

/*
 * Fills plan->cells: for each section its levels, times its containers, times
 * its options, times no dictionary and those of each size, times its layouts.
 * A dictionary makes no cell of the layout whole. As plan_init.
 */
MUST_USE enum status plan_choose_cells(struct plan *plan,
				       const struct selection *selection,
				       struct reason *why);

#endif
