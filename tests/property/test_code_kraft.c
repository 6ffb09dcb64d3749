/* Do the lengths of all short strings together make exactly one code? */
#include "support/coded.h"

#include "estimate/ctw_model.h"
#include "support/near.h"

#include <math.h>

/* The next string of n letters below alphabet; false after the last. */
static bool next_string(uint8_t *codes, size_t n, unsigned alphabet)
{
	for (size_t i = 0; i < n; i++) {
		if (++codes[i] < alphabet)
			return true;
		codes[i] = 0;
	}
	return false;
}

static const struct {
	size_t n;
	unsigned alphabet;
} strings[] = {{1, 2}, {5, 2}, {11, 2}, {6, 3}, {5, 4}, {3, 16}};

#define SIZES (sizeof(strings) / sizeof(*strings))

static double ctw_bits(const uint8_t *codes, size_t n, unsigned alphabet,
		       unsigned depth)
{
	struct ctw_model model;
	double bits;

	assert_int_equal(ctw_model_init(&model, alphabet, depth, 0), STATUS_OK);
	bits = (double)ctw_model_measure_q32(&model, codes, 0, 0, n) * 0x1p-32;
	ctw_model_release(&model);
	return bits;
}

/* Kraft 1949: a code that wastes nothing has the sum 1. */
static void dirichlet_at_each_order(void **state)
{
	(void)state;
	for (size_t i = 0; i < SIZES; i++) {
		size_t n = strings[i].n;

		for (unsigned k = 0; k < DIRICHLET_ORDERS; k++) {
			for (size_t page = 0; page < 4; page += 3) {
				uint8_t codes[16] = {0};
				double sum = 0;

				do {
					struct sequence sequence =
						coded_sequence(
							codes, n,
							strings[i].alphabet);

					sum += exp2(-coded_dirichlet(
						&sequence, page, k,
						ALPHABET_OF_KIND));
				} while (next_string(codes, n,
						     strings[i].alphabet));
				assert_near(sum, 1, 1e-7);
			}
		}
	}
}

/* The same of weighted context trees: each decision's halves add up to 1. */
static void context_trees(void **state)
{
	(void)state;
	for (size_t i = 0; i < SIZES; i++) {
		for (unsigned depth = 0; depth < 8; depth += 3) {
			uint8_t codes[16] = {0};
			double sum = 0;

			do {
				sum += exp2(-ctw_bits(codes, strings[i].n,
						      strings[i].alphabet,
						      depth));
			} while (next_string(codes, strings[i].n,
					     strings[i].alphabet));
			assert_near(sum, 1, 1e-7);
		}
	}
}

/* Sum of the row over all strings of one size. */
static double row_sum(const char *row, size_t n, unsigned alphabet)
{
	uint8_t codes[16] = {0};
	double sum = 0;

	do {
		struct sequence sequence = coded_sequence(codes, n, alphabet);
		struct findings findings = coded_findings(
			(struct coded_run){.row = row}, &sequence);

		sum += exp2(
			-bits_from_q16(findings.series[0].costs.headline_q16));
		findings_release(&findings);
	} while (next_string(codes, n, alphabet));
	return sum;
}

/* With all choices paid for, no row that calls itself a code may exceed 1. */
static void whole_rows(void **state)
{
	(void)state;
	for (size_t i = 0; i < SIZES; i++) {
		size_t n = strings[i].n;
		double sum = row_sum("dirichlet", n, strings[i].alphabet);

		/* One of twelve ways alone, rounded up to 2^-16. */
		assert_true(sum > 1. / 12 - 1e-5 && sum <= 1);
		/* Half goes to the way without a small alphabet. */
		assert_true(row_sum("ctw", n, strings[i].alphabet) <= .5);
	}
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(dirichlet_at_each_order),
		cmocka_unit_test(context_trees),
		cmocka_unit_test(whole_rows),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
