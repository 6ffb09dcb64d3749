/* Are the gram facts those of a slow cyclic counter, and exact where known? */
#include "base/random.h"
#include "base/sum.h"
#include "support/grams.h"
#include "support/near.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

/* Facts are rounded to 2^-16 bits; logarithms to 2^-33 bits a symbol. */
static double rounding(size_t n)
{
	return 0x1p-16 / (double)n + 1e-10;
}

/* The facts of k-grams that start from first to last - 1. */
static void check_counts(const struct sequence *sequence, unsigned k,
			 size_t first, size_t last,
			 const struct gram_counts *counts)
{
	uint64_t *count = malloc(sequence->n * sizeof(*count));
	uint64_t once = 0, twice = 0;
	double positions = (double)(last - first);
	struct sum distinct = {0}, bits = {0};

	grams_count(sequence, k, first, last, count);
	for (size_t s = first; s < last; s++) {
		once += count[s] == 1;
		twice += count[s] == 2;
		sum_add(&distinct, 1.0 / (double)count[s]);
		sum_add(&bits, log2(positions / (double)count[s]));
	}
	free(count);
	assert_int_equal(counts->positions, last - first);
	assert_int_equal(counts->once, once);
	assert_int_equal(counts->twice, twice / 2);
	assert_near((double)counts->distinct, sum_value(&distinct), 1e-6);
	if (last == first)
		return;
	assert_near(log2(positions) -
			    bits_from_q16(counts->plugin_q16) / positions,
		    sum_value(&bits) / positions, rounding(last - first));
}

static void check_orders(const struct sequence *sequence, unsigned orders)
{
	struct findings findings = grams_findings(sequence, orders, NULL);
	size_t n = sequence->n, half = n / 2;

	for (unsigned k = 1; k <= orders; k++) {
		const struct order_counts *at = &findings.orders[k - 1];

		assert_int_equal(at->order, k);
		check_counts(sequence, k, 0, n, &at->all);
		check_counts(sequence, k, 0, half, &at->half[0]);
		check_counts(sequence, k, half, n, &at->half[1]);
	}
	findings_release(&findings);
}

static void pseudo_text_to_a_billionth_bit(void **state)
{
	const size_t n = 150000;
	uint8_t *codes = calloc(n, 1);
	struct sequence sequence;

	(void)state;
	grams_pseudo_text(codes, n, 7);
	sequence = grams_sequence(codes, n, 1);
	assert_true(rounding(n) < 1e-9);
	check_orders(&sequence, 6);
	free(codes);
}

static void frequent_grams_beyond_the_tables(void **state)
{
	const size_t n = 60000;
	struct random_stream random;
	uint8_t *codes = calloc(n, 1);
	struct sequence sequence = grams_sequence(codes, n, 1);

	(void)state;
	random_init(&random, 2, 2);
	for (size_t i = 0; i < n; i++)
		codes[i] = random_below(&random, 9) == 0;
	check_orders(&sequence, 8);
	free(codes);
}

static void wide_codes_and_short_sequences(void **state)
{
	struct random_stream random;
	uint8_t codes[4 * 90] = {0};

	(void)state;
	random_init(&random, 3, 3);
	for (unsigned round = 0; round < 240; round++) {
		unsigned width = 1 + round % 4;
		size_t n = 1 + round * 3 / 8;
		struct sequence sequence = grams_sequence(codes, n, width);

		for (size_t i = 0; i < n * width; i++)
			codes[i] =
				(uint8_t)random_below(&random, 1 + round % 3);
		check_orders(&sequence, 1 + round % 32);
	}
}

static double digamma(uint64_t c)
{
	/* psi(c) = -gamma + sum 1/j; gamma: OEIS A001620, from memory. */
	struct sum sum = {-0.57721566490153286, 0};

	for (uint64_t j = 1; j < c; j++)
		sum_add(&sum, 1.0 / (double)j);
	return sum_value(&sum);
}

static double grassberger(uint64_t c)
{
	/* G(2j) = -gamma - ln 2 + 2 (1 + 1/3 + … + 1/(2j - 1)). */
	struct sum sum = {-0.57721566490153286 - 0.69314718055994531, 0};

	for (uint64_t j = 1; j < c; j += 2)
		sum_add(&sum, 2.0 / (double)j);
	return sum_value(&sum);
}

/*
 * A symbol seen c times between single ones: the sums at order 1 are
 * c f(c) + f(1) in bits. Abramowitz and Stegun 6.3.2 for psi; Grassberger 2003,
 * physics/0307138, for G; recomputed here by summing the series.
 */
static void sums_over_every_count(void **state)
{
	const uint64_t counts[] = {1,    2,    3,    4,    5,     6,
				   7,    8,    100,  4094, 4095,  4096,
				   4097, 4098, 5001, 9999, 50000, 123457};
	uint8_t *codes = calloc(123458, 1);

	(void)state;
	for (size_t i = 0; i < sizeof(counts) / sizeof(*counts); i++) {
		uint64_t c = counts[i];
		struct sequence sequence = grams_sequence(codes, c + 1, 1);
		struct findings findings;
		const struct gram_counts *all;
		double real = (double)c, tolerance = 0x1p-17 + real * 1e-13;

		codes[c] = 9;
		findings = grams_findings(&sequence, 1, NULL);
		all = &findings.orders[0].all;
		assert_near(bits_from_q16(all->plugin_q16), real * log2(real),
			    0x1p-17 + real * 0x1p-33);
		assert_near(bits_from_q16(all->psi_q16),
			    (real * digamma(c) + digamma(1)) / log(2),
			    tolerance);
		assert_near(bits_from_q16(all->grassberger_q16),
			    (real * grassberger(c) + grassberger(1)) / log(2),
			    tolerance);
		findings_release(&findings);
		codes[c] = 0;
	}
	free(codes);
}

/* Every k-gram once, so H_j = j to order k and the next symbol is certain
 * (de Bruijn 1946); all exact, powers of two having exact logarithms. */
static void de_bruijn_words(void **state)
{
	uint8_t codes[1024] = {0};

	(void)state;
	for (unsigned k = 1; k <= 10; k++) {
		size_t n = (size_t)1 << k;
		struct sequence sequence = grams_sequence(codes, n, 1);
		struct findings findings;

		grams_de_bruijn(codes, k);
		findings = grams_findings(&sequence, k + 3, NULL);
		for (unsigned j = 1; j <= k + 3; j++) {
			const struct gram_counts *all =
				&findings.orders[j - 1].all;
			unsigned wanted = j < k ? j : k;

			assert_int_equal(all->distinct, 1u << wanted);
			assert_int_equal(all->plugin_q16,
					 (int64_t)n * (k - wanted) * BIT_Q16);
			assert_int_equal(
				findings.series[j - 1].costs.headline_q16,
				j <= k ? (int64_t)n * BIT_Q16 : 0);
		}
		findings_release(&findings);
	}
}

/* Sturmian: k + 1 factors of length k (Morse and Hedlund 1940). A whole
 * Fibonacci word is also cyclically balanced, so the circle adds none. */
static void fibonacci_words(void **state)
{
	uint8_t codes[2584] = {0};
	struct sequence sequence = grams_sequence(codes, sizeof(codes), 1);
	struct findings findings;

	(void)state;
	grams_fibonacci(codes, sizeof(codes));
	findings = grams_findings(&sequence, 32, NULL);
	for (unsigned k = 1; k <= 32; k++)
		assert_int_equal(findings.orders[k - 1].all.distinct, k + 1);
	findings_release(&findings);
}

/* Factor counts of the Thue-Morse word: OEIS A005942, from memory (Brlek
 * 1989). The image of 0 0, itself a factor, closes the circle. */
static void thue_morse_word(void **state)
{
	const unsigned wanted[] = {2, 4, 6, 10, 12, 16, 20, 22, 24, 28, 32, 36};
	uint8_t codes[4096] = {0};
	struct sequence sequence = grams_sequence(codes, sizeof(codes), 1);
	struct findings findings;

	(void)state;
	grams_thue_morse(codes, sizeof(codes));
	findings = grams_findings(&sequence, 12, NULL);
	for (size_t i = 0; i < 12; i++)
		assert_int_equal(findings.orders[i].all.distinct, wanted[i]);
	findings_release(&findings);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(pseudo_text_to_a_billionth_bit),
		cmocka_unit_test(frequent_grams_beyond_the_tables),
		cmocka_unit_test(wide_codes_and_short_sequences),
		cmocka_unit_test(sums_over_every_count),
		cmocka_unit_test(de_bruijn_words),
		cmocka_unit_test(fibonacci_words),
		cmocka_unit_test(thue_morse_word),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
