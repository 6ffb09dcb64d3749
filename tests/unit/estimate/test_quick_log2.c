/* Is the quick logarithm as close as its header says? */
#include "estimate/quick_log2.h"

#include "base/memory.h"
#include "base/random.h"
#include "support/near.h"

#include <math.h>

static struct quick_log2 *logs;

static void check(uint64_t x)
{
	double got = (double)quick_log2_q48(logs, x) * 0x1p-48;

	/* log2 of the C library: correct to a unit in the last place. */
	assert_near(got, log2((double)x), 0x1p-45 + 0x1p-46);
}

/* Exact: every power of two. */
static void powers_of_two(void **state)
{
	(void)state;
	for (unsigned i = 0; i < 64; i++)
		assert_int_equal(quick_log2_q32(logs, UINT64_C(1) << i),
				 (uint64_t)i << 32);
}

static void all_small_numbers(void **state)
{
	(void)state;
	for (uint64_t x = 1; x < 300000; x++)
		check(x);
}

/* 53 bits at most, so that the number is exact as a double. */
static void numbers_of_every_size(void **state)
{
	struct random_stream random;

	(void)state;
	random_init(&random, 1, 1);
	for (unsigned i = 0; i < 200000; i++)
		check((random_u64(&random) >> (11 + i % 53)) | 1);
}

/* Against the slow logarithm, whose own test checks it by 60 digits. */
static void numbers_of_64_bits(void **state)
{
	struct random_stream random;

	(void)state;
	random_init(&random, 2, 2);
	for (unsigned i = 0; i < 50000; i++) {
		uint64_t x = ~(random_u64(&random) >> (i % 64));
		int64_t off =
			(int64_t)quick_log2_q32(logs, x) - (int64_t)log2_q32(x);

		assert_true(off >= -1 && off <= 1);
	}
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(powers_of_two),
		cmocka_unit_test(all_small_numbers),
		cmocka_unit_test(numbers_of_every_size),
		cmocka_unit_test(numbers_of_64_bits),
	};
	int failed;

	if (quick_log2_new(&logs) != STATUS_OK)
		return 1;
	failed = cmocka_run_group_tests(tests, NULL, NULL);
	memory_free(logs);
	return failed;
}
