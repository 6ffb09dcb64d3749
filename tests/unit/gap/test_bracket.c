/* Is the bracket what its formula says, and are its failures said aloud? */
#include "support/near.h"
#include "support/tiny_survey.h"

#include <math.h>
#include <string.h>

/* Fair bits, 100 blocks: GR_k = 1 at orders 1 to 4; cross-fits as asked. */
static void build(struct survey *survey, const double crossfit[4],
		  double scatter)
{
	struct method_fact *row;

	tiny_survey(survey, 100, 4000);
	tiny_grams(survey, 4, 1, scatter);
	row = tiny_method(survey, "crossfit", 4);
	for (unsigned k = 1; k <= 4; k++) {
		row->findings.series[k - 1].order = k;
		tiny_series(survey, &row->findings.series[k - 1],
			    crossfit[k - 1], 0, k);
	}
}

static struct bracket_row bracket_of(struct survey *survey)
{
	struct analysis analysis;
	struct bracket_row row;

	tiny_analyse(survey, &analysis);
	row = analysis.corpora[0].bracket;
	if (row.known)
		assert_true(row.low <= row.high);
	analysis_release(&analysis);
	survey_release(survey);
	return row;
}

static const double fits[4] = {1.02, 1.03, 1.05, 1.1};

static void edges_without_scatter(void **state)
{
	struct survey survey;
	struct bracket_row row;

	(void)state;
	build(&survey, fits, 0);
	row = bracket_of(&survey);
	assert_true(row.known && !row.open_below && !row.not_calibrated);
	/* K = 4 is never k^ itself; w = 0, D = 0. */
	assert_int_equal(row.order, 3);
	assert_near(row.low, 1, 1e-6);
	assert_near(row.high, 1.02, 1e-6);
	assert_string_equal(row.upper_by, "crossfit order 1");
}

static void a_shorter_code_lowers_the_upper_edge(void **state)
{
	struct survey survey;
	struct bracket_row row;

	(void)state;
	build(&survey, fits, 0);
	tiny_series(&survey,
		    tiny_method(&survey, "uniform", 1)->findings.series, 1.01,
		    0, 1);
	row = bracket_of(&survey);
	assert_near(row.high, 1.01, 1e-6);
	assert_string_equal(row.upper_by, "uniform");
}

/* Blocks scattered evenly by 10%: sd .1 / sqrt(3) each, 100 of them. */
static void the_lower_edge_lies_w_below(void **state)
{
	struct survey survey;
	struct bracket_row row;
	double w = 1.96 * .1 / sqrt(3) / 10;

	(void)state;
	build(&survey, fits, .1);
	row = bracket_of(&survey);
	assert_true(row.known);
	assert_near(1 - row.low, w, .35 * w);
}

/* Halves that see 1.5% less: still stable, and D widens by as much. */
static void growth_between_halves_lowers_it(void **state)
{
	struct survey survey;
	struct bracket_row row;
	struct findings *ngram;

	(void)state;
	build(&survey, fits, 0);
	ngram = &survey.corpora[0].methods[0].findings;
	for (int half = 0; half < 2; half++) {
		struct gram_counts *counts = &ngram->orders[2].half[half];

		counts->grassberger_q16 +=
			llround((double)counts->positions * .015 * 65536);
	}
	row = bracket_of(&survey);
	assert_true(row.known);
	assert_int_equal(row.order, 3);
	assert_near(row.low, .985, 1e-6);
}

/* Grams of order k^ + 1 mostly seen once: both corrections are far too low. */
static void make_order_4_unseen(struct survey *survey)
{
	struct gram_counts *all =
		&survey->corpora[0].methods[0].findings.orders[3].all;

	all->once = all->positions * 6 / 10;
	all->twice = all->once / 4;
	/* h_4 = .5 at either correction, less what CWJ adds for the unseen. */
	all->grassberger_q16 += llround((double)all->positions * .5 * 65536);
	all->psi_q16 += llround((double)all->positions * 6 * 65536);
}

static void unseen_grams_do_not_widen_it(void **state)
{
	struct survey survey;
	struct bracket_row row;

	(void)state;
	build(&survey, fits, 0);
	make_order_4_unseen(&survey);
	/* h_3 lies .01 below h_2: order 4 is taken to win no more than that. */
	survey.corpora[0].methods[0].findings.orders[2].all.grassberger_q16 +=
		4000 * 65536;
	for (int half = 0; half < 2; half++)
		survey.corpora[0]
			.methods[0]
			.findings.orders[2]
			.half[half]
			.grassberger_q16 += 2000 * 65536;
	row = bracket_of(&survey);
	assert_true(row.known);
	assert_int_equal(row.order, 3);
	assert_near(row.low, .98, 1e-6);
}

/* Order 3 won nothing; but unseen grams of order 4 cannot rule out 1%. */
static void unseen_grams_leave_a_percent(void **state)
{
	struct survey survey;
	struct bracket_row row;

	(void)state;
	build(&survey, fits, 0);
	make_order_4_unseen(&survey);
	row = bracket_of(&survey);
	assert_true(row.known);
	assert_int_equal(row.order, 3);
	assert_near(row.low, .99, 1e-6);
}

/* Seen well, the same fall of h_4 is believed. */
static void seen_grams_do(void **state)
{
	struct survey survey;
	struct bracket_row row;
	struct gram_counts *all;

	(void)state;
	build(&survey, fits, 0);
	all = &survey.corpora[0].methods[0].findings.orders[3].all;
	all->grassberger_q16 += llround((double)all->positions * .5 * 65536);
	all->psi_q16 += llround((double)all->positions * .4 * 65536);
	row = bracket_of(&survey);
	assert_true(row.known);
	/* The higher of .5 and .6, less what psi leaves out: 1 / 2c. */
	assert_near(row.low, .6, 1e-3);
}

static void a_code_below_refutes_it(void **state)
{
	struct survey survey;
	struct bracket_row row;

	(void)state;
	build(&survey, fits, 0);
	tiny_cell(&survey, "xz", "6", 0, 40000);
	row = bracket_of(&survey);
	assert_true(row.known && row.open_below);
	assert_near(row.low, 0, 0);
}

static void drifting_blocks_are_not_calibrated(void **state)
{
	struct survey survey;
	struct bracket_row row;
	struct costs *costs;

	(void)state;
	build(&survey, fits, .1);
	costs = &survey.corpora[0].methods[0].findings.series[2].costs;
	for (size_t i = 0; i < 100; i++)
		costs->block_q16[i] +=
			(i / 4 % 2 ? 1 : -1) * (int64_t)(1 << 16) * 300;
	row = bracket_of(&survey);
	assert_true(!row.known || row.not_calibrated);
}

/* Blocks that are still, in which parts hang together: .3 of 400. */
static void drift_inside_blocks_is_flagged(void **state)
{
	(void)state;
	for (int ppm = 200000; ppm <= 300000; ppm += 100000) {
		struct survey survey;
		struct findings *ngram;
		struct bracket_row row;

		build(&survey, fits, .01);
		ngram = &survey.corpora[0].methods[0].findings;
		findings_note(ngram, "lag1_parts", 400);
		findings_note(ngram, "lag1_ppm_3", ppm);
		row = bracket_of(&survey);
		assert_true(row.known);
		assert_int_equal(row.order, 3);
		assert_int_equal(row.not_calibrated, ppm > 250000);
	}
}

static void refusals_say_what_would_do(void **state)
{
	struct survey survey;
	struct bracket_row row;

	(void)state;
	build(&survey, fits, 0);
	survey.corpora[0].kind = SYMBOL_WORD;
	row = bracket_of(&survey);
	assert_false(row.known);
	assert_non_null(strstr(row.reason, "letters27"));

	tiny_survey(&survey, 100, 99);
	row = bracket_of(&survey);
	assert_string_equal(row.reason,
			    "9900 symbols; the bracket needs 10000");

	tiny_survey(&survey, 100, 1000);
	row = bracket_of(&survey);
	assert_non_null(strstr(row.reason, "ngram and crossfit"));

	build(&survey, fits, 0);
	survey.corpora[0]
		.methods[0]
		.findings.orders[0]
		.half[0]
		.grassberger_q16 += INT64_C(200000) << 16;
	row = bracket_of(&survey);
	assert_false(row.known);
	assert_non_null(strstr(row.reason, "more data"));
}

/* One symbol is ordinary: the rate is 0 and the bracket says so. */
static void one_symbol(void **state)
{
	static const double nothing[4] = {0};
	struct survey survey;
	struct bracket_row row;

	(void)state;
	tiny_survey(&survey, 100, 4000);
	tiny_grams(&survey, 4, 0, 0);
	assert_int_equal(survey.corpora[0].alphabet, 1);
	tiny_method(&survey, "crossfit", 4);
	for (unsigned k = 1; k <= 4; k++) {
		struct series *series =
			&survey.corpora[0].methods[1].findings.series[k - 1];

		series->order = k;
		tiny_series(&survey, series, nothing[k - 1], 0, k);
	}
	row = bracket_of(&survey);
	assert_true(row.known && !row.open_below);
	assert_near(row.low, 0, 0);
	assert_near(row.high, 0, 0);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(edges_without_scatter),
		cmocka_unit_test(a_shorter_code_lowers_the_upper_edge),
		cmocka_unit_test(the_lower_edge_lies_w_below),
		cmocka_unit_test(growth_between_halves_lowers_it),
		cmocka_unit_test(unseen_grams_do_not_widen_it),
		cmocka_unit_test(unseen_grams_leave_a_percent),
		cmocka_unit_test(seen_grams_do),
		cmocka_unit_test(a_code_below_refutes_it),
		cmocka_unit_test(drifting_blocks_are_not_calibrated),
		cmocka_unit_test(drift_inside_blocks_is_flagged),
		cmocka_unit_test(refusals_say_what_would_do),
		cmocka_unit_test(one_symbol),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
