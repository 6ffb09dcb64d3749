/* Are the integer logarithms right to their stated error? */
#include "base/log2.h"

#include "support/near.h"

#include <math.h>

static void powers_of_two_are_exact(void **state)
{
	(void)state;
	for (unsigned e = 0; e < 64; e++) {
		assert_int_equal(log2_q32(UINT64_C(1) << e),
				 (int64_t)e * BIT_Q32);
	}
}

static void agrees_with_libm(void **state)
{
	uint64_t x = 1;

	(void)state;
	for (unsigned i = 0; i < 200000; i++) {
		double wanted = log2((double)x) * 0x1p32;

		/* Half a unit, and the error of libm at up to 2^6. */
		assert_near((double)log2_q32(x), wanted, 0.51 + 1e-4);
		x += 1 + x / 1000;
		if (x > UINT64_C(1) << 52)
			x = x % 1000003 + 1;
	}
}

static void agrees_with_decimal_expansions(void **state)
{
	(void)state;
	/* log2 3 and 10: OEIS A020857, A020862; log2 26: Shannon 1951,
	 * F_0 = 4.70 (all from memory; more digits by arithmetic). */
	assert_near((double)log2_q56(3) * 0x1p-56, 1.5849625007211561814,
		    1e-15);
	assert_near((double)log2_q56(10) * 0x1p-56, 3.3219280948873623478,
		    1e-15);
	assert_near((double)log2_q32(26) * 0x1p-32, 4.70043971814, 1e-9);
}

static void never_falls(void **state)
{
	(void)state;
	for (uint64_t x = 1; x < 300000; x++)
		assert_true(log2_q32(x) < log2_q32(x + 1));
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(powers_of_two_are_exact),
		cmocka_unit_test(agrees_with_libm),
		cmocka_unit_test(agrees_with_decimal_expansions),
		cmocka_unit_test(never_falls),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
