/* Is the cross-fit what its formula says, symbol by symbol? */
#include "estimate/estimator.h"

#include "base/random.h"
#include "suffix/suffix.h"
#include "support/grams.h"
#include "support/near.h"
#include "support/symbols_of.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static struct findings measure(const struct sequence *sequence, unsigned orders,
			       const struct cuts *cuts)
{
	const struct cuts none = {0};
	struct suffix suffix;
	struct estimate_input input = {.sequence = sequence,
				       .cuts = cuts ? cuts : &none,
				       .suffix = &suffix,
				       .orders = orders,
				       .threads = 1};
	struct findings findings;

	assert_int_equal(suffix_init(&suffix, sequence, orders, NULL),
			 STATUS_OK);
	assert_int_equal(
		estimator_find("crossfit")->measure(&input, &findings, NULL),
		STATUS_OK);
	suffix_release(&suffix);
	return findings;
}

/* Whether the grams of k symbols from a and b on are the same. */
static int same_gram(const uint32_t *codes, size_t a, size_t b, unsigned k)
{
	return memcmp(codes + a, codes + b, k * sizeof(*codes)) == 0;
}

/* Whether k symbols from start on lie in one fold. */
static int in_fold(size_t start, unsigned k, size_t n)
{
	return start + k <= n && start * 8 / n == (start + k - 1) * 8 / n;
}

/* One more order for the symbol that ends the gram of k symbols at start. */
static double next_share(const uint32_t *codes, size_t n, size_t start,
			 unsigned k, double share)
{
	double context = 0, gram = 0, successors = 0;
	uint32_t *seen = malloc(n * sizeof(*seen));
	size_t different = 0;

	for (size_t u = 0; u < n; u++) {
		size_t i = 0;

		if (!in_fold(u, k, n) || u * 8 / n == start * 8 / n ||
		    !same_gram(codes, u, start, k - 1))
			continue;
		context++;
		gram += codes[u + k - 1] == codes[start + k - 1];
		while (i < different && seen[i] != codes[u + k - 1])
			i++;
		if (i == different)
			seen[different++] = codes[u + k - 1];
	}
	free(seen);
	successors = (double)different;
	if (context == 0)
		return share;
	return (gram + successors * share) / (context + successors);
}

struct slow {
	size_t n, orders;
	uint32_t *codes;
	double *share;
	double mean[32];
};

/* Leaves the shares of the last order in slow->share. */
static struct slow by_definition(const struct sequence *sequence,
				 unsigned orders)
{
	struct slow slow = {.n = sequence->n};
	size_t n = sequence->n;

	slow.codes = malloc(n * sizeof(*slow.codes));
	slow.share = malloc(n * sizeof(*slow.share));
	for (size_t t = 0; t < n; t++) {
		slow.codes[t] = code_of(sequence, t);
		slow.share[t] = 1 / (double)sequence->alphabet;
	}
	for (unsigned k = 1; k <= orders; k++) {
		double sum = 0, kept = 0;

		for (size_t s = 0; s + k <= n; s++) {
			double *share = &slow.share[s + k - 1];

			if (!in_fold(s, k, n))
				continue;
			*share = next_share(slow.codes, n, s, k, *share);
			sum -= log2(*share);
			kept++;
		}
		if (kept == 0)
			break;
		slow.mean[k - 1] = sum / kept;
		slow.orders = k;
	}
	return slow;
}

static void slow_release(struct slow *slow)
{
	free(slow->codes);
	free(slow->share);
}

/* Orders made: up to four in a row that rose. */
static size_t orders_made(const struct slow *slow)
{
	size_t k = 1, rises = 0;

	while (k < slow->orders && rises < 4) {
		rises = slow->mean[k] > slow->mean[k - 1] ? rises + 1 : 0;
		k++;
	}
	return k;
}

static void check_by_definition(const struct sequence *sequence,
				unsigned orders)
{
	struct slow slow = by_definition(sequence, orders);
	struct findings findings = measure(sequence, orders, NULL);
	double n = (double)sequence->n;

	assert_int_equal(findings.series_count, orders_made(&slow));
	for (size_t i = 0; i < findings.series_count; i++) {
		const struct series *series = &findings.series[i];

		assert_int_equal(series->order, i + 1);
		assert_null(series->costs.block_q16);
		assert_near(bits_from_q16(series->costs.headline_q16),
			    n * slow.mean[i], n * 1e-9 + 1.0 / BIT_Q16);
	}
	findings_release(&findings);
	slow_release(&slow);
}

static void check_kind(const uint8_t *bytes, size_t length,
		       enum symbol_kind kind, unsigned orders)
{
	struct sequence sequence =
		sequence_of((struct slice){bytes, length}, kind);

	check_by_definition(&sequence, orders);
	sequence_release(&sequence);
}

static void test_definition(void **state)
{
	uint8_t text[900];

	(void)state;
	grams_pseudo_text(text, sizeof(text), 3);
	check_kind(text, sizeof(text), SYMBOL_BYTE, 8);
	check_kind(text, 77, SYMBOL_BYTE, 8);
	check_kind(text, 50, SYMBOL_BIT, 12);
	check_kind(text, sizeof(text), SYMBOL_WORD, 4);
	check_kind(text, sizeof(text), SYMBOL_LETTERS27, 5);
	check_kind(text, sizeof(text), SYMBOL_U16BE, 4);
	check_kind(text, sizeof(text), SYMBOL_CODEPOINT, 6);
	check_kind(text, sizeof(text), SYMBOL_U32LE, 3);
}

/* Wide codes that repeat, so that higher orders find something. */
static void test_wide_definition(void **state)
{
	uint8_t text[400], wide[1600];

	(void)state;
	grams_pseudo_text(text, sizeof(text), 4);
	for (size_t i = 0; i < sizeof(wide); i++)
		wide[i] = (uint8_t)(i % 4 == 1 ? 17 : text[i / 4] % 7 * 31);
	check_kind(wide, sizeof(wide), SYMBOL_U32LE, 6);
	check_kind(wide, sizeof(wide), SYMBOL_U16LE, 6);
}

/* Rare after long runs of one symbol: shares far below 2^-62. */
static void test_tiny_shares(void **state)
{
	uint8_t bytes[3000] = {0};
	struct sequence sequence;
	struct slow slow;

	(void)state;
	bytes[2000] = 1;
	sequence = grams_sequence(bytes, sizeof(bytes), 1);
	slow = by_definition(&sequence, 12);
	assert_true(slow.share[2000] < ldexp(1, -100));
	slow_release(&slow);
	check_by_definition(&sequence, 12);
}

static void test_every_short_length(void **state)
{
	static const uint8_t bytes[] = "estuary estuary estuary estuary";

	(void)state;
	for (size_t n = 1; n < sizeof(bytes); n++)
		check_kind(bytes, n, SYMBOL_BYTE, 16);
}

/* One symbol over and over: all that is lost is the 1/256 at order 1. */
static void test_one_symbol(void **state)
{
	uint8_t bytes[800];
	struct sequence sequence;
	struct findings findings;

	(void)state;
	memset(bytes, 'w', sizeof(bytes));
	sequence = grams_sequence(bytes, sizeof(bytes), 1);
	check_by_definition(&sequence, 8);
	findings = measure(&sequence, 8, NULL);
	assert_int_equal(findings.series_count, 8);
	assert_near(bits_from_q16(findings.series[0].costs.headline_q16),
		    -800 * log2((700 + 1.0 / 256) / 701), 1e-4);
	assert_true(findings.series[7].costs.headline_q16 == 0);
	findings_release(&findings);
}

/* Each block: its symbols' losses, those without a gram at the mean. */
static void check_blocks(const struct sequence *sequence, size_t blocks,
			 unsigned order)
{
	struct cuts cuts = grams_cuts(sequence->n, blocks);
	struct findings cut = measure(sequence, order, &cuts);
	struct slow slow = by_definition(sequence, order);
	size_t n = sequence->n;
	const struct costs *costs = &cut.series[order - 1].costs;

	assert_int_equal(cut.series_count, order);
	assert_int_equal(costs->blocks, blocks);
	assert_int_equal(costs_block_total(costs), costs->headline_q16);
	for (size_t i = 0; i < blocks; i++) {
		double bits = 0;

		for (size_t t = cuts.symbol[i]; t < cuts.symbol[i + 1]; t++) {
			size_t s = t - (order - 1);

			if (t >= order - 1 && in_fold(s, order, n))
				bits -= log2(slow.share[t]);
			else
				bits += slow.mean[order - 1];
		}
		assert_near(bits_from_q16(costs->block_q16[i]), bits, 2e-5);
	}
	slow_release(&slow);
	findings_release(&cut);
	free(cuts.symbol);
}

static void test_blocks(void **state)
{
	uint8_t text[600];
	struct sequence sequence;

	(void)state;
	grams_pseudo_text(text, sizeof(text), 11);
	sequence = grams_sequence(text, sizeof(text), 1);
	check_blocks(&sequence, 1, 1);
	check_blocks(&sequence, 7, 3);
	check_blocks(&sequence, 100, 2);
	/* blocks of two symbols: some hold no gram of four */
	check_blocks(&sequence, 300, 4);
}

static void test_blocks_change_nothing(void **state)
{
	size_t n = 40000;
	uint8_t *text = malloc(n);
	struct cuts cuts = grams_cuts(n, 100);
	struct sequence sequence;
	struct findings whole, cut;

	(void)state;
	grams_pseudo_text(text, n, 6);
	sequence = grams_sequence(text, n, 1);
	whole = measure(&sequence, 10, NULL);
	cut = measure(&sequence, 10, &cuts);
	assert_int_equal(cut.series_count, whole.series_count);
	for (size_t i = 0; i < whole.series_count; i++) {
		const struct costs *costs = &cut.series[i].costs;

		assert_int_equal(costs->headline_q16,
				 whole.series[i].costs.headline_q16);
		assert_int_equal(costs_block_total(costs), costs->headline_q16);
	}
	findings_release(&whole);
	findings_release(&cut);
	free(cuts.symbol);
	free(text);
}

/* Counts know symbols apart and nothing else about them. */
static void test_relabelling(void **state)
{
	size_t n = 30000;
	uint8_t *text = malloc(n), *other = malloc(n);
	struct sequence sequence, relabelled;
	struct findings left, right;

	(void)state;
	grams_pseudo_text(text, n, 12);
	for (size_t i = 0; i < n; i++)
		other[i] = (uint8_t)(text[i] * 167 + 41);
	sequence = grams_sequence(text, n, 1);
	relabelled = grams_sequence(other, n, 1);
	left = measure(&sequence, 8, NULL);
	right = measure(&relabelled, 8, NULL);
	assert_int_equal(left.series_count, right.series_count);
	for (size_t i = 0; i < left.series_count; i++)
		assert_int_equal(left.series[i].costs.headline_q16,
				 right.series[i].costs.headline_q16);
	findings_release(&left);
	findings_release(&right);
	free(text);
	free(other);
}

/* The orders end four rises after the least; random bytes rise at once. */
static void test_last_order(void **state)
{
	size_t n = 20000;
	uint8_t *bytes = malloc(n);
	struct random_stream random;
	struct sequence sequence;
	struct findings findings;

	(void)state;
	random_init(&random, 5, 0);
	for (size_t i = 0; i < n; i++)
		bytes[i] = (uint8_t)random_below(&random, 256);
	sequence = grams_sequence(bytes, n, 1);
	findings = measure(&sequence, 16, NULL);
	assert_true(findings.series_count >= 5);
	assert_true(findings.series_count < 16);
	for (size_t i = findings.series_count - 4; i < findings.series_count;
	     i++)
		assert_true(findings.series[i].costs.headline_q16 >
			    findings.series[i - 1].costs.headline_q16);
	findings_release(&findings);
	free(bytes);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(test_definition),
		cmocka_unit_test(test_wide_definition),
		cmocka_unit_test(test_tiny_shares),
		cmocka_unit_test(test_every_short_length),
		cmocka_unit_test(test_one_symbol),
		cmocka_unit_test(test_blocks),
		cmocka_unit_test(test_blocks_change_nothing),
		cmocka_unit_test(test_relabelling),
		cmocka_unit_test(test_last_order),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
