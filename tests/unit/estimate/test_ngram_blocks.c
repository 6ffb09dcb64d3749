/* Do the block bits of every order equal the losses symbol by symbol? */
#include "estimate/estimator.h"

#include "suffix/suffix.h"
#include "support/grams.h"
#include "support/near.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static void check_series(const struct sequence *sequence,
			 const struct cuts *cuts, unsigned orders)
{
	struct findings findings = grams_findings(sequence, orders, cuts);
	size_t n = sequence->n, blocks = cuts->blocks;
	uint64_t *shorter = malloc(n * sizeof(*shorter));
	uint64_t *longer = malloc(n * sizeof(*longer));
	double *bits = malloc(blocks * sizeof(*bits));

	grams_count(sequence, 0, 0, n, shorter);
	for (unsigned k = 1; k <= orders; k++) {
		const struct series *series = &findings.series[k - 1];
		uint64_t *other = shorter;

		memset(bits, 0, blocks * sizeof(*bits));
		grams_count(sequence, k, 0, n, longer);
		for (size_t s = 0; s < n; s++) {
			size_t symbol = (s + k - 1) % n, b = 0;

			while (cuts->symbol[b + 1] <= symbol)
				b++;
			bits[b] += log2((double)shorter[s]) -
				   log2((double)longer[s]);
		}
		assert_int_equal(series->order, k);
		assert_int_equal(series->costs.blocks, blocks);
		for (size_t b = 0; b < blocks; b++)
			assert_near(bits_from_q16(series->costs.block_q16[b]),
				    bits[b], 0x1.1p-16 + (double)n * 1e-10);
		assert_int_equal(costs_block_total(&series->costs),
				 series->costs.headline_q16);
		shorter = longer;
		longer = other;
	}
	free(shorter);
	free(longer);
	free(bits);
	findings_release(&findings);
}

static void block_bits_symbol_by_symbol(void **state)
{
	const size_t n = 6400;
	uint8_t *codes = calloc(4 * n, 1);
	struct sequence sequence;

	(void)state;
	grams_pseudo_text(codes, 4 * n, 11);
	for (unsigned width = 1; width <= 4; width++) {
		struct cuts cuts = grams_cuts(n, 100);

		sequence = grams_sequence(codes, n, width);
		check_series(&sequence, &cuts, 24);
		free(cuts.symbol);
	}
	free(codes);
}

static void block_bits_of_uneven_and_tiny_blocks(void **state)
{
	size_t tiny[] = {0, 1, 2, 3, 20, 21, 900, 1000};
	struct cuts uneven = {.blocks = 7, .symbol = tiny};
	uint8_t codes[1000] = {0};
	struct sequence sequence = grams_sequence(codes, 1000, 1);

	(void)state;
	grams_pseudo_text(codes, sizeof(codes), 13);
	check_series(&sequence, &uneven, 32);
	memset(codes, 'z', sizeof(codes));
	check_series(&sequence, &uneven, 32);
	for (size_t i = 0; i < sizeof(codes); i++)
		codes[i] = (uint8_t)(i % 3);
	check_series(&sequence, &uneven, 32);
}

static void headlines_are_the_same_without_blocks(void **state)
{
	const size_t n = 50000;
	uint8_t *codes = calloc(n, 1);
	struct sequence sequence = grams_sequence(codes, n, 1);
	struct cuts cuts = grams_cuts(n, 400);
	struct findings with, without;

	(void)state;
	grams_pseudo_text(codes, n, 17);
	with = grams_findings(&sequence, 16, &cuts);
	without = grams_findings(&sequence, 16, NULL);
	for (size_t i = 0; i < 16; i++) {
		assert_int_equal(with.series[i].costs.headline_q16,
				 without.series[i].costs.headline_q16);
		assert_int_equal(without.series[i].costs.blocks, 0);
	}
	assert_memory_equal(with.orders, without.orders,
			    16 * sizeof(*with.orders));
	findings_release(&with);
	findings_release(&without);
	free(cuts.symbol);
	free(codes);
}

/* The suffix order may know more than the orders asked for. */
static void a_longer_suffix_order_changes_nothing(void **state)
{
	uint8_t codes[9000] = {0};
	struct sequence sequence = grams_sequence(codes, sizeof(codes), 1);
	struct cuts cuts = grams_cuts(sizeof(codes), 100);
	struct suffix suffix;
	struct estimate_input input = {.sequence = &sequence,
				       .cuts = &cuts,
				       .suffix = &suffix,
				       .orders = 5,
				       .threads = 1};
	struct findings exact, longer;

	(void)state;
	grams_pseudo_text(codes, sizeof(codes), 43);
	exact = grams_findings(&sequence, 5, &cuts);
	assert_int_equal(suffix_init(&suffix, &sequence, 32, NULL), STATUS_OK);
	assert_int_equal(
		estimator_find("ngram")->measure(&input, &longer, NULL),
		STATUS_OK);
	assert_memory_equal(exact.orders, longer.orders,
			    5 * sizeof(*exact.orders));
	for (size_t i = 0; i < 5; i++)
		assert_memory_equal(exact.series[i].costs.block_q16,
				    longer.series[i].costs.block_q16,
				    100 * sizeof(int64_t));
	findings_release(&exact);
	findings_release(&longer);
	suffix_release(&suffix);
	free(cuts.symbol);
}

static void relabelled_symbols_change_nothing(void **state)
{
	const size_t n = 20000;
	uint8_t *codes = calloc(2 * n, 1);
	struct sequence sequence = grams_sequence(codes, n, 1);
	struct cuts cuts = grams_cuts(n, 100);
	struct findings plain, relabelled;

	(void)state;
	grams_pseudo_text(codes, n, 19);
	plain = grams_findings(&sequence, 12, &cuts);
	/* 77 is odd, so this is a permutation of the bytes; then two bytes. */
	for (size_t i = n; i-- > 0;) {
		uint8_t other = (uint8_t)(codes[i] * 77 + 5);

		codes[2 * i] = other ^ 0x5a;
		codes[2 * i + 1] = other;
	}
	sequence = grams_sequence(codes, n, 2);
	relabelled = grams_findings(&sequence, 12, &cuts);
	assert_memory_equal(plain.orders, relabelled.orders,
			    12 * sizeof(*plain.orders));
	for (size_t i = 0; i < 12; i++)
		assert_memory_equal(plain.series[i].costs.block_q16,
				    relabelled.series[i].costs.block_q16,
				    100 * sizeof(int64_t));
	findings_release(&plain);
	findings_release(&relabelled);
	free(cuts.symbol);
	free(codes);
}

/* H_k grows and h_k falls with k, exactly, when counts are cyclic (Cover and
 * Thomas, theorem 4.2.1 to 4.2.2, from memory). */
static void conditional_entropy_never_rises(void **state)
{
	uint8_t codes[3000] = {0};
	struct sequence sequence = grams_sequence(codes, sizeof(codes), 1);
	struct findings findings;

	(void)state;
	grams_pseudo_text(codes, sizeof(codes), 23);
	findings = grams_findings(&sequence, 32, NULL);
	for (unsigned k = 1; k < 32; k++) {
		int64_t here = findings.series[k - 1].costs.headline_q16;
		int64_t next = findings.series[k].costs.headline_q16;

		assert_true(next >= 0 && next <= here + 1);
	}
	findings_release(&findings);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(block_bits_symbol_by_symbol),
		cmocka_unit_test(block_bits_of_uneven_and_tiny_blocks),
		cmocka_unit_test(headlines_are_the_same_without_blocks),
		cmocka_unit_test(a_longer_suffix_order_changes_nothing),
		cmocka_unit_test(relabelled_symbols_change_nothing),
		cmocka_unit_test(conditional_entropy_never_rises),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
