/* Are folds and probabilities of the cross-fit exact? */
#include "estimate/crossfit_folds.h"
#include "estimate/crossfit_share.h"

#include "base/memory.h"
#include "base/random.h"
#include "support/near.h"

#include <math.h>

/* Whether k symbols from start on lie in one fold. */
static int in_fold(size_t start, unsigned k, size_t n)
{
	return start + k <= n && start * 8 / n == (start + k - 1) * 8 / n;
}

static void test_folds(void **state)
{
	static const size_t lengths[] = {1,     2,      7,      8,    9,
					 1001,  4095,   4096,   4097, 32769,
					 99999, 131072, 1000003};
	struct folds folds;

	(void)state;
	for (size_t i = 0; i < sizeof(lengths) / sizeof(lengths[0]); i++) {
		size_t n = lengths[i];

		folds_init(&folds, n);
		assert_int_equal(folds.edge[0], 0);
		assert_int_equal(folds.edge[FOLDS], n);
		for (size_t t = 0; t < n; t++)
			assert_int_equal(folds_find(&folds, t, 1), t * 8 / n);
		for (size_t t = 0; t < n; t++)
			assert_int_equal(folds_find(&folds, t, 5) != FOLD_NONE,
					 in_fold(t, 5, n));
	}
}

static double real_of(uint64_t share)
{
	return ldexp((double)(share & SHARE_MASK),
		     -(int)(SHARE_BITS - 1 + (share >> SHARE_BITS)));
}

/* Against the same in real numbers. */
static void test_share_mixing(void **state)
{
	struct random_stream random;

	(void)state;
	random_init(&random, 31, 0);
	assert_near(real_of(share_of_one_in(1)), 1, 1e-15);
	assert_near(real_of(share_of_one_in(UINT64_C(1) << 32)) * 4294967296.0,
		    1, 1e-15);
	for (unsigned i = 0; i < 200000; i++) {
		uint64_t share = share_of_one_in(
			1 + random_u64(&random) % (UINT64_C(1) << 32));
		double real = real_of(share);

		for (unsigned k = 0; k < 12; k++) {
			uint32_t bits = random_below(&random, 30);
			uint32_t weight = 1 + random_below(&random, 1U << bits);
			uint32_t all = weight + random_below(&random, 1U << 30);
			uint32_t count =
				random_below(&random, 4)
					? 0
					: random_below(&random, all + 1);

			share = share_mix(
				share, count, weight,
				reciprocal_of((uint64_t)all + weight));
			real = (count + weight * real) / ((double)all + weight);
			assert_near(real_of(share) / real, 1, 1e-14);
		}
	}
}

/* -log2 of shares, by libm. */
static void test_share_loss(void **state)
{
	struct quick_log *log;

	(void)state;
	assert_int_equal(quick_log_new(&log), STATUS_OK);
	assert_true(share_loss_q32(log, share_of_one_in(1)) == 0);
	for (uint64_t d = 2; d < UINT64_C(1) << 32; d = d * 3 / 2)
		assert_near((double)share_loss_q32(log, share_of_one_in(d)),
			    ldexp(log2((double)d), 32), 0.6);
	memory_free(log);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(test_folds),
		cmocka_unit_test(test_share_mixing),
		cmocka_unit_test(test_share_loss),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
