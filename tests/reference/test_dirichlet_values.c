/* Does the Dirichlet code give the published probabilities? */
#include "estimate/dirichlet_code.h"

#include "estimate/estimator.h"
#include "support/grams.h"
#include "support/near.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

/* Bits at context order 0 over two letters, without any charge. */
static double binary_bits(const uint8_t *codes, size_t n)
{
	const struct cuts none = {0};
	struct sequence sequence = grams_sequence(codes, n, 1);
	struct dirichlet_input input = {.sequence = &sequence,
					.cuts = &none,
					.alphabet = {2, sequence.distinct}};
	struct dirichlet_sums sums;
	double bits;

	assert_int_equal(dirichlet_code(&input, &sums), STATUS_OK);
	bits = ldexp((double)sums.total_q32[0][ALPHABET_OF_KIND], -32);
	dirichlet_sums_release(&sums);
	return bits;
}

/* a times 0, then b times 1; the order does not matter to the code. */
static double counted_bits(size_t a, size_t b)
{
	uint8_t *codes = calloc(a + b, 1);
	double bits;

	memset(codes + a, 1, b);
	bits = binary_bits(codes, a + b);
	free(codes);
	return bits;
}

/* Willems, Shtarkov and Tjalkens 1995, table I: P_e(a, b). */
static void test_published_probabilities(void **state)
{
	static const struct {
		size_t a, b;
		double numerator, denominator;
	} table[] = {
		{1, 0, 1, 2},   {2, 0, 3, 8},   {1, 1, 1, 8},
		{3, 0, 5, 16},  {2, 1, 1, 16},  {4, 0, 35, 128},
		{3, 1, 5, 128}, {2, 2, 3, 128}, {5, 0, 63, 256},
	};

	(void)state;
	for (size_t i = 0; i < sizeof(table) / sizeof(table[0]); i++) {
		double wanted = log2(table[i].denominator / table[i].numerator);

		assert_near(counted_bits(table[i].a, table[i].b), wanted, 5e-9);
		assert_near(counted_bits(table[i].b, table[i].a), wanted, 5e-9);
	}
}

static double log2_gamma(double x)
{
	return lgamma(x) / log(2);
}

/* Krichevsky and Trofimov 1981: G(a + 1/2) G(b + 1/2) / (pi G(a + b + 1)). */
static double closed_form(size_t a, size_t b)
{
	return log2(acos(-1.0)) + log2_gamma((double)(a + b) + 1) -
	       log2_gamma((double)a + 0.5) - log2_gamma((double)b + 0.5);
}

static void test_closed_form(void **state)
{
	static const size_t counts[][2] = {
		{7, 12}, {0, 100}, {41, 958}, {3000, 7000}, {123456, 76543}};

	(void)state;
	for (size_t i = 0; i < sizeof(counts) / sizeof(counts[0]); i++) {
		double n = (double)(counts[i][0] + counts[i][1]);

		assert_near(counted_bits(counts[i][0], counts[i][1]),
			    closed_form(counts[i][0], counts[i][1]),
			    1e-6 + n * 1e-9);
	}
}

/* log2 of sqrt(pi n) to first order, from the closed form with b = 0. */
static void test_million_zeros(void **state)
{
	(void)state;
	assert_near(counted_bits(1000000, 0), 10.79153, 2e-4);
	assert_near(counted_bits(1000000, 0), closed_form(1000000, 0), 2e-4);
}

static double entropy_bits(size_t a, size_t n)
{
	double p = (double)a / (double)n;

	if (a == 0 || a == n)
		return 0;
	return -(double)n * (p * log2(p) + (1 - p) * log2(1 - p));
}

/*
 * The exact normalised-maximum-likelihood regret (Shtarkov 1987), the sum over
 * a of C(n, a) (a/n)^a (1 - a/n)^(n - a), computed from its formula; the least
 * worst case of any code. The upper bound: Willems, Shtarkov, Tjalkens 1995.
 */
static void test_worst_regret(void **state)
{
	static const struct {
		size_t n;
		double least;
	} table[] = {{10, 2.220397}, {100, 3.723554}, {1000, 5.332823}};

	(void)state;
	for (size_t i = 0; i < sizeof(table) / sizeof(table[0]); i++) {
		size_t n = table[i].n;
		double worst = 0;

		for (size_t a = 0; a <= n; a++) {
			double regret =
				counted_bits(n - a, a) - entropy_bits(a, n);

			worst = regret > worst ? regret : worst;
		}
		assert_true(worst >= table[i].least);
		assert_true(worst <= log2((double)n) / 2 + 1 + 1e-6);
	}
}

/* log2 C(A, m) by the gamma function; C(10, 3) = 120. */
static void test_subset_bits(void **state)
{
	static const uint64_t table[][2] = {
		{256, 62}, {256, 256}, {65536, 65000}, {4294967296, 3}, {2, 1}};
	wide_int bits;

	(void)state;
	assert_int_equal(subset_bits_q32(10, 3, &bits), STATUS_OK);
	assert_near(ldexp((double)bits, -32), log2(120), 1e-8);
	assert_int_equal(subset_bits_q32(UINT64_C(1) << 32, 2, &bits),
			 STATUS_OK);
	assert_near(ldexp((double)bits, -32), 63 + log2(1 - ldexp(1, -32)),
		    1e-8);
	for (size_t i = 0; i < sizeof(table) / sizeof(table[0]); i++) {
		double all = (double)table[i][0], some = (double)table[i][1];

		assert_int_equal(
			subset_bits_q32(table[i][0], table[i][1], &bits),
			STATUS_OK);
		assert_near(ldexp((double)bits, -32),
			    log2_gamma(all + 1) - log2_gamma(some + 1) -
				    log2_gamma(all - some + 1),
			    1e-5 + all * 1e-14);
	}
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(test_published_probabilities),
		cmocka_unit_test(test_closed_form),
		cmocka_unit_test(test_million_zeros),
		cmocka_unit_test(test_worst_regret),
		cmocka_unit_test(test_subset_bits),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
