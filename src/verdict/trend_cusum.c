#include "verdict/trend.h"

#include <math.h>

#include "resample/normal.h"
#include "resample/tail.h"

/* A residual counts as no more than this in the spread, so that a change of
 * level is not taken for unruly nights. */
#define RESIDUAL_MOST 3
/* Fewer say nothing about the spread. */
#define SPREAD_NIGHTS 5
/* 99% point of the normal, in Wilson and Hilferty's form of chi-square. */
#define POINT_99 2.326347874
/* erfc has no smaller value to give. */
#define LEAST_P 1e-300

double trend_limit(size_t cells)
{
	/* TREND_NIGHTS / 2 is the 500 of Siegmund's form at k = 1/2. */
	return cells ? log(TREND_NIGHTS / 2.0 * (double)cells) - 1.17 : 0;
}

static double chi_square_99(double freedom)
{
	double part = 2 / (9 * freedom);
	double root = 1 - part + POINT_99 * sqrt(part);

	return freedom * root * root * root;
}

/* The normal score of Student's t. */
static double score(double t, double freedom)
{
	double p = student_upper(fabs(t), freedom);
	double z = -normal_quantile(p > LEAST_P ? p : LEAST_P);

	return t > 0 ? z : -z;
}

static void watch_spread(struct trend_cusum *cusum, double z)
{
	double held = fabs(z) > RESIDUAL_MOST ? RESIDUAL_MOST : z;
	double n;

	cusum->squares += held * held;
	cusum->residuals++;
	n = (double)cusum->residuals;
	cusum->spread = 1;
	if (cusum->residuals >= SPREAD_NIGHTS &&
	    cusum->squares > chi_square_99(n))
		cusum->spread = sqrt(cusum->squares / n);
}

void trend_learn(struct trend_cusum *cusum, const struct baseline_pair *pair)
{
	double square = pair->standard_error * pair->standard_error;
	double n = (double)++cusum->nights;

	cusum->mean += (pair->mean - cusum->mean) / n;
	cusum->variance += (square - cusum->variance) / n;
}

bool trend_step(struct trend_cusum *cusum, const struct baseline_pair *pair,
		double limit)
{
	double n = (double)cusum->nights, z, square, error;

	if (!cusum->nights) {
		trend_learn(cusum, pair);
		return false;
	}
	/* One night's error is a rough figure; all nights measure the same. */
	square = pair->standard_error * pair->standard_error;
	square = cusum->variance + (square - cusum->variance) / (n + 1);
	error = sqrt(square * (1 + 1 / n));
	if (!(error > 0)) {
		trend_learn(cusum, pair);
		return false;
	}
	z = score((pair->mean - cusum->mean) / error,
		  pair->effective_blocks > 2
			  ? (pair->effective_blocks - 1) * (n + 1)
			  : 1);
	cusum->sum += z / (cusum->spread > 1 ? cusum->spread : 1) - TREND_K;
	if (cusum->sum < 0)
		cusum->sum = 0;
	cusum->rising = cusum->sum > 0;
	watch_spread(cusum, z);
	trend_learn(cusum, pair);
	return cusum->sum > limit;
}

void trend_restart(struct trend_cusum *cusum)
{
	cusum->mean = cusum->variance = cusum->sum = 0;
	cusum->nights = 0;
	cusum->rising = false;
}
