/* Do the lengths of all short strings together make exactly one code? */
#include "support/coded.h"

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

/* With all choices paid for, no row that calls itself a code may exceed 1. */
static void the_row_dirichlet(void **state)
{
	(void)state;
	for (size_t i = 0; i < SIZES; i++) {
		uint8_t codes[16] = {0};
		double sum = 0;

		do {
			struct sequence sequence = coded_sequence(
				codes, strings[i].n, strings[i].alphabet);
			struct findings findings = coded_findings(
				(struct coded_run){.row = "dirichlet"},
				&sequence);

			sum += exp2(-bits_from_q16(
				findings.series[0].costs.headline_q16));
			findings_release(&findings);
		} while (next_string(codes, strings[i].n, strings[i].alphabet));
		assert_true(sum <= 1);
		/* One of twelve ways alone, rounded up to 2^-16. */
		assert_true(sum > 1. / 12 - 1e-5);
	}
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(dirichlet_at_each_order),
		cmocka_unit_test(the_row_dirichlet),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
