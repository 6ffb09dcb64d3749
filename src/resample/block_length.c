#include "resample/block_length.h"

#include <math.h>
#include <stdint.h>

#include "base/memory.h"
#include "base/sum.h"

/* Politis and White 2004, section 3: the empirical rule's c. */
#define SIGNIFICANCE 2.0
#define RUN_MIN 5

static size_t run_length(size_t count)
{
	size_t run = (size_t)ceil(sqrt(log10((double)count)));

	return run > RUN_MIN ? run : RUN_MIN;
}

/* R(k), divided by n whatever the lag, so that the sequence is positive. */
static double autocovariance(const double *centred, size_t count, size_t lag)
{
	double total = 0;

	for (size_t i = 0; i + lag < count; i++)
		total += centred[i] * centred[i + lag];
	return total / (double)count;
}

/* Smallest m >= 1 after which a whole run of lags is insignificant. */
static size_t significant_lags(const double *covariance, size_t lags,
			       size_t count)
{
	double limit = SIGNIFICANCE *
		       sqrt(log10((double)count) / (double)count) *
		       covariance[0];
	size_t run = run_length(count), quiet = 0, last = 0;

	for (size_t lag = 2; lag <= lags; lag++) {
		quiet = fabs(covariance[lag]) < limit ? quiet + 1 : 0;
		if (quiet == run)
			return lag - run;
	}
	for (size_t lag = 1; lag <= lags; lag++) {
		if (fabs(covariance[lag]) >= limit)
			last = lag;
	}
	return last ? last : 1;
}

static void lengths_of_moments(double g, double moment, size_t count,
			       struct block_length *length)
{
	double ratio = 2 * moment * moment / (g * g);
	double n = (double)count;

	*length = (struct block_length){
		.circular = cbrt(ratio / (4.0 / 3.0) * n),
		.stationary = cbrt(ratio / 2.0 * n),
	};
}

static void find_from_covariance(const double *covariance, size_t lags,
				 size_t count, struct block_length *length)
{
	size_t bandwidth = 2 * significant_lags(covariance, lags, count);
	double g = covariance[0], moment = 0;

	if (bandwidth > lags)
		bandwidth = lags;
	for (size_t lag = 1; lag <= bandwidth; lag++) {
		double part = (double)lag / (double)bandwidth;
		double window = part <= 0.5 ? 1 : 2 * (1 - part);

		g += 2 * window * covariance[lag];
		moment += 2 * window * (double)lag * covariance[lag];
	}
	/* No long-run variance: nothing to keep together, and no width. */
	if (g <= 0) {
		*length = (struct block_length){1, 1, true};
		return;
	}
	lengths_of_moments(g, moment, count, length);
}

enum status block_length_find(const double *values, size_t count,
			      struct block_length *length)
{
	double *centred, *covariance, mean;
	size_t lags;

	if (count < 8)
		return STATUS_TOO_SHORT;
	lags = (size_t)ceil(sqrt((double)count)) + run_length(count);
	if (lags > count - 1)
		lags = count - 1;
	TRY(memory_new(count + lags + 1, sizeof(*centred), &centred));
	covariance = centred + count;
	mean = sum_of(values, count) / (double)count;
	for (size_t i = 0; i < count; i++)
		centred[i] = values[i] - mean;
	for (size_t lag = 0; lag <= lags; lag++)
		covariance[lag] = autocovariance(centred, count, lag);
	if (covariance[0] > 0)
		find_from_covariance(covariance, lags, count, length);
	else
		*length = (struct block_length){1, 1, true};
	memory_free(centred);
	return STATUS_OK;
}

size_t block_length_clamp(double length, size_t count)
{
	double n = (double)count;
	double most = ceil(fmin(3 * sqrt(n), n / 3));
	double whole = ceil(length);

	if (!(whole >= 1))
		return 1;
	return (size_t)(whole > most && most >= 1 ? most : whole);
}

void block_length_of_ar1(double phi, size_t count, struct block_length *length)
{
	/* With unit innovations: g is the spectrum at 0, moment sum |k| R(k).
	 */
	double g = 1 / ((1 - phi) * (1 - phi));
	double moment = 2 * phi / ((1 - phi * phi) * (1 - phi) * (1 - phi));

	lengths_of_moments(g, moment, count, length);
}
