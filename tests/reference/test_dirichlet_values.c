/* Does the sequential code meet published values and closed forms? */
#include "support/coded.h"

#include "base/random.h"
#include "support/near.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static double order_zero(const uint8_t *codes, size_t n, uint64_t alphabet)
{
	struct sequence sequence = coded_sequence(codes, n, alphabet);

	return coded_dirichlet(&sequence, 0, 0, ALPHABET_OF_KIND);
}

/* Willems, Shtarkov, Tjalkens 1995, table I (from memory): the estimator of
 * Krichevsky and Trofimov after a zeros and b ones, in any order. */
static void table_of_zeros_and_ones(void **state)
{
	static const struct {
		size_t zeros, ones;
		double probability;
	} table[] = {
		{1, 0, 1. / 2},   {2, 0, 3. / 8},   {1, 1, 1. / 8},
		{3, 0, 5. / 16},  {2, 1, 1. / 16},  {4, 0, 35. / 128},
		{3, 1, 5. / 128}, {2, 2, 3. / 128}, {5, 0, 63. / 256},
	};

	(void)state;
	for (size_t i = 0; i < sizeof(table) / sizeof(*table); i++) {
		size_t n = table[i].zeros + table[i].ones;
		uint8_t zeros_first[5] = {0}, ones_first[5] = {0};

		memset(zeros_first + table[i].zeros, 1, table[i].ones);
		memset(ones_first, 1, table[i].ones);
		assert_near(order_zero(zeros_first, n, 2),
			    -log2(table[i].probability), 1e-8);
		assert_near(order_zero(ones_first, n, 2),
			    -log2(table[i].probability), 1e-8);
	}
}

/* Recomputed to 10 digits: log2 of Gamma(n + 1) sqrt(pi) / Gamma(n + 1/2), near
 * half log2 of pi n. */
static void a_million_zeros(void **state)
{
	uint8_t *codes = calloc(1000000, 1);

	(void)state;
	assert_near(order_zero(codes, 1000000, 2), 10.79153, 6e-6);
	free(codes);
}

/*
 * Gamma(1) / Gamma(n + 1) times the product over symbols of
 * Gamma(c + 1/A) / Gamma(1/A): the Dirichlet integral; lgamma of the C library.
 */
static double closed_form(const uint8_t *codes, size_t n, double alphabet)
{
	double bits = lgamma((double)n + 1), count[256] = {0};

	for (size_t i = 0; i < n; i++)
		count[codes[i]]++;
	for (unsigned x = 0; x < 256; x++) {
		if (count[x] > 0)
			bits -= lgamma(count[x] + 1 / alphabet) -
				lgamma(1 / alphabet);
	}
	return bits / log(2);
}

static void the_dirichlet_integral(void **state)
{
	static const uint64_t alphabets[] = {2,   4,     27,
					     256, 65536, UINT64_C(1) << 32};
	const size_t n = 200000;
	uint8_t *codes = calloc(n, 1);
	struct random_stream random;

	(void)state;
	random_init(&random, 7, 0);
	for (size_t i = 0; i < sizeof(alphabets) / sizeof(*alphabets); i++) {
		uint32_t most =
			alphabets[i] < 256 ? (uint32_t)alphabets[i] : 200;

		for (size_t t = 0; t < n; t++)
			codes[t] = (uint8_t)random_below(
				&random, 1 + random_below(&random, most));
		assert_near(order_zero(codes, n, alphabets[i]),
			    closed_form(codes, n, (double)alphabets[i]), 1e-3);
	}
	free(codes);
}

static double best_fixed(size_t ones, size_t n)
{
	double p = (double)ones / (double)n;

	return ones == 0 || ones == n
		       ? 0
		       : -(double)n * (p * log2(p) + (1 - p) * log2(1 - p));
}

/*
 * The largest excess over the best fixed coin. No code has less than the
 * minimax regret (Shtarkov 1987; recomputed by summing the maximum likelihoods:
 * 2.220397, 3.723554, 5.332823 bits), and this estimator at most
 * half log2 n + 1 (Willems, Shtarkov, Tjalkens 1995, from memory).
 */
static void regret_of_coins(void **state)
{
	static const struct {
		size_t n;
		double minimax;
	} table[] = {{10, 2.220397}, {100, 3.723554}, {1000, 5.332823}};

	(void)state;
	for (size_t i = 0; i < 3; i++) {
		size_t n = table[i].n;
		uint8_t codes[1000] = {0};
		double most = 0;

		for (size_t ones = 0; ones <= n; ones++) {
			double regret =
				order_zero(codes, n, 2) - best_fixed(ones, n);

			assert_true(regret > 0);
			most = fmax(most, regret);
			if (ones < n)
				codes[ones] = 1;
		}
		assert_true(most >= table[i].minimax);
		assert_true(most <= log2((double)n) / 2 + 1 + 1e-8);
	}
}

/* Bits above the plug-in entropy after the first n symbols. */
static double above_plugin(const uint8_t *codes, size_t n, unsigned k)
{
	struct sequence sequence = coded_sequence(codes, n, 256);
	struct findings plugin = coded_findings(
		(struct coded_run){.row = "ngram", .orders = 2}, &sequence);
	double gap = coded_dirichlet(&sequence, 0, k, ALPHABET_OF_KIND) -
		     bits_from_q16(plugin.series[k].costs.headline_q16);

	findings_release(&plugin);
	return gap;
}

/*
 * A source with p free parameters costs (p / 2) log2 n bits above its plug-in
 * entropy, and a constant: Rissanen 1984. Four times as much data therefore p
 * bits more; 60 letters in contexts of none and of one.
 */
static void the_price_of_parameters(void **state)
{
	const double parameters[] = {59, 60 * 59};
	const size_t n = 1600000;
	uint8_t *codes = calloc(n, 1);
	struct random_stream random;

	(void)state;
	random_init(&random, 8, 0);
	for (size_t t = 1; t < n; t++)
		codes[t] = (uint8_t)((codes[t - 1] * 7u +
				      random_below(&random, 60)) %
				     60);
	for (unsigned k = 0; k < 2; k++)
		assert_near((above_plugin(codes, n, k) -
			     above_plugin(codes, n / 4, k)) /
				    parameters[k],
			    1, 0.05);
	free(codes);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(table_of_zeros_and_ones),
		cmocka_unit_test(a_million_zeros),
		cmocka_unit_test(the_dirichlet_integral),
		cmocka_unit_test(regret_of_coins),
		cmocka_unit_test(the_price_of_parameters),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
