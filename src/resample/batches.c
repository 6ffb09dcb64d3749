#include "resample/batches.h"

#include <assert.h>

#define COARSE 10

/* Set like DRIFT_LAG1. */
#define DRIFT_VARIANCE_RATIO 2.6

double lag1_without_bias(double lag1, double count)
{
	return (lag1 + 1 / count) / (1 - 4 / count);
}

static double spread(const double *means, size_t count, double *mean)
{
	double total = 0, squares = 0;

	for (size_t i = 0; i < count; i++)
		total += means[i];
	*mean = total / (double)count;
	for (size_t i = 0; i < count; i++)
		squares += (means[i] - *mean) * (means[i] - *mean);
	return squares;
}

static double lag1_corrected(const double *means, size_t count, double mean,
			     double squares)
{
	double products = 0;

	for (size_t i = 0; i + 1 < count; i++)
		products += (means[i] - mean) * (means[i + 1] - mean);
	return lag1_without_bias(products / squares, (double)count);
}

void batches_find(const double *residuals, size_t count,
		  struct batches *batches)
{
	double fine[BATCHES] = {0}, coarse[COARSE] = {0};
	double mean, coarse_mean, fine_squares, coarse_squares;

	assert(count >= BATCHES && count % BATCHES == 0);
	for (size_t i = 0; i < count; i++)
		fine[i / (count / BATCHES)] += residuals[i];
	for (size_t i = 0; i < BATCHES; i++)
		coarse[i / (BATCHES / COARSE)] += fine[i];
	fine_squares = spread(fine, BATCHES, &mean);
	coarse_squares = spread(coarse, COARSE, &coarse_mean);
	*batches = (struct batches){.variance_ratio = 1};
	if (!(fine_squares > 0))
		return;
	batches->lag1 = lag1_corrected(fine, BATCHES, mean, fine_squares);
	/* Sums, not means: a coarse sum has ten times a fine one's variance. */
	batches->variance_ratio = (coarse_squares / (COARSE - 1)) /
				  (fine_squares / (BATCHES - 1)) /
				  (BATCHES / COARSE);
	batches->drifts = batches->lag1 > DRIFT_LAG1 ||
			  batches->variance_ratio > DRIFT_VARIANCE_RATIO;
}
