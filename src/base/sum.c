#include "base/sum.h"

#include <stdlib.h>

static double magnitude(double value)
{
	return value < 0 ? -value : value;
}

void sum_add(struct sum *sum, double value)
{
	double total = sum->total + value;

	if (magnitude(sum->total) >= magnitude(value))
		sum->lost += (sum->total - total) + value;
	else
		sum->lost += (value - total) + sum->total;
	sum->total = total;
}

double sum_value(const struct sum *sum)
{
	return sum->total + sum->lost;
}

double sum_of(const double *values, size_t count)
{
	struct sum sum = {0};

	for (size_t i = 0; i < count; i++)
		sum_add(&sum, values[i]);
	return sum_value(&sum);
}

double quantile_sorted(const double *sorted, size_t count, double p)
{
	double position = p * (double)(count - 1);
	size_t below = (size_t)position;
	double part = position - (double)below;

	if (below + 1 >= count)
		return sorted[count - 1];
	return sorted[below] + part * (sorted[below + 1] - sorted[below]);
}

static int ascending(const void *left, const void *right)
{
	double a = *(const double *)left, b = *(const double *)right;

	return (a > b) - (a < b);
}

void sort_reals(double *values, size_t count)
{
	qsort(values, count, sizeof(*values), ascending);
}
