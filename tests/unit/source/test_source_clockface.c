/* Are the times of day those of the calendar? */
#include "source/clockface.h"

#include "support/near.h"

#include <string.h>
#include <time.h>

/* 2000-01-01T00:00:00Z in seconds since 1970 (POSIX). */
#define EPOCH_2000 946684800

static void agrees_with_the_c_library(void **state)
{
	(void)state;
	for (uint64_t s = 0; s < UINT64_C(250000000000); s += 86399 * 257 + 1) {
		time_t when = (time_t)(s + EPOCH_2000);
		char text[CLOCKFACE_BYTES + 1] = {0}, wanted[32];
		struct tm tm;

		assert_non_null(gmtime_r(&when, &tm));
		strftime(wanted, sizeof(wanted), "%Y-%m-%dT%H:%M:%SZ", &tm);
		clockface_write(s, text);
		assert_string_equal(text, wanted);
	}
}

static void digits_are_padded_and_cut(void **state)
{
	char text[5] = {0};

	(void)state;
	digits_write(42, 4, text);
	assert_string_equal(text, "0042");
	digits_write(1234567, 4, text);
	assert_string_equal(text, "4567");
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(agrees_with_the_c_library),
		cmocka_unit_test(digits_are_padded_and_cut),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
