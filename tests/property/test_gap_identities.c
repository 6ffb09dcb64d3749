/* Do gaps, stacks and intervals keep their promises on any survey? */
#include "support/near.h"
#include "support/tiny_survey.h"

#include <math.h>
#include <string.h>

#include "base/random.h"

#define SURVEYS 60

/* Codecs, levels, layouts and lengths at random; a reference at each. */
static void build(struct survey *survey, uint64_t seed)
{
	static const char *const codecs[] = {"zlib", "xz", "zstd"};
	static const char *const levels[] = {"1", "9"};
	static const size_t pages[] = {0, 4096};
	struct random_stream random;
	struct method_fact *fitted;
	unsigned bits;
	double least;

	random_init(&random, seed, 2);
	tiny_survey(survey, 100u << random_below(&random, 3), 4000);
	bits = 1 + random_below(&random, 3);
	/* In every other survey no code comes below the grams. */
	least = seed % 2 ? 1.02 * bits : 0;
	tiny_grams(survey, 4, bits, .05);
	fitted = tiny_method(survey, "crossfit", 3);
	for (unsigned k = 1; k <= 3; k++) {
		fitted->findings.series[k - 1].order = k;
		tiny_series(
			survey, &fitted->findings.series[k - 1],
			fmax(least, bits * (.8 + .4 * random_unit(&random))),
			.05, seed + k);
	}
	for (size_t p = 0; p < 2; p++) {
		struct method_fact *row = tiny_method(survey, "uniform", 1);

		row->page_bytes = pages[p];
		tiny_series(survey, row->findings.series,
			    fmax(least, 8 * random_unit(&random)), .1,
			    seed + p);
	}
	for (size_t i = 0; i < 12; i++) {
		uint64_t n = survey->corpora[0].n;
		uint64_t bytes = 100 + (uint64_t)(least * (double)n / 8) +
				 random_below(&random, (uint32_t)n);
		struct cell_fact *cell =
			tiny_cell(survey, codecs[i % 3], levels[i / 3 % 2],
				  pages[i / 6], bytes);

		cell->facts.framing_bytes = random_below(&random, 100);
		cell->facts.storage_unit = 512;
		cell->facts.stored_bytes = (bytes + 511) / 512 * 512;
		if (random_below(&random, 4))
			tiny_flush(survey, cell, .12 * random_unit(&random), .3,
				   seed + i);
	}
}

static void check_interval(const struct interval *interval, double point)
{
	if (!interval->known) {
		assert_true(interval->reason[0] != '\0');
		return;
	}
	assert_true(interval->low <= point && point <= interval->high);
}

static void check_cell(const struct corpus_view *view,
		       const struct cell_row *row)
{
	const struct gap_stack *stack = &row->stack;
	double sum = stack->floor + stack->restart + stack->family +
		     stack->effort + stack->framing;

	assert_true(row->known && stack->known);
	assert_near(sum, row->bits_per_symbol, 1e-12);
	/* And on to what the units of storage take. */
	assert_true(stack->has_storage);
	assert_near(sum + stack->storage,
		    8 * (double)row->fact->facts.stored_bytes /
			    (double)view->fact->n,
		    1e-9);
	assert_near(view->floor.bits_per_symbol + row->gap,
		    row->bits_per_symbol, 1e-12);
	check_interval(&row->interval, row->bits_per_symbol);
	check_interval(&row->gap_interval, row->gap);
	check_interval(&stack->restart_interval, stack->restart);
	check_interval(&stack->family_interval, stack->family);
	check_interval(&stack->effort_interval, stack->effort);
	check_interval(&stack->framing_interval, stack->framing);
	/* The floor is the lowest, so that no payload lies below it. */
	if (!row->fact->page_bytes)
		assert_true(row->payload_bits_per_symbol >=
			    view->floor.bits_per_symbol);
	assert_true(stack->effort >= 0);
}

static void check_bracket(const struct bracket_row *bracket, size_t *open)
{
	if (!bracket->known) {
		assert_true(bracket->reason[0] != '\0');
		return;
	}
	assert_true(0 <= bracket->low && bracket->low <= bracket->high);
	assert_true(bracket->upper_by[0] != '\0');
	if (bracket->open_below)
		assert_near(bracket->low, 0, 0);
	*open += bracket->open_below;
}

static void identities_hold(void **state)
{
	size_t open = 0;

	(void)state;
	for (uint64_t seed = 1; seed <= SURVEYS; seed++) {
		struct survey survey;
		struct analysis analysis;
		const struct corpus_view *view;

		build(&survey, seed);
		tiny_analyse(&survey, &analysis);
		view = &analysis.corpora[0];
		check_interval(&view->floor.interval,
			       view->floor.bits_per_symbol);
		check_bracket(&view->bracket, &open);
		for (size_t i = 0; i < view->estimate_count; i++)
			check_interval(&view->estimates[i].interval,
				       view->estimates[i].bits_per_symbol);
		for (size_t i = 0; i < view->cell_count; i++)
			check_cell(view, &view->cells[i]);
		analysis_release(&analysis);
		survey_release(&survey);
	}
	/* Refuted edges were among them, and others. */
	print_message("%zu of %d brackets open below\n", open, SURVEYS);
	assert_true(open > 10 && open < SURVEYS - 10);
}

/* The same bits by block as the floor: no gap, and no doubt about it. */
static void the_gap_to_itself_is_nothing(void **state)
{
	struct survey survey;
	struct analysis analysis;
	const struct cell_row *rows;

	(void)state;
	tiny_survey(&survey, 200, 5000);
	for (size_t i = 0; i < 2; i++)
		tiny_flush(&survey,
			   tiny_cell(&survey, "xz", i ? "9" : "6", 0, 300000),
			   .01, .2, 11);
	tiny_analyse(&survey, &analysis);
	rows = analysis.corpora[0].cells;
	for (size_t i = 0; i < 2; i++) {
		assert_near(rows[i].gap, 0, 0);
		assert_true(rows[i].gap_interval.known);
		assert_near(rows[i].gap_interval.low, 0, 1e-9);
		assert_near(rows[i].gap_interval.high, 0, 1e-9);
	}
	analysis_release(&analysis);
	survey_release(&survey);
}

/* Series that rise and fall together: pairing narrows by what they share. */
static void pairing_narrows(void **state)
{
	struct survey survey;
	struct analysis analysis;
	const struct cell_row *row;

	(void)state;
	tiny_survey(&survey, 200, 5000);
	tiny_series(&survey,
		    tiny_method(&survey, "uniform", 1)->findings.series, 2, .2,
		    11);
	tiny_flush(&survey, tiny_cell(&survey, "xz", "6", 0, 300000), .01, .2,
		   11);
	tiny_analyse(&survey, &analysis);
	row = &analysis.corpora[0].cells[0];
	/* Proportional: the difference .4 of 2.4 bits has a sixth of it. */
	assert_near((row->gap_interval.high - row->gap_interval.low) /
			    (row->interval.high - row->interval.low),
		    1.0 / 6, .02);
	analysis_release(&analysis);
	survey_release(&survey);
}

static double width_at(size_t blocks, uint64_t seed)
{
	struct survey survey;
	struct analysis analysis;
	double width;

	tiny_survey(&survey, blocks, 4096);
	tiny_flush(&survey, tiny_cell(&survey, "xz", "6", 0, blocks * 1024),
		   .01, .2, seed);
	tiny_analyse(&survey, &analysis);
	width = analysis.corpora[0].cells[0].interval.high -
		analysis.corpora[0].cells[0].interval.low;
	analysis_release(&analysis);
	survey_release(&survey);
	return width;
}

/* Four times the blocks halve the width; noise of the estimate is 10%. */
static void more_data_narrows(void **state)
{
	(void)state;
	for (uint64_t seed = 1; seed <= 10; seed++) {
		double before = width_at(200, seed);

		assert_true(before > 0);
		assert_near(width_at(800, seed) / before, .5, .15);
	}
}

static void the_same_survey_gives_the_same_analysis(void **state)
{
	struct survey survey;
	struct analysis once, again;

	(void)state;
	build(&survey, 5);
	tiny_analyse(&survey, &once);
	tiny_analyse(&survey, &again);
	for (size_t i = 0; i < once.corpora[0].cell_count; i++) {
		const struct interval *a =
			&once.corpora[0].cells[i].gap_interval;
		const struct interval *b =
			&again.corpora[0].cells[i].gap_interval;

		assert_memory_equal(&a->low, &b->low, sizeof(a->low));
		assert_memory_equal(&a->high, &b->high, sizeof(a->high));
	}
	analysis_release(&once);
	analysis_release(&again);
	survey_release(&survey);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(identities_hold),
		cmocka_unit_test(the_gap_to_itself_is_nothing),
		cmocka_unit_test(pairing_narrows),
		cmocka_unit_test(more_data_narrows),
		cmocka_unit_test(the_same_survey_gives_the_same_analysis),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
