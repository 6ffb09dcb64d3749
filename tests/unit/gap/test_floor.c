/* Is the floor the lowest decodable length, and does it say who holds it? */
#include "support/near.h"
#include "support/tiny_survey.h"

#include <string.h>

#include "base/memory.h"

/* 100 blocks of 1000 bytes; a code of 4.5 bits a symbol, in 56250 bytes. */
static void build(struct survey *survey)
{
	tiny_survey(survey, 100, 1000);
	tiny_series(survey, tiny_method(survey, "uniform", 1)->findings.series,
		    4.5, .05, 3);
}

static struct floor_row floor_of(struct survey *survey)
{
	struct analysis analysis;
	struct floor_row row;

	tiny_analyse(survey, &analysis);
	row = analysis.corpora[0].floor;
	analysis_release(&analysis);
	survey_release(survey);
	return row;
}

static void the_lowest_code_holds_it(void **state)
{
	struct survey survey;
	struct floor_row row;

	(void)state;
	build(&survey);
	tiny_cell(&survey, "xz", "6", 0, 60000);
	row = floor_of(&survey);
	assert_true(row.known && !row.by_codec);
	assert_string_equal(row.held_by, "uniform");
	assert_int_equal(row.rows, 2);
	/* 4.5 bits but for the scatter of 100 blocks, .05 / sqrt(3) each. */
	assert_near(row.bits_per_symbol, 4.5, .06);
	assert_true(row.interval.known);
	assert_true(row.interval.low < row.bits_per_symbol &&
		    row.bits_per_symbol < row.interval.high);
}

/* Framing is no part of what the data costs: 50,100 bytes, 100 of them. */
static void a_codec_enters_with_its_payload(void **state)
{
	struct survey survey;
	struct floor_row row;
	struct cell_fact *cell;

	(void)state;
	build(&survey);
	cell = tiny_cell(&survey, "xz", "9e", 0, 50100);
	cell->facts.framing_bytes = 100;
	row = floor_of(&survey);
	assert_true(row.by_codec);
	assert_string_equal(row.held_by, "xz 9e");
	assert_near(row.bits_per_symbol, 4.0, 1e-12);
	/* It could not be flushed: the floor is exact, the interval missing. */
	assert_false(row.interval.known);
	assert_non_null(strstr(row.interval.reason, "flushed"));
}

static void pages_and_failures_do_not_hold_it(void **state)
{
	struct survey survey;
	struct floor_row row;

	(void)state;
	build(&survey);
	tiny_cell(&survey, "xz", "6", 4096, 1000);
	tiny_cell(&survey, "zlib", "6", 0, 1000)->facts.lossless = 0;
	tiny_cell(&survey, "zstd", "6", 0, 1000)->outcome = OUTCOME_FAILED;
	row = floor_of(&survey);
	assert_string_equal(row.held_by, "uniform");
	assert_int_equal(row.rows, 1);
}

/* n-gram figures and diagnostics are no lengths, however low. */
static void an_estimate_is_no_floor(void **state)
{
	struct survey survey;
	struct floor_row row;

	(void)state;
	tiny_survey(&survey, 100, 1000);
	tiny_grams(&survey, 2, 1, 0);
	tiny_series(&survey, tiny_method(&survey, "match", 1)->findings.series,
		    .1, 0, 1);
	row = floor_of(&survey);
	assert_false(row.known);
	assert_non_null(strstr(row.interval.reason, "no code"));
}

/* Two settings of one row: the lower one, and log2 2 bits for choosing it. */
static void a_choice_inside_a_row_is_charged(void **state)
{
	struct survey survey;
	struct floor_row row;
	struct method_fact *method;

	(void)state;
	tiny_survey(&survey, 100, 1000);
	method = tiny_method(&survey, "uniform", 2);
	tiny_series(&survey, &method->findings.series[0], 3.25, 0, 1);
	tiny_series(&survey, &method->findings.series[1], 2.75, 0, 1);
	row = floor_of(&survey);
	assert_near(row.bits_per_symbol, 2.75 + 1e-5, 1e-12);
}

static void a_short_corpus_has_a_floor_without_interval(void **state)
{
	struct survey survey;
	struct floor_row row;

	(void)state;
	tiny_survey(&survey, 0, 6399);
	tiny_cell(&survey, "zlib", "9", 0, 3000);
	row = floor_of(&survey);
	assert_near(row.bits_per_symbol, 8.0 * 3000 / 6399, 1e-12);
	assert_false(row.interval.known);
	assert_string_equal(row.interval.reason,
			    "6399 symbols; intervals need 6400");
}

static void a_corpus_that_was_not_read_has_nothing(void **state)
{
	struct survey survey;
	struct floor_row row;

	(void)state;
	tiny_survey(&survey, 0, 0);
	survey.corpora[0].outcome = OUTCOME_FAILED;
	row = floor_of(&survey);
	assert_false(row.known);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(the_lowest_code_holds_it),
		cmocka_unit_test(a_codec_enters_with_its_payload),
		cmocka_unit_test(pages_and_failures_do_not_hold_it),
		cmocka_unit_test(an_estimate_is_no_floor),
		cmocka_unit_test(a_choice_inside_a_row_is_charged),
		cmocka_unit_test(a_short_corpus_has_a_floor_without_interval),
		cmocka_unit_test(a_corpus_that_was_not_read_has_nothing),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
