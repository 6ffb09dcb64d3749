/* Is what a dictionary won told against the same pages without it? */
#include "support/near.h"
#include "support/tiny_survey.h"

#include <string.h>

#define PAGE 4096

/* 200 blocks of 5000 bytes; a megabyte. */
static void build(struct survey *survey)
{
	struct method_fact *row;

	tiny_survey(survey, 200, 5000);
	row = tiny_method(survey, "mix", 1);
	tiny_series(survey, row->findings.series, 2, .05, 3);
	row = tiny_method(survey, "mix", 1);
	row->page_bytes = PAGE;
	tiny_series(survey, row->findings.series, 2.5, .05, 3);
}

static struct cell_fact *add(struct survey *survey, const char *level,
			     uint64_t bytes, uint64_t dictionary)
{
	struct cell_fact *cell = tiny_cell(survey, "zstd", level, PAGE, bytes);

	cell->facts.dictionary_bytes = dictionary;
	tiny_flush(survey, cell, 0, .2, 11);
	return cell;
}

static void gain_is_paired_and_counts_its_own_bytes(void **state)
{
	struct survey survey;
	struct analysis analysis;
	const struct dictionary_row *row;

	(void)state;
	build(&survey);
	add(&survey, "3", 400000, 0);
	add(&survey, "3 dict:64K", 350000, 100000);
	add(&survey, "3 dict:1M", 450000, 160000);
	tiny_analyse(&survey, &analysis);
	row = &analysis.corpora[0].cells[0].dictionary;
	assert_false(row->has);
	row = &analysis.corpora[0].cells[1].dictionary;
	assert_true(row->has && row->known);
	/* Bits a byte: 8 x 50,000 and 8 x 100,000 over a million. */
	assert_near(row->won, .4, 1e-12);
	assert_near(row->own, .8, 1e-12);
	assert_true(row->won_interval.known);
	assert_true(row->won_interval.low < .4 && row->won_interval.high > .4);
	assert_false(row->warm_known);
	row = &analysis.corpora[0].cells[2].dictionary;
	assert_near(row->won, -.4, 1e-12);
	analysis_release(&analysis);
	survey_release(&survey);
}

static void without_the_plain_cell_nothing_is_known(void **state)
{
	struct survey survey;
	struct analysis analysis;
	const struct dictionary_row *row;

	(void)state;
	build(&survey);
	add(&survey, "19", 400000, 0);
	add(&survey, "3 dict:64K", 350000, 100000);
	tiny_analyse(&survey, &analysis);
	row = &analysis.corpora[0].cells[1].dictionary;
	assert_true(row->has && !row->known);
	analysis_release(&analysis);
	survey_release(&survey);
}

/*
 * Pages that saw others are no code of pages on their own: they hold neither
 * the lowest length at a layout nor the best level, and their win is in effort.
 */
static void it_stays_out_of_the_reference(void **state)
{
	struct survey survey;
	struct analysis analysis;
	const struct gap_stack *plain, *with;

	(void)state;
	build(&survey);
	add(&survey, "3", 400000, 0);
	add(&survey, "3 dict:64K", 250000, 60000);
	tiny_analyse(&survey, &analysis);
	plain = &analysis.corpora[0].cells[0].stack;
	with = &analysis.corpora[0].cells[1].stack;
	assert_near(plain->restart, .5, 1e-6);
	assert_near(with->restart, .5, 1e-6);
	assert_near(plain->family, .7, 1e-5);
	assert_near(with->family, .7, 1e-5);
	assert_string_equal(with->best_level, "3");
	assert_near(with->effort, -1.2, 1e-9);
	assert_near(with->floor + with->restart + with->family + with->effort +
			    with->framing,
		    2, 1e-9);
	analysis_release(&analysis);
	survey_release(&survey);
}

static void the_warm_reference_stands_beside(void **state)
{
	struct survey survey;
	struct analysis analysis;
	struct method_fact *warm;
	const struct dictionary_row *row;

	(void)state;
	build(&survey);
	warm = tiny_method(&survey, "mix-warm", 1);
	warm->page_bytes = PAGE;
	tiny_series(&survey, warm->findings.series, 1.5, .05, 3);
	add(&survey, "3", 400000, 0);
	add(&survey, "3 dict:64K", 350000, 100000);
	tiny_analyse(&survey, &analysis);
	row = &analysis.corpora[0].cells[1].dictionary;
	assert_true(row->warm_known);
	assert_near(row->warm, 1.5, 1e-3);
	assert_near(row->cold, 2.5, 1e-3);
	/* It holds no floor: it saw the other half for nothing. */
	assert_near(analysis.corpora[0].cells[1].stack.restart, .5, 1e-6);
	analysis_release(&analysis);
	survey_release(&survey);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(gain_is_paired_and_counts_its_own_bytes),
		cmocka_unit_test(without_the_plain_cell_nothing_is_known),
		cmocka_unit_test(it_stays_out_of_the_reference),
		cmocka_unit_test(the_warm_reference_stands_beside),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
