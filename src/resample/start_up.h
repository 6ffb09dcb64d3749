/* Where a series that begins unlike the rest has come to its level. */
#ifndef RESAMPLE_START_UP_H
#define RESAMPLE_START_UP_H

#include "resample/bootstrap.h"

/*
 * How many blocks at the front are start-up: the d that makes the squared
 * standard error of the mean of the others least, sum of squares about their
 * mean over (blocks - d)^2: the marginal standard error rule of White 1997. Of
 * the blocks at most a tenth: what takes longer is no start-up.
 */
size_t start_up_blocks(const struct block_series *series);

#endif
