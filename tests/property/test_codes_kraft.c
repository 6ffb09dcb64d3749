/* Do the lengths that a code row gives leave room for a decoder? */
#include "estimate/dirichlet_code.h"

#include "estimate/estimator.h"
#include "support/grams.h"
#include "support/near.h"

#include <math.h>
#include <string.h>

/* Kraft 1949: a complete code has sum of 2^-length = 1 over all strings. */

#define LETTERS 3

/* The string number so-and-so of n letters; false past the last. */
static int string_of(size_t number, uint8_t *codes, size_t n)
{
	for (size_t i = 0; i < n; i++) {
		codes[i] = (uint8_t)(number % LETTERS);
		number /= LETTERS;
	}
	return number == 0;
}

static struct sequence letters(const uint8_t *codes, size_t n)
{
	struct sequence sequence = grams_sequence(codes, n, 1);

	sequence.alphabet = sequence.code_count = LETTERS;
	return sequence;
}

static void check_equality(size_t n, size_t page_bytes)
{
	const struct cuts none = {0};
	double sum[DIRICHLET_ORDERS] = {0};
	uint8_t codes[16];

	for (size_t i = 0; string_of(i, codes, n); i++) {
		struct sequence sequence = letters(codes, n);
		struct dirichlet_input input = {.sequence = &sequence,
						.cuts = &none,
						.page_bytes = page_bytes,
						.alphabet = {LETTERS, LETTERS}};
		struct dirichlet_sums sums;

		assert_int_equal(dirichlet_code(&input, &sums), STATUS_OK);
		for (unsigned k = 0; k < DIRICHLET_ORDERS; k++)
			sum[k] +=
				exp2(-ldexp((double)sums.total_q32[k][0], -32));
		dirichlet_sums_release(&sums);
	}
	for (unsigned k = 0; k < DIRICHLET_ORDERS; k++)
		assert_near(sum[k], 1, 2e-8);
}

static void test_every_order_is_complete(void **state)
{
	(void)state;
	for (size_t n = 1; n <= 8; n++)
		check_equality(n, 0);
}

static void test_pages_are_complete(void **state)
{
	(void)state;
	check_equality(7, 3);
	check_equality(6, 1);
}

/* With every choice charged a whole row stays within the inequality. */
static void check_row(const char *name, size_t n, size_t page_bytes)
{
	const struct cuts none = {0};
	double sum = 0;
	uint8_t codes[16];

	for (size_t i = 0; string_of(i, codes, n); i++) {
		struct sequence sequence = letters(codes, n);
		struct estimate_input input = {.sequence = &sequence,
					       .cuts = &none,
					       .orders = 1,
					       .page_bytes = page_bytes,
					       .threads = 1};
		struct findings findings;

		assert_int_equal(
			estimator_find(name)->measure(&input, &findings, NULL),
			STATUS_OK);
		sum += exp2(
			-bits_from_q16(findings.series[0].costs.headline_q16));
		findings_release(&findings);
	}
	assert_true(sum <= 1 + 1e-3);
	assert_true(sum > 0.05);
}

static void test_rows_are_decodable(void **state)
{
	(void)state;
	check_row("uniform", 6, 0);
	check_row("dirichlet", 1, 0);
	check_row("dirichlet", 6, 0);
	check_row("dirichlet", 6, 2);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(test_every_order_is_complete),
		cmocka_unit_test(test_pages_are_complete),
		cmocka_unit_test(test_rows_are_decodable),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
