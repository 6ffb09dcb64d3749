/* Batch means: is a series of blocks still, or does it drift? */
#ifndef RESAMPLE_BATCHES_H
#define RESAMPLE_BATCHES_H

#include <stdbool.h>
#include <stddef.h>

#define BATCHES 100

/* Beyond this a series drifts: set where 12 sources of known rate gave under
 * 2% false alarms. */
#define DRIFT_LAG1 0.25

/*
 * A lag-1 correlation without the bias that a series of count values gives it
 * (Kendall 1954: -(1 + 4 rho) / n).
 */
double lag1_without_bias(double lag1, double count);

struct batches {
	/*
	 * Lag-1 correlation of the 100 batch means, without its bias. 0 for a
	 * constant series.
	 */
	double lag1;
	/* Long-run variance of 10 batches over that of 100; 1 if constant. */
	double variance_ratio;
	bool drifts; /* lag1 > .25 or variance_ratio > 2.6 */
};

/*
 * residuals: bits less mean times symbols of each block, count >= 100 of them
 * and a multiple of 100; borrowed.
 */
void batches_find(const double *residuals, size_t count,
		  struct batches *batches);

#endif
