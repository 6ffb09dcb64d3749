/* Is drift inside short blocks measured as it is defined? */
#include "estimate/ngram_drift.h"

#include "base/log2.h"
#include "base/random.h"
#include "support/grams.h"
#include "support/near.h"

#include <stdlib.h>

static size_t parts_of(size_t n, size_t blocks, size_t record_bytes)
{
	const struct sequence sequence = {.n = n, .record_bytes = record_bytes};
	const struct cuts cuts = {.blocks = blocks};

	return drift_parts(&sequence, &cuts);
}

static void short_blocks_alone_are_cut(void **state)
{
	(void)state;
	assert_int_equal(parts_of(10000, 100, 0), 1);
	assert_int_equal(parts_of(39999, 100, 0), 1);
	assert_int_equal(parts_of(40000, 100, 0), 2);
	assert_int_equal(parts_of(100000, 100, 0), 4);
	assert_int_equal(parts_of(400000, 100, 0), 8);
	assert_int_equal(parts_of(409600, 100, 0), 1);
	assert_int_equal(parts_of(100000, 100, 12), 1);
	assert_int_equal(parts_of(1000, 0, 0), 1);
}

static void parts_end_where_blocks_do(void **state)
{
	struct cuts cuts = grams_cuts(1003, 5), fine;

	(void)state;
	assert_int_equal(drift_cuts_init(&cuts, 4, &fine), STATUS_OK);
	assert_int_equal(fine.blocks, 20);
	for (size_t i = 0; i <= 5; i++)
		assert_int_equal(fine.symbol[4 * i], cuts.symbol[i]);
	for (size_t i = 0; i < 20; i++)
		assert_true(fine.symbol[i] < fine.symbol[i + 1]);
	cuts_release(&fine);
	free(cuts.symbol);
}

/* Residuals 3, 1, -1, -3: products 3 - 1 + 3 = 5 over squares 20. */
static void a_correlation_by_hand(void **state)
{
	const int64_t sums[] = {10 * BIT_Q32, 8 * BIT_Q32, 6 * BIT_Q32,
				4 * BIT_Q32};
	const int64_t even[] = {BIT_Q32, BIT_Q32, BIT_Q32, BIT_Q32};
	struct cuts cuts = grams_cuts(400, 4);
	int64_t ppm;

	(void)state;
	assert_int_equal(drift_lag1_ppm(&cuts, sums, &ppm), STATUS_OK);
	assert_int_equal(ppm, 250000);
	assert_int_equal(drift_lag1_ppm(&cuts, even, &ppm), STATUS_OK);
	assert_int_equal(ppm, 0);
	free(cuts.symbol);
}

/*
 * Losses of order 1 of bits that are fair in every other 500 symbols and nearly
 * always 0 in the rest: pairs of parts of 250 agree. The note is that of a
 * direct count, and the blocks are the sums of their parts.
 */
static void the_row_keeps_it(void **state)
{
	const size_t n = 50000;
	uint8_t *codes = calloc(n, 1);
	struct sequence sequence = grams_sequence(codes, n, 1);
	struct cuts cuts = grams_cuts(n, 100);
	struct random_stream random;
	struct findings findings;
	double lag1, parts;

	(void)state;
	random_init(&random, 5, 1);
	for (size_t i = 0; i < n; i++)
		codes[i] = random_below(&random, i / 500 % 2 ? 2 : 30) == 0;
	findings = grams_findings(&sequence, 3, &cuts);
	assert_true(drift_find(&findings, 1, &lag1, &parts));
	assert_near(parts, 200, 0);
	/* Every other pair agrees, the next differs: about 0 in all. */
	assert_near(lag1, 0, .1);
	assert_false(drift_find(&findings, 4, &lag1, &parts));
	assert_int_equal(costs_block_total(&findings.series[0].costs),
			 findings.series[0].costs.headline_q16);
	findings_release(&findings);
	for (size_t i = 0; i < n; i++)
		codes[i] = random_below(&random, i / 2500 % 2 ? 2 : 30) == 0;
	findings = grams_findings(&sequence, 1, &cuts);
	assert_true(drift_find(&findings, 1, &lag1, &parts));
	/* Ten parts to a turn: nine pairs agree where one differs. */
	assert_near(lag1, .8, .1);
	findings_release(&findings);
	free(cuts.symbol);
	free(codes);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(short_blocks_alone_are_cut),
		cmocka_unit_test(parts_end_where_blocks_do),
		cmocka_unit_test(a_correlation_by_hand),
		cmocka_unit_test(the_row_keeps_it),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
