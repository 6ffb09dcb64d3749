/* Do the figures of a cell follow from its facts? Expected values by hand. */
#include "support/near.h"
#include "support/tiny_survey.h"

#include <string.h>

/* 100 blocks of 1000 bytes and a reference of 2 bits a symbol (25,000). */
static void build(struct survey *survey)
{
	tiny_survey(survey, 100, 1000);
	tiny_series(survey, tiny_method(survey, "uniform", 1)->findings.series,
		    2, 0, 3);
}

static void gap_and_ratios(void **state)
{
	struct survey survey;
	struct analysis analysis;
	const struct cell_row *row;
	struct cell_fact *cell;

	(void)state;
	build(&survey);
	survey.corpora[0].records = 12500;
	cell = tiny_cell(&survey, "zlib", "9", 0, 31250);
	cell->facts.framing_bytes = 6;
	cell->timed = true;
	cell->timing.encode_cpu_seconds = .04;
	cell->timing.decode_cpu_seconds = .01;
	tiny_flush(&survey, cell, .02, .1, 5);
	tiny_analyse(&survey, &analysis);
	row = &analysis.corpora[0].cells[0];
	assert_true(row->known);
	assert_near(row->bits_per_symbol, 2.5, 1e-12);
	assert_near(row->payload_bits_per_symbol, 2.5 - .00048, 1e-12);
	assert_near(row->gap, .5, 1e-9);
	assert_true(row->has_percent);
	assert_near(row->gap_percent, 25, 1e-6);
	assert_near(row->efficiency, .8, 1e-9);
	assert_near(row->bits_per_record, 20, 1e-12);
	assert_near(row->encode_mb_per_s, 2.5, 1e-12);
	assert_near(row->decode_mb_per_s, 10, 1e-12);
	assert_near(row->flush_cost, .02, 1e-4);
	/* Shifted from the flushed run onto the headline. */
	assert_true(row->interval.known && row->gap_interval.known);
	assert_true(row->interval.low < 2.5 && 2.5 < row->interval.high);
	/* The reference does not vary: gap and codec are equally uncertain. */
	assert_near(row->gap_interval.high - row->gap_interval.low,
		    row->interval.high - row->interval.low, 1e-9);
	analysis_release(&analysis);
	survey_release(&survey);
}

static void a_cell_without_blocks_says_why(void **state)
{
	struct survey survey;
	struct analysis analysis;
	const struct cell_row *rows;

	(void)state;
	build(&survey);
	tiny_flush(&survey, tiny_cell(&survey, "zlib", "9", 0, 31250), .11, .1,
		   5);
	tiny_cell(&survey, "house", "1", 0, 40000);
	tiny_analyse(&survey, &analysis);
	rows = analysis.corpora[0].cells;
	assert_near(rows[0].flush_cost, .11, 1e-4);
	assert_false(rows[0].interval.known || rows[0].gap_interval.known);
	assert_non_null(strstr(rows[0].interval.reason, "11.0%, over the 10%"));
	assert_false(rows[1].interval.known);
	assert_non_null(strstr(rows[1].interval.reason, "house 1 cannot be"));
	assert_near(rows[1].gap, 1.2, 1e-9);
	analysis_release(&analysis);
	survey_release(&survey);
}

static void a_failed_cell_is_not_known(void **state)
{
	struct survey survey;
	struct analysis analysis;

	(void)state;
	build(&survey);
	tiny_cell(&survey, "zlib", "9", 0, 100)->facts.lossless = 0;
	tiny_analyse(&survey, &analysis);
	assert_false(analysis.corpora[0].cells[0].known);
	assert_int_equal(analysis_failed(&analysis), 1);
	analysis_release(&analysis);
	survey.corpora[0].cells[0].facts.lossless = 1;
	tiny_analyse(&survey, &analysis);
	assert_int_equal(analysis_failed(&analysis), 0);
	survey.corpora[0].methods[0].outcome = OUTCOME_DECLINED;
	assert_int_equal(analysis_failed(&analysis), 0);
	survey.corpora[0].methods[0].outcome = OUTCOME_FAILED;
	assert_int_equal(analysis_failed(&analysis), 1);
	analysis_release(&analysis);
	survey_release(&survey);
}

static void no_percent_of_almost_nothing(void **state)
{
	struct survey survey;
	struct analysis analysis;
	const struct cell_row *row;

	(void)state;
	tiny_survey(&survey, 100, 1000);
	tiny_series(&survey,
		    tiny_method(&survey, "uniform", 1)->findings.series, .0009,
		    0, 3);
	tiny_cell(&survey, "xz", "6", 0, 100);
	tiny_analyse(&survey, &analysis);
	row = &analysis.corpora[0].cells[0];
	assert_near(row->gap, .008 - .0009, 1e-6);
	assert_false(row->has_percent);
	analysis_release(&analysis);
	survey_release(&survey);
}

/* h_k = 2 at both orders, trusted: 2.1 bits need order 1, 1.9 beat both. */
static void effective_order(void **state)
{
	struct survey survey;
	struct analysis analysis;
	const struct corpus_view *view;

	(void)state;
	tiny_survey(&survey, 100, 10000);
	tiny_grams(&survey, 2, 2, .02);
	tiny_cell(&survey, "xz", "6", 0, 262500);
	tiny_cell(&survey, "xz", "9", 0, 237500);
	tiny_analyse(&survey, &analysis);
	view = &analysis.corpora[0];
	assert_int_equal(view->trusted_order, 2);
	assert_int_equal(view->cells[0].effective_order, 1);
	assert_int_equal(view->cells[1].effective_order, 0);
	analysis_release(&analysis);
	survey_release(&survey);
}

/*
 * Floor 25,000 bytes whole, 27,000 in pages; zlib in pages: level 9 payload
 * 30,000, level 1 payload 33,000 and 500 of framing.
 */
static void the_stack_names_every_part(void **state)
{
	struct survey survey;
	struct analysis analysis;
	struct method_fact *paged;
	struct gap_stack stack;

	(void)state;
	build(&survey);
	paged = tiny_method(&survey, "uniform", 1);
	paged->page_bytes = 4096;
	tiny_series(&survey, paged->findings.series, 2.16, 0, 3);
	tiny_cell(&survey, "zlib", "9", 4096, 30000);
	tiny_cell(&survey, "zlib", "1", 4096, 33500)->facts.framing_bytes = 500;
	tiny_cell(&survey, "xz", "1", 65536, 33500);
	tiny_analyse(&survey, &analysis);
	stack = analysis.corpora[0].cells[1].stack;
	assert_true(stack.known);
	assert_string_equal(stack.best_level, "9");
	assert_near(stack.floor, 2, 1e-6);
	assert_near(stack.restart, .16, 1e-6);
	assert_near(stack.family, .24, 1e-6);
	assert_near(stack.effort, .24, 1e-12);
	assert_near(stack.framing, .04, 1e-12);
	/* No reference was run in pages of 64 KiB. */
	assert_false(analysis.corpora[0].cells[2].stack.known);
	analysis_release(&analysis);
	survey_release(&survey);
}

static void is_exact(const struct interval *interval, double value)
{
	assert_true(interval->known);
	assert_near(interval->low, value, 0);
	assert_near(interval->high, value, 0);
}

static double width(const struct interval *interval)
{
	assert_true(interval->known);
	return interval->high - interval->low;
}

/*
 * Blocks that rise and fall together, by 30% of each length: restart, family
 * and effort are 4%, 12% and 12% of the floor, and so are their widths.
 * Source: a multiple of a series has that multiple of its spread.
 */
static void every_term_has_its_paired_interval(void **state)
{
	struct survey survey;
	struct analysis analysis;
	const struct cell_row *rows;
	struct method_fact *row;

	(void)state;
	tiny_survey(&survey, 200, 5000);
	row = tiny_method(&survey, "uniform", 1);
	tiny_series(&survey, row->findings.series, 2, .3, 5);
	row = tiny_method(&survey, "uniform", 1);
	row->page_bytes = 4096;
	tiny_series(&survey, row->findings.series, 2.08, .3, 5);
	tiny_flush(&survey, tiny_cell(&survey, "zlib", "9", 4096, 290000), 0,
		   .3, 5);
	tiny_flush(&survey, tiny_cell(&survey, "zlib", "1", 4096, 320000), 0,
		   .3, 5);
	tiny_cell(&survey, "zlib", "2", 4096, 330000);
	tiny_analyse(&survey, &analysis);
	rows = analysis.corpora[0].cells;
	assert_near(width(&rows[1].stack.restart_interval) /
			    width(&analysis.corpora[0].floor.interval),
		    .04, .005);
	assert_near(width(&rows[1].stack.family_interval) /
			    width(&rows[1].stack.restart_interval),
		    .24 / .08, .05);
	assert_near(width(&rows[1].stack.effort_interval) /
			    width(&rows[1].stack.restart_interval),
		    .24 / .08, .05);
	is_exact(&rows[0].stack.effort_interval, 0);
	is_exact(&rows[1].stack.framing_interval, 0);
	/* Level 2 was not flushed: no blocks, and its term says so. */
	assert_false(rows[2].stack.effort_interval.known);
	assert_true(rows[2].stack.effort_interval.reason[0] != '\0');
	assert_true(rows[2].stack.family_interval.known);
	analysis_release(&analysis);
	survey_release(&survey);
}

/* The floor's own codec, whole: nothing between it and the floor. */
static void a_term_between_a_run_and_itself_is_exact(void **state)
{
	struct survey survey;
	struct analysis analysis;
	const struct gap_stack *stack;

	(void)state;
	tiny_survey(&survey, 200, 5000);
	tiny_series(&survey,
		    tiny_method(&survey, "uniform", 1)->findings.series, 3, .3,
		    5);
	tiny_cell(&survey, "zlib", "9", 0, 290000)->facts.framing_bytes = 625;
	tiny_analyse(&survey, &analysis);
	stack = &analysis.corpora[0].cells[0].stack;
	assert_true(stack->known);
	is_exact(&stack->restart_interval, 0);
	is_exact(&stack->family_interval, 0);
	is_exact(&stack->effort_interval, 0);
	is_exact(&stack->framing_interval, .005);
	analysis_release(&analysis);
	survey_release(&survey);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(gap_and_ratios),
		cmocka_unit_test(a_cell_without_blocks_says_why),
		cmocka_unit_test(a_failed_cell_is_not_known),
		cmocka_unit_test(no_percent_of_almost_nothing),
		cmocka_unit_test(effective_order),
		cmocka_unit_test(the_stack_names_every_part),
		cmocka_unit_test(every_term_has_its_paired_interval),
		cmocka_unit_test(a_term_between_a_run_and_itself_is_exact),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
