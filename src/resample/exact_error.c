#include "resample/exact_error.h"

#include <math.h>

#include "base/sum.h"

static double centred_sum(const double *values, size_t count, size_t start,
			  size_t length, double mean)
{
	double total = 0;

	for (size_t i = 0; i < length; i++)
		total += values[(start + i) % count] - mean;
	return total;
}

/* Error of the mean of count / length blocks begun anywhere below starts. */
static double error_of_blocks(const double *values, size_t count, size_t length,
			      size_t starts)
{
	double mean = sum_of(values, count) / (double)count;
	struct sum first = {0}, second = {0};
	double centre, variance;

	for (size_t start = 0; start < starts; start++) {
		double block = centred_sum(values, count, start, length, mean) /
			       (double)length;

		sum_add(&first, block);
		sum_add(&second, block * block);
	}
	centre = sum_value(&first) / (double)starts;
	variance = sum_value(&second) / (double)starts - centre * centre;
	return variance > 0 ? sqrt(variance * (double)length / (double)count)
			    : 0;
}

double error_moving(const double *values, size_t count, size_t length)
{
	return error_of_blocks(values, count, length, count - length + 1);
}

double error_circular(const double *values, size_t count, size_t length)
{
	return error_of_blocks(values, count, length, count);
}

double error_stationary(const double *values, size_t count, double length)
{
	double mean = sum_of(values, count) / (double)count;
	double n = (double)count, stay = 1 - 1 / length;
	struct sum total = {0};

	for (size_t lag = 0; lag < count; lag++) {
		double k = (double)lag, covariance = 0;
		double weight =
			(1 - k / n) * pow(stay, k) + (k / n) * pow(stay, n - k);

		for (size_t i = 0; i + lag < count; i++)
			covariance +=
				(values[i] - mean) * (values[i + lag] - mean);
		sum_add(&total,
			(lag ? 2 : 1) * (lag ? weight : 1) * covariance / n);
	}
	return sum_value(&total) > 0 ? sqrt(sum_value(&total) / n) : 0;
}
