/* Are intervals and brackets right about as often as they promise? A short
 * version of `ratefloor calibrate`, whose full run is in results/. */
#include "run/calibration_run.h"

#include "support/near.h"

#include <string.h>

static struct calibration run(const char *source, uint64_t symbols, size_t runs,
			      unsigned jobs)
{
	const struct calibration_rules rules = {
		.symbols = {symbols},
		.runs = {runs},
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
		cmocka_unit_test(slow_regimes_are_found),
		cmocka_unit_test(more_data_narrows_the_bracket),
		cmocka_unit_test(jobs_change_nothing),
		cmocka_unit_test(an_unknown_source_is_refused),
		cmocka_unit_test(a_stop_is_heeded),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
