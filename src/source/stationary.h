/* The stationary law of a model's rows. */
#ifndef SOURCE_STATIONARY_H
#define SOURCE_STATIONARY_H

#include "source/model.h"

/*
 * Writes model->stationary: elimination without subtraction (Grassmann,
 * Taksar, Heyman 1985) on the one closed class of rows, 0 elsewhere. Above
 * STATIONARY_DENSE_MAX rows the law must be that of the row sums, as it is for
 * counts of a cyclic text. STATUS_BAD_INPUT: more than one closed class, or too
 * large; STATUS_NO_MEMORY.
 */
MUST_USE enum status stationary_find(struct source_model *model,
				     struct reason *why);

#define STATIONARY_DENSE_MAX 1024

#endif
