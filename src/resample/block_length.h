/* How many neighbouring values a block bootstrap must keep together. */
#ifndef RESAMPLE_BLOCK_LENGTH_H
#define RESAMPLE_BLOCK_LENGTH_H

#include "base/status.h"

#include <stdbool.h>
#include <stddef.h>

/* Automatic lengths as the formulas give them: real, not yet rounded. */
struct block_length {
	double circular, stationary; /* values a block; >= 0 */
	bool degenerate; /* constant, or no long-run variance: both are 1 */
};

/*
 * Politis and White 2004 with the correction of Patton, Politis and White
 * 2009: flat-top lag window, bandwidth from the first run of insignificant
 * correlations. values are borrowed. STATUS_TOO_SHORT: fewer than 8 values;
 * STATUS_NO_MEMORY.
 */
MUST_USE enum status block_length_find(const double *values, size_t count,
				       struct block_length *length);

/* A real length as a usable one: rounded up, 1 to ceil(min(3 sqrt n, n/3)). */
size_t block_length_clamp(double length, size_t count);

/*
 * The lengths of an AR(1) series of n values with coefficient phi, at which
 * the automatic ones aim: the closed form of the same optimum.
 */
void block_length_of_ar1(double phi, size_t count, struct block_length *length);

#endif
