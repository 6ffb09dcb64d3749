/* Does each row of the estimators show the figure it promises? */
#include "support/near.h"
#include "support/tiny_survey.h"

#include <math.h>
#include <string.h>

#include "base/memory.h"
#include "gap/fitted.h"
#include "gap/gram_orders.h"

static void each_row_has_its_own_headline(void **state)
{
	struct survey survey;
	struct analysis analysis;
	const struct estimate_row *rows;
	struct method_fact *crossfit;

	(void)state;
	tiny_survey(&survey, 100, 10000);
	tiny_grams(&survey, 3, 2, .02);
	crossfit = tiny_method(&survey, "crossfit", 3);
	for (unsigned k = 1; k <= 3; k++) {
		crossfit->findings.series[k - 1].order = k;
		tiny_series(&survey, &crossfit->findings.series[k - 1],
			    2.05 + .01 * fabs((double)k - 2), 0, k);
	}
	tiny_series(&survey, tiny_method(&survey, "match", 1)->findings.series,
		    1.2, .1, 1);
	tiny_series(&survey,
		    tiny_method(&survey, "uniform", 1)->findings.series, 2, 0,
		    1);
	tiny_analyse(&survey, &analysis);
	rows = analysis.corpora[0].estimates;
	assert_int_equal(analysis.corpora[0].estimate_count, 4);
	/* The corrected entropy at the highest trusted order. */
	assert_near(rows[0].bits_per_symbol, 2, 1e-6);
	assert_int_equal(rows[0].order, 3);
	assert_string_equal(rows[0].leans, "none");
	assert_true(rows[0].interval.known && !rows[0].is_code);
	assert_near((rows[0].interval.low + rows[0].interval.high) / 2, 2,
		    1e-3);
	/* Cross-fit at its lowest, no charge: it is an estimate. */
	assert_near(rows[1].bits_per_symbol, 2.05, 1e-6);
	assert_int_equal(rows[1].order, 2);
	assert_near(rows[2].bits_per_symbol, 1.2, .05);
	assert_false(rows[2].interval.known);
	assert_non_null(strstr(rows[2].interval.reason, "either side"));
	assert_true(rows[3].is_code);
	assert_string_equal(rows[3].leans, "above");
	/* The same for every block: no width. */
	assert_near(rows[3].interval.high - rows[3].interval.low, 0, 1e-9);
	analysis_release(&analysis);
	survey_release(&survey);
}

/*
 * 256 symbols alike, blocks scattered by hand. The variance of n h without the
 * blocks' share of 255 fitted probabilities: by Basharin 1959 255 / 2 nat^2
 * less for the plug-in; Grassberger's (-1)^c puts a quarter of 257 back. Of
 * the cross-fit by eight folds .3149 of 255: 8/7 - 1/2 - 14 (15/98)^2.
 */
static void fitted_parameters_are_not_counted_twice(void **state)
{
	struct survey survey;
	struct corpus_view view = {0};
	struct contribution made;
	double nat = 1 / (log(2) * log(2));

	(void)state;
	tiny_survey(&survey, 100, 10000);
	tiny_grams(&survey, 2, 8, .02);
	view.fact = &survey.corpora[0];
	assert_int_equal(gram_orders_init(&view), STATUS_OK);
	made = contribution_of_plugin(
		&view, &view.fact->methods[0].findings.series[0], 8);
	assert_near(made.excess, 127.5 * nat, 1e-9);
	assert_near(made.total_bits, 8, 0);
	made = contribution_of_grassberger(
		&view, &view.fact->methods[0].findings.series[0]);
	assert_near(made.excess, (127.5 - 64.25) * nat, 1e-9);
	made = contribution_of_crossfit(
		&view, &view.fact->methods[0].findings.series[0]);
	assert_near(made.excess,
		    255 * (8.0 / 7 - .5 - 14 * (15.0 / 98) * (15.0 / 98)) * nat,
		    1e-9);
	/* Order 2: 65,536 pairs less 256 contexts, all seen often. */
	made = contribution_of_plugin(
		&view, &view.fact->methods[0].findings.series[1], 8);
	assert_near(made.excess, (65536.0 - 256) / 2 * nat, 1e-6);
	/* Seen once or twice, they say nothing. */
	view.fact->methods[0].findings.orders[1].all.once = 60000;
	made = contribution_of_plugin(
		&view, &view.fact->methods[0].findings.series[1], 8);
	assert_near(made.excess, (5536.0 - 256) / 2 * nat, 1e-6);
	memory_free(view.orders);
	survey_release(&survey);
}

static void an_untrusted_corpus_has_no_ngram_headline(void **state)
{
	struct survey survey;
	struct analysis analysis;
	const struct corpus_view *view;

	(void)state;
	tiny_survey(&survey, 100, 100);
	tiny_grams(&survey, 2, 8, 0);
	for (size_t k = 0; k < 2; k++)
		survey.corpora[0].methods[0].findings.orders[k].all.once = 5000;
	tiny_analyse(&survey, &analysis);
	view = &analysis.corpora[0];
	assert_int_equal(view->trusted_order, 0);
	assert_false(view->orders[0].trusted);
	assert_non_null(strstr(view->trust_limit, "order 1 fails coverage"));
	assert_false(view->estimates[0].known);
	assert_non_null(strstr(view->estimates[0].interval.reason,
			       "no order can be trusted"));
	analysis_release(&analysis);
	survey_release(&survey);
}

static void a_declined_row_keeps_its_reason(void **state)
{
	struct survey survey;
	struct analysis analysis;
	struct method_fact *row;

	(void)state;
	tiny_survey(&survey, 100, 100);
	row = tiny_method(&survey, "uniform", 0);
	row->outcome = OUTCOME_DECLINED;
	tiny_analyse(&survey, &analysis);
	assert_false(analysis.corpora[0].estimates[0].known);
	assert_false(analysis.corpora[0].floor.known);
	assert_int_equal(analysis.corpora[0].order_count, 0);
	assert_non_null(strstr(analysis.corpora[0].trust_limit, "ngram"));
	analysis_release(&analysis);
	survey_release(&survey);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(each_row_has_its_own_headline),
		cmocka_unit_test(fitted_parameters_are_not_counted_twice),
		cmocka_unit_test(an_untrusted_corpus_has_no_ngram_headline),
		cmocka_unit_test(a_declined_row_keeps_its_reason),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
