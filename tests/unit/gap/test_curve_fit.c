/* Do the fits find what a reference library finds, and refuse what they must?
 */
#include "gap/curve_fit.h"

#include "support/near.h"
#include "support/tiny_survey.h"

#include <math.h>
#include <string.h>

/*
 * y = 2.1 + 30 n^-.45 with bumps of .004 at n = 2^10 .. 2^22: SciPy 1.10
 * curve_fit and R 4.2 nls give h 2.10080937, A 30.3632834, exponent .45154429.
 */
static void agrees_with_reference_fits(void **state)
{
	static const int bumps[13] = {1,  -1, 1,  1, -1, -1, 1,
				      -1, 1,  -1, 1, 1,  -1};
	double n[13], y[13];
	struct curve curve;

	(void)state;
	for (int i = 0; i < 13; i++) {
		n[i] = ldexp(1, 10 + i);
		y[i] = 2.1 + 30 * pow(n[i], -.45) + .004 * bumps[i];
	}
	curve = curve_fit(CURVE_HILBERG, n, y, 13);
	assert_near(curve.h, 2.10080937, 2e-6);
	assert_near(curve.a, 30.3632834, 2e-3);
	assert_near(1 - curve.b, .45154429, 1e-5);
	assert_near(curve_at(&curve, 1024), y[0], .01);
}

/* Each form finds its own parameters again in exact data. */
static void each_form_recovers_itself(void **state)
{
	(void)state;
	for (unsigned form = 0; form < CURVE_FORMS; form++) {
		const struct curve truth = {(enum curve_form)form, 1.4, 3, .6};
		double n[10], y[10];
		struct curve curve;

		for (int i = 0; i < 10; i++) {
			n[i] = ldexp(1, 12 + i);
			y[i] = curve_at(&truth, n[i]);
		}
		curve = curve_fit((enum curve_form)form, n, y, 10);
		assert_near(curve.h, 1.4, 1e-5);
		assert_near(curve.a, 3, 1e-3);
		assert_near(curve.b, .6, 1e-4);
	}
}

static void a_rate_is_never_negative(void **state)
{
	double n[6], y[6];
	struct curve curve;

	(void)state;
	for (int i = 0; i < 6; i++) {
		n[i] = ldexp(1, 10 + i);
		y[i] = 3 - .4 * i;
	}
	curve = curve_fit(CURVE_HILBERG, n, y, 6);
	assert_true(curve.h >= 0);
}

/* 800 blocks of 5000 symbols of a code that learns as h + A n^(b-1). */
static struct extrapolation_row row_of(size_t blocks, double a, double b)
{
	struct survey survey;
	struct analysis analysis;
	struct extrapolation_row row;
	struct series *series;
	double before = 0;

	tiny_survey(&survey, blocks, 5000);
	series = tiny_method(&survey, "uniform", 1)->findings.series;
	tiny_series(&survey, series, 2, 0, 1);
	for (size_t i = 0; i < blocks; i++) {
		double n = 5000.0 * (double)(i + 1);
		double bits = n * (2 + a * pow(n, b - 1));

		series->costs.block_q16[i] = llround((bits - before) * 65536);
		before = bits;
	}
	series->costs.headline_q16 = costs_block_total(&series->costs);
	tiny_analyse(&survey, &analysis);
	row = analysis.corpora[0].extrapolation;
	analysis_release(&analysis);
	survey_release(&survey);
	return row;
}

static void the_spread_holds_the_limit(void **state)
{
	struct extrapolation_row row = row_of(800, 20, .5);

	(void)state;
	assert_true(row.known);
	assert_string_equal(row.method, "uniform");
	assert_int_equal(row.fits, 6);
	/* One of the six is the form that made the curve. */
	assert_true(row.low <= 2.0001 && row.high >= 1.9999);
	assert_near(row.last, 2.01, 1e-3);
	assert_true(row.miss < .01);
}

static void it_refuses_with_a_reason(void **state)
{
	struct extrapolation_row row = row_of(100, 20, .5);

	(void)state;
	assert_false(row.known);
	assert_non_null(strstr(row.reason, "needs 1000000"));
	row = row_of(800, -20, .5);
	assert_false(row.known);
	assert_non_null(strstr(row.reason, "rise on the way"));
	/* Still falling fast: where to is anybody's guess. */
	row = row_of(800, 30, .95);
	assert_false(row.known);
	assert_non_null(strstr(row.reason, "disagree by"));
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(agrees_with_reference_fits),
		cmocka_unit_test(each_form_recovers_itself),
		cmocka_unit_test(a_rate_is_never_negative),
		cmocka_unit_test(the_spread_holds_the_limit),
		cmocka_unit_test(it_refuses_with_a_reason),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
