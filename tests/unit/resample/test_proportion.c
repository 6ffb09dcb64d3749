/* Are Wilson intervals those of the published table? */
#include "resample/proportion.h"

#include "support/near.h"

/* Newcombe 1998 (Statistics in Medicine 17, 857), table I, method 3; from
 * memory of it. */
static void published_intervals(void **state)
{
	static const struct {
		size_t hits, trials;
		double low, high;
	} rows[] = {
		{81, 263, .2553, .3662},
		{15, 148, .0624, .1605},
		{0, 20, .0000, .1611},
		{1, 29, .0061, .1718},
	};

	(void)state;
	for (size_t i = 0; i < sizeof(rows) / sizeof(rows[0]); i++) {
		struct proportion share =
			proportion_of(rows[i].hits, rows[i].trials, .95);

		assert_near(share.low, rows[i].low, 5e-5);
		assert_near(share.high, rows[i].high, 5e-5);
		assert_near(share.value,
			    (double)rows[i].hits / (double)rows[i].trials,
			    1e-15);
	}
}

static void nothing_is_known_without_trials(void **state)
{
	struct proportion share = proportion_of(0, 0, .99);

	(void)state;
	assert_near(share.low, 0, 0);
	assert_near(share.high, 1, 0);
	share = proportion_of(7, 7, .99);
	assert_near(share.high, 1, 1e-12);
	assert_true(share.low > .4 && share.low < .6);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(published_intervals),
		cmocka_unit_test(nothing_is_known_without_trials),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
