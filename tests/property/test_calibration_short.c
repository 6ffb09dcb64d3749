/* Are intervals and brackets right about as often as they promise? A short
 * version of `ratefloor calibrate`, whose full run is in results/. */
#include "run/calibration_run.h"

#include "support/near.h"

#include <math.h>
#include <string.h>

/* With slow codes on so many samples; longer ones with the gap of zlib. */
static struct calibration run_codes(const char *source, uint64_t symbols,
				    size_t runs, unsigned jobs, size_t codes)
{
	const struct calibration_rules rules = {
		.symbols = {symbols},
		.runs = {runs},
		.codes = {codes},
		.gap = {symbols > 200000},
		.length_count = 1,
		.source = source,
		.orders = 16,
		.seed = 11,
		.jobs = jobs,
	};
	struct calibration made;

	assert_int_equal(calibration_run(&rules, &made, NULL), STATUS_OK);
	assert_int_equal(made.case_count, 1);
	return made;
}

static struct calibration run(const char *source, uint64_t symbols, size_t runs,
			      unsigned jobs)
{
	return run_codes(source, symbols, runs, jobs, 0);
}

/* Nominal .95; at 60 runs Wilson's 99% interval reaches from .83 to .99. */
static void coverage_is_not_refuted(void **state)
{
	static const char *const names[] = {"zipf-bytes", "two-state",
					    "noisy-fast"};

	(void)state;
	for (size_t i = 0; i < 3; i++) {
		struct calibration made = run(names[i], 10000, 60, 1);
		const struct calibration_case *one = &made.cases[0];

		print_message("%s: own mean %.3f, bracket %.3f\n", names[i],
			      one->rows[0].own_mean.value, one->bracket.value);
		assert_string_equal(one->rows[0].name, "plug-in");
		assert_true(one->rows[0].own_mean.high >= .93);
		assert_true(one->bracket.high >= .93);
		assert_true(one->bracket_told.value >= .9);
		assert_true(one->drifts.low <= .05);
		calibration_release(&made);
	}
}

/* Median width over what the scatter of the estimates asks for. */
static double width_by_need(const struct calibration_row *row)
{
	double variance = row->rmse.value * row->rmse.value -
			  row->bias.value * row->bias.value;

	return row->width.value / (2 * 1.959964 * sqrt(variance));
}

/*
 * Where all symbols are alike, an estimate moves by chi-square terms alone:
 * n H has variance (K - 1) / 2 (Basharin 1959), the losses spread by K - 1.
 * The error of a scatter of 150 samples is 6%.
 */
static void intervals_on_even_symbols_are_no_wider(void **state)
{
	struct calibration made = run("uniform-201", 10000, 150, 1);
	const struct calibration_case *one = &made.cases[0];

	(void)state;
	for (size_t r = 0; r < 4; r++) {
		double ratio = width_by_need(&one->rows[r]);

		print_message("%s: width by need %.3f\n", one->rows[r].name,
			      ratio);
		assert_near(ratio, 1, .18);
	}
	calibration_release(&made);
}

/* zlib fills its window first: that is no scatter from sample to sample. */
static void a_paired_gap_is_as_wide_as_it_scatters(void **state)
{
	struct calibration made = run("sparse-order-2", 262144, 16, 2);
	const struct calibration_case *one = &made.cases[0];

	(void)state;
	print_message("%zu gaps, width by need %.3f\n", one->gap.trials,
		      one->gap_width_by_need);
	assert_true(one->gap.trials >= 13);
	/* The scatter of 16 is known to 18%. */
	assert_near(one->gap_width_by_need, 1, .5);
	assert_true(one->gap.high >= .92);
	calibration_release(&made);
}

/* A regime lasts as long as a block: blocks alone find 8 of 10. */
static void regimes_inside_blocks_are_found(void **state)
{
	struct calibration made = run("regimes-bits", 100000, 25, 1);
	struct calibration still = run("noisy-long", 100000, 25, 1);

	(void)state;
	assert_int_equal(made.cases[0].drifts.hits,
			 made.cases[0].drifts.trials);
	assert_true(still.cases[0].drifts.value <= .12);
	calibration_release(&made);
	calibration_release(&still);
}

/* One more code can only lower the upper edge. */
static void codes_never_widen_the_bracket(void **state)
{
	struct calibration made = run_codes("noisy-long", 10000, 12, 1, 6);
	const struct calibration_case *one = &made.cases[0];

	(void)state;
	assert_true(one->with_codes.covers.trials >= 3);
	assert_true(one->with_codes.covers.trials <= 6);
	assert_true(one->with_codes.covers.trials ==
		    one->without_codes.covers.trials);
	assert_true(one->codes_narrow.value > 0);
	assert_true(one->codes_narrow.value <= 1 + 1e-12);
	assert_string_equal(one->rows[one->row_count - 2].name, "mix");
	assert_int_equal(one->rows[one->row_count - 2].told.trials, 6);
	calibration_release(&made);
}

static void slow_regimes_are_found(void **state)
{
	struct calibration made = run("regimes-letters", 10000, 30, 1);

	(void)state;
	assert_true(made.cases[0].drifts.high >= .75);
	assert_true(made.cases[0].drifts.value > .5);
	calibration_release(&made);
}

/* Ten times the data: narrower, on every kind of source. */
static void more_data_narrows_the_bracket(void **state)
{
	static const char *const names[] = {"uniform-201", "zipf-bytes",
					    "chain-32", "two-state",
					    "noisy-sticky"};

	(void)state;
	for (size_t i = 0; i < 5; i++) {
		struct calibration few = run(names[i], 10000, 9, 1);
		struct calibration many = run(names[i], 100000, 5, 1);
		double before = few.cases[0].bracket_width.value;
		double after = many.cases[0].bracket_width.value;

		print_message("%s: width %.4f, then %.4f\n", names[i], before,
			      after);
		assert_true(before > 0);
		assert_true(after <= 1.3 * before);
		calibration_release(&few);
		calibration_release(&many);
	}
}

static void jobs_change_nothing(void **state)
{
	struct calibration one = run("hidden-letters", 10000, 8, 1);
	struct calibration two = run("hidden-letters", 10000, 8, 2);

	(void)state;
	assert_int_equal(one.cases[0].bracket.hits, two.cases[0].bracket.hits);
	for (size_t r = 0; r < one.cases[0].row_count; r++) {
		const struct calibration_row *a = &one.cases[0].rows[r];
		const struct calibration_row *b = &two.cases[0].rows[r];

		assert_int_equal(a->own_mean.hits, b->own_mean.hits);
		assert_near(a->bias.value, b->bias.value, 0);
		assert_near(a->width.value, b->width.value, 0);
	}
	calibration_release(&one);
	calibration_release(&two);
}

static void an_unknown_source_is_refused(void **state)
{
	const struct calibration_rules rules = {
		.symbols = {10000},
		.runs = {2},
		.length_count = 1,
		.source = "no-such-source",
		.orders = 16,
		.jobs = 1,
	};
	struct calibration made;
	struct reason why = {""};

	(void)state;
	assert_int_equal(calibration_run(&rules, &made, &why),
			 STATUS_BAD_USAGE);
	assert_non_null(strstr(why.text, "no-such-source"));
}

static void a_stop_is_heeded(void **state)
{
	static const volatile sig_atomic_t stop = 1;
	const struct calibration_rules rules = {
		.symbols = {10000},
		.runs = {2},
		.length_count = 1,
		.source = "two-state",
		.orders = 16,
		.jobs = 1,
		.stop = &stop,
	};
	struct calibration made;
	struct reason why = {""};

	(void)state;
	assert_int_equal(calibration_run(&rules, &made, &why),
			 STATUS_CANCELLED);
	assert_string_equal(why.text, "stopped on request");
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(coverage_is_not_refuted),
		cmocka_unit_test(intervals_on_even_symbols_are_no_wider),
		cmocka_unit_test(a_paired_gap_is_as_wide_as_it_scatters),
		cmocka_unit_test(regimes_inside_blocks_are_found),
		cmocka_unit_test(codes_never_widen_the_bracket),
		cmocka_unit_test(slow_regimes_are_found),
		cmocka_unit_test(more_data_narrows_the_bracket),
		cmocka_unit_test(jobs_change_nothing),
		cmocka_unit_test(an_unknown_source_is_refused),
		cmocka_unit_test(a_stop_is_heeded),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
