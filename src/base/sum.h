/* Long sums of reals that lose no digits, and order statistics. */
#ifndef BASE_SUM_H
#define BASE_SUM_H

#include <stddef.h>

/* Compensated running sum (Neumaier 1974); start from {0}. */
struct sum {
	double total, lost;
};

void sum_add(struct sum *sum, double value);
double sum_value(const struct sum *sum);
double sum_of(const double *values, size_t count);

/*
 * Quantile of sorted values by linear interpolation (Hyndman and Fan 1996,
 * type 7); count >= 1, 0 <= p <= 1.
 */
double quantile_sorted(const double *sorted, size_t count, double p);
void sort_reals(double *values, size_t count);

#endif
