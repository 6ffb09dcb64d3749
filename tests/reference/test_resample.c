/* Do the resampling formulas give the published and closed-form values? */
#include "resample/block_length.h"
#include "resample/bootstrap.h"
#include "resample/exact_error.h"
#include "resample/multiplicity.h"
#include "resample/normal.h"

#include <math.h>

#include "base/random.h"
#include "base/sum.h"
#include "support/near.h"
#include "support/series.h"

static void log_lynx(double values[114])
{
	for (size_t i = 0; i < 114; i++)
		values[i] = log(series_lynx[i]);
}

/*
 * Standard errors of the mean of log lynx in blocks of 19: the block
 * distribution enumerated in R and in Python, which agree to all digits.
 */
static void exact_errors_of_log_lynx(void **state)
{
	double values[114];

	(void)state;
	log_lynx(values);
	assert_near(error_circular(values, 114, 19), .129824343619, 1e-11);
	assert_near(error_moving(values, 114, 19), .126586115277, 1e-11);
	assert_near(error_stationary(values, 114, 19), .119873982280, 1e-11);
	/* i.i.d.: blocks of one value. */
	assert_near(error_circular(values, 114, 1), .119895312641, 1e-11);
}

/* Politis and White 2004 with the 2009 correction, worked in R and Python. */
static void automatic_lengths_of_published_series(void **state)
{
	struct block_length length;
	double values[114];

	(void)state;
	assert_int_equal(block_length_find(series_warmth, 60, &length),
			 STATUS_OK);
	assert_near(length.circular, 4.79083002176, 1e-10);
	assert_near(length.stationary, 4.18517551688, 1e-10);
	assert_int_equal(block_length_find(series_sunspots, 289, &length),
			 STATUS_OK);
	assert_near(length.circular, 21.7532334405, 1e-9);
	assert_near(length.stationary, 19.0031997785, 1e-9);
	log_lynx(values);
	assert_int_equal(block_length_find(values, 114, &length), STATUS_OK);
	assert_near(length.circular, .529389, 5e-7);
	assert_near(length.stationary, .462464, 5e-7);
	assert_int_equal(block_length_clamp(length.circular, 114), 1);
}

/* b = ((2 phi / (1 - phi^2))^2 n)^(1/3), times 1.5^(1/3) for circular:
 * Politis and White 2004, section 3, for an AR(1). */
static void lengths_of_ar1(void **state)
{
	static const struct {
		double phi;
		size_t count;
		double stationary, circular;
	} rows[] = {
		{.5, 200, 7.084, 8.110},
		{.5, 1000, 12.114, 13.867},
		{.5, 10000, 26.10, 29.88},
		{.7, 1000, 19.605, 22.442},
	};
	struct block_length length;

	(void)state;
	for (size_t i = 0; i < sizeof(rows) / sizeof(rows[0]); i++) {
		block_length_of_ar1(rows[i].phi, rows[i].count, &length);
		assert_near(length.stationary, rows[i].stationary, 5e-3);
		assert_near(length.circular, rows[i].circular, 5e-3);
	}
}

/* Medians over 50 runs were 10.4 and 12.0 in a separate program: mildly below
 * the aim of 12.1 and 13.9, as Patton, Politis and White 2009 report too. */
static void estimated_lengths_of_ar1_are_near(void **state)
{
	static double values[1000];
	double lengths[50];

	(void)state;
	for (size_t run = 0; run < 50; run++) {
		struct block_length length;
		struct random_stream random;
		double x = 0;

		random_init(&random, 11, run);
		for (size_t i = 0; i < 1000; i++) {
			x = .5 * x +
			    normal_quantile(random_unit(&random) + 0x1p-54);
			values[i] = x;
		}
		assert_int_equal(block_length_find(values, 1000, &length),
				 STATUS_OK);
		lengths[run] = length.circular;
	}
	sort_reals(lengths, 50);
	assert_near(quantile_sorted(lengths, 50, .5), 12.0, 1.9);
}

/* Benjamini and Hochberg 1995, section 3.2: 15 tests, 4 rejected by theirs,
 * 3 by Bonferroni and Holm; Yekutieli's 3 by arithmetic. */
static void fifteen_tests(void **state)
{
	static const double p[15] = {.0001, .0004, .0019, .0095, .0201,
				     .0278, .0298, .0344, .0459, .3240,
				     .4262, .5719, .6528, .7590, 1};
	double adjusted[3][15];
	size_t rejected[3] = {0};

	(void)state;
	assert_int_equal(adjust_holm(p, 15, adjusted[0]), STATUS_OK);
	assert_int_equal(adjust_hochberg(p, 15, adjusted[1]), STATUS_OK);
	assert_int_equal(adjust_yekutieli(p, 15, adjusted[2]), STATUS_OK);
	for (size_t i = 0; i < 45; i++)
		rejected[i / 15] += adjusted[i / 15][i % 15] <= .05;
	assert_int_equal(rejected[0], 3);
	assert_int_equal(rejected[1], 4);
	assert_int_equal(rejected[2], 3);
	/* R's p.adjust(p, "holm")[3] and (p, "BH")[4]. */
	assert_near(adjusted[0][2], .0247, 1e-12);
	assert_near(adjusted[1][3], .035625, 1e-12);
}

/* Normal quantiles: SciPy 1.10 special.ndtri. Student: R's qt(). */
static void quantiles(void **state)
{
	static const double values[] = {1, 2, 4, 8, 16, 32, 64, 100, 128, 200};

	(void)state;
	assert_near(normal_quantile(.975), 1.959963984540054, 1e-13);
	assert_near(normal_quantile(1e-10), -6.3613409024040557, 1e-11);
	assert_near(normal_quantile(.5), 0, 0);
	assert_near(student_quantile(.975, 7), 2.364624, 1e-3);
	assert_near(student_quantile(.975, 10), 2.228139, 1e-4);
	assert_near(student_quantile(.025, 30), -2.042272, 1e-5);
	/* Type 7 of Hyndman and Fan 1996: R's quantile(). */
	assert_near(quantile_sorted(values, 10, .025), 1.225, 1e-12);
	assert_near(quantile_sorted(values, 10, .1), 1.9, 1e-12);
	assert_near(quantile_sorted(values, 10, .5), 24, 1e-12);
	assert_near(quantile_sorted(values, 10, .975), 183.8, 1e-12);
}

/*
 * Log-loss of a two-state chain by block; its long-run variance is known
 * exactly: for leaving probabilities a and b the loss is a function of the
 * transition, and the sum over lags is a geometric series (ratio 1 - a - b).
 */
static double chain_error(double a, double b, unsigned runs, double *mean)
{
	static double bits[100], symbols[100];
	const struct bootstrap_rules rules = {1999, .95, 5, "chain"};
	struct bootstrap *bootstrap;
	struct random_stream random;
	double squares = 0, first = 0;

	assert_int_equal(bootstrap_new(&rules, &bootstrap), STATUS_OK);
	for (unsigned run = 0; run < runs; run++) {
		struct bootstrap_result result;
		int at = 0;

		random_init(&random, 77, run);
		for (size_t i = 0; i < 100; i++) {
			bits[i] = 0;
			symbols[i] = 500;
			for (size_t t = 0; t < 500; t++) {
				double leave = at ? b : a;
				int leaves = random_unit(&random) < leave;

				bits[i] -= log2(leaves ? leave : 1 - leave);
				at ^= leaves;
			}
		}
		assert_int_equal(bootstrap_interval(
					 bootstrap,
					 &(struct block_series){bits, symbols,
								100, 0, false},
					 &result),
				 STATUS_OK);
		squares += result.standard_error * result.standard_error;
		first += result.mean;
	}
	bootstrap_free(bootstrap);
	*mean = first / runs;
	return squares / runs * 50000;
}

static void long_run_variances(void **state)
{
	double mean, variance;

	(void)state;
	/* 400 runs: the mean square of a variance estimate from about 90
	 * blocks is 15% of it, so .75% of the mean; four of those and 2% for
	 * the blocks' own bias. */
	variance = chain_error(.1, .3, 400, &mean);
	assert_near(mean, .5720694200, 1e-3);
	assert_near(variance, 1.193004, .05 * 1.193004);
	variance = chain_error(.1, .1, 400, &mean);
	assert_near(variance, .904358, .05 * .904358);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(exact_errors_of_log_lynx),
		cmocka_unit_test(automatic_lengths_of_published_series),
		cmocka_unit_test(lengths_of_ar1),
		cmocka_unit_test(estimated_lengths_of_ar1_are_near),
		cmocka_unit_test(fifteen_tests),
		cmocka_unit_test(quantiles),
		cmocka_unit_test(long_run_variances),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
