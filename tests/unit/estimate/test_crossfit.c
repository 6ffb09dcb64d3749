/* Is cross-fitting what a slow counter in real numbers gives? */
#include "support/coded.h"

#include "estimate/crossfit_share.h"
#include "estimate/estimator.h"
#include "suffix/suffix.h"

#include "base/memory.h"
#include "base/random.h"
#include "support/grams.h"
#include "support/near.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#define MOST 700

static size_t fold_begin(size_t n, size_t f)
{
	return n * f / 8;
}

static size_t fold_of(size_t n, size_t t)
{
	size_t f = 7;

	while (fold_begin(n, f) > t)
		f--;
	return f;
}

/* Do the grams of k symbols that end at t and u agree in their first symbols?
 */
static bool same(const uint8_t *codes, size_t t, size_t u, unsigned k,
		 unsigned symbols)
{
	return memcmp(codes + t + 1 - k, codes + u + 1 - k, symbols) == 0;
}

static bool kept(size_t n, size_t t, unsigned k)
{
	return t + 1 >= fold_begin(n, fold_of(n, t)) + k;
}

/* Order k from q, the probabilities of order k - 1, over what others hold. */
static double lengthen(const uint8_t *codes, size_t n, unsigned k, size_t t,
		       double shorter)
{
	double s = 0, sx = 0, different = 0;
	bool seen[256] = {false};

	for (size_t u = k - 1; u < n; u++) {
		if (!kept(n, u, k) || fold_of(n, u) == fold_of(n, t) ||
		    !same(codes, t, u, k, k - 1))
			continue;
		s++;
		sx += codes[u] == codes[t];
		different += !seen[codes[u]];
		seen[codes[u]] = true;
	}
	return s > 0 ? (sx + different * shorter) / (s + different) : shorter;
}

/* n times the mean loss at every order, until no gram fits into a fold. */
static unsigned by_hand(const uint8_t *codes, size_t n, double alphabet,
			unsigned orders, double *bits)
{
	double q[MOST];

	for (size_t t = 0; t < n; t++)
		q[t] = 1 / alphabet;
	for (unsigned k = 1; k <= orders; k++) {
		double sum = 0, count = 0;

		for (size_t t = 0; t < n; t++) {
			if (!kept(n, t, k))
				continue;
			q[t] = lengthen(codes, n, k, t, q[t]);
			sum -= log2(q[t]);
			count++;
		}
		if (count == 0)
			return k - 1;
		bits[k - 1] = sum / count * (double)n;
	}
	return orders;
}

/* Orders shown: up to the fourth rise in a row. */
static unsigned until_risen(const double *bits, unsigned orders)
{
	unsigned rises = 0;

	for (unsigned k = 1; k < orders; k++) {
		rises = bits[k] > bits[k - 1] ? rises + 1 : 0;
		if (rises == 4)
			return k + 1;
	}
	return orders;
}

static void fill(uint8_t *codes, size_t n, unsigned letters, uint64_t seed)
{
	struct random_stream random;

	random_init(&random, seed, 0);
	for (size_t i = 0; i < n; i++)
		codes[i] = (uint8_t)(i > 9 && random_below(&random, 20)
					     ? codes[i - 1 - seed % 9]
					     : random_below(&random, letters));
}

static void check(const uint8_t *codes, size_t n, uint64_t alphabet,
		  unsigned orders)
{
	struct sequence sequence = coded_sequence(codes, n, alphabet);
	struct findings findings = coded_findings(
		(struct coded_run){.row = "crossfit", .orders = orders},
		&sequence);
	double bits[32];
	unsigned wanted = by_hand(codes, n, (double)alphabet, orders, bits);

	assert_int_equal(findings.series_count, until_risen(bits, wanted));
	for (unsigned k = 0; k < findings.series_count; k++) {
		assert_int_equal(findings.series[k].order, k + 1);
		assert_near(
			bits_from_q16(findings.series[k].costs.headline_q16) /
				(double)n,
			bits[k] / (double)n, 1e-6);
	}
	findings_release(&findings);
}

static void against_a_slow_counter(void **state)
{
	uint8_t codes[MOST];

	(void)state;
	for (unsigned round = 0; round < 24; round++) {
		size_t n = 64 + round * 27;

		fill(codes, n, 1 + round % 7, round);
		check(codes, n, 7 + round % 2 * 249, 1 + round * 7 % 32);
	}
}

/* Random letters: the mean rises from the start and is soon given up. */
static void orders_that_only_rise(void **state)
{
	uint8_t codes[MOST];
	struct random_stream random;

	(void)state;
	random_init(&random, 1, 1);
	for (size_t i = 0; i < MOST; i++)
		codes[i] = (uint8_t)random_below(&random, 16);
	check(codes, MOST, UINT64_C(1) << 32, 32);
}

/* One symbol that was never seen: n^-k and no floor under it. */
static void a_single_surprise(void **state)
{
	uint8_t codes[MOST] = {0};

	(void)state;
	codes[MOST - 20] = 1;
	check(codes, MOST, 256, 12);
	check(codes, MOST, 256, 32);
}

/* Folds of 8 symbols hold no gram of 9. */
static void folds_shorter_than_the_order(void **state)
{
	uint8_t codes[70] = {0};

	(void)state;
	check(codes, 64, 2, 32);
	check(codes, 70, 2, 32);
}

static void too_short(void **state)
{
	uint8_t codes[63] = {0};
	struct sequence sequence = coded_sequence(codes, 63, 2);
	struct suffix suffix;
	struct cuts none = {.blocks = 0};
	struct estimate_input input = {.sequence = &sequence,
				       .cuts = &none,
				       .suffix = &suffix,
				       .orders = 2};
	struct findings findings;
	struct reason why;

	(void)state;
	assert_int_equal(suffix_init(&suffix, &sequence, 2, &why), STATUS_OK);
	assert_int_equal(
		estimator_find("crossfit")->measure(&input, &findings, &why),
		STATUS_TOO_SHORT);
	assert_non_null(strstr(why.text, "at least 64"));
	suffix_release(&suffix);
}

/* Bits of a block: those of its symbols, one left out counting as the mean. */
static void blocks_of_the_row(void **state)
{
	uint8_t codes[MOST];
	struct sequence sequence;
	struct findings findings;
	struct cuts cuts = grams_cuts(MOST, 9);

	(void)state;
	fill(codes, MOST, 5, 3);
	sequence = coded_sequence(codes, MOST, 256);
	findings = coded_findings((struct coded_run){.row = "crossfit",
						     .cuts = &cuts,
						     .orders = 3},
				  &sequence);
	for (unsigned k = 1; k <= 3; k++) {
		const struct costs *costs = &findings.series[k - 1].costs;
		double q[MOST], block[9] = {0};

		assert_int_equal(costs_block_total(costs), costs->headline_q16);
		for (size_t t = 0; t < MOST; t++) {
			q[t] = 1. / 256;
			for (unsigned j = 1; j <= k; j++)
				if (kept(MOST, t, j))
					q[t] = lengthen(codes, MOST, j, t,
							q[t]);
		}
		for (size_t i = 0; i < 9; i++) {
			for (size_t t = cuts.symbol[i]; t < cuts.symbol[i + 1];
			     t++)
				block[i] +=
					kept(MOST, t, k)
						? -log2(q[t])
						: bits_from_q16(
							  costs->headline_q16) /
							  MOST;
			assert_near(bits_from_q16(costs->block_q16[i]),
				    block[i], 1e-4);
		}
	}
	findings_release(&findings);
	free(cuts.symbol);
}

/* The number in one word, against real numbers. */
static void shares(void **state)
{
	struct quick_log2 *logs;
	struct random_stream random;
	double bits = 0;
	uint64_t share[500];

	(void)state;
	random_init(&random, 4, 4);
	assert_int_equal(quick_log2_new(&logs), STATUS_OK);
	for (unsigned i = 0; i < 500; i++) {
		uint64_t alphabet = 1 + (random_u64(&random) >> (32 + i % 32));
		double real = 1 / (double)alphabet;

		share[i] = share_uniform(alphabet);
		for (unsigned j = 0; j < 32; j++) {
			uint64_t count =
				random_below(&random, 3)
					? 0
					: random_below(&random, 100000);
			uint64_t total =
				count + 1 + random_below(&random, 1u << i % 31);
			uint64_t weight = 1 + (total - count) / 2;

			total += weight;
			real = ((double)count + (double)weight * real) /
			       (double)total;
			share[i] = share_blend(share[i], count, weight,
					       UINT64_MAX / total);
			assert_near((double)share_bits_q32(logs, &share[i], 1) *
					    0x1p-32,
				    -log2(real), 1e-7);
		}
		bits -= log2(real);
	}
	assert_near((double)share_bits_q32(logs, share, 500) * 0x1p-32, bits,
		    1e-5);
	memory_free(logs);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(against_a_slow_counter),
		cmocka_unit_test(orders_that_only_rise),
		cmocka_unit_test(a_single_surprise),
		cmocka_unit_test(folds_shorter_than_the_order),
		cmocka_unit_test(too_short),
		cmocka_unit_test(blocks_of_the_row),
		cmocka_unit_test(shares),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
