/* Are numbers shown as people expect them, and never infinite ones? */
#include "report/figures.h"

#include "support/near.h"

#include <math.h>

#define shows(figure, wanted) assert_string_equal((figure).text, (wanted))

static void bits_have_four_decimals(void **state)
{
	(void)state;
	shows(figure_bits(true, 2.38449), "2.3845");
	shows(figure_bits(true, 0), "0.0000");
	shows(figure_bits(true, 99.9999), "99.9999");
	shows(figure_bits(true, 99.99996), "100.0");
	shows(figure_bits(true, 480.25), "480.2");
	shows(figure_bits(true, 123456.7), "123457");
	shows(figure_bits(false, 2.385), "-");
	shows(figure_signed(true, -0.01004), "-0.0100");
	shows(figure_signed(true, 0.385), "+0.3850");
	shows(figure_signed(false, 1), "-");
	shows(figure_interval(1.25, 10.5), "[1.2500,10.5000]");
}

static void what_is_not_finite_is_not_shown(void **state)
{
	(void)state;
	shows(figure_bits(true, (double)NAN), "-");
	shows(figure_bits(true, (double)INFINITY), "-");
	shows(figure_signed(true, -(double)INFINITY), "-");
	shows(figure_percent(true, (double)NAN), "-");
	shows(figure_interval(1, (double)INFINITY), "-");
	shows(figure_interval((double)NAN, 1), "-");
	shows(figure_speed((double)INFINITY), "-");
}

static void percent_has_one_decimal(void **state)
{
	(void)state;
	shows(figure_percent(true, 24.85887), "24.9");
	shows(figure_percent(true, 99999.9), "99999.9");
	shows(figure_percent(true, 99999.96), ">99999");
	shows(figure_percent(false, 1), "-");
}

static void counts_are_grouped_by_thousands(void **state)
{
	(void)state;
	shows(figure_count(0), "0");
	shows(figure_count(999), "999");
	shows(figure_count(1000), "1,000");
	shows(figure_count(4194304), "4,194,304");
	shows(figure_count(UINT64_MAX), "18,446,744,073,709,551,615");
}

/* IEC 80000-13 prefixes without their i, as ls -h and df -h print them. */
static void memory_is_in_powers_of_1024(void **state)
{
	(void)state;
	shows(figure_memory(0), "0");
	shows(figure_memory(1023), "1023");
	shows(figure_memory(1024), "1.0K");
	shows(figure_memory(1536), "1.5K");
	shows(figure_memory(268435), "262K");
	shows(figure_memory(1048575), "1.0M");
	shows(figure_memory(UINT64_C(674) << 20), "674M");
	shows(figure_memory(UINT64_MAX - 1), "16E");
	/* CELL_MEMORY_UNKNOWN */
	shows(figure_memory(UINT64_MAX), "-");
}

static void layouts_read_as_in_set_files(void **state)
{
	(void)state;
	shows(figure_layout(0), "whole");
	shows(figure_layout(4096), "4K");
	shows(figure_layout(1000), "1000");
	shows(figure_layout(1 << 20), "1M");
	shows(figure_layout(3 << 19), "1536K");
}

static void speeds_have_three_digits(void **state)
{
	(void)state;
	shows(figure_speed(0), "-");
	shows(figure_speed(0.4449), "0.44");
	shows(figure_speed(9.999), "10.0");
	shows(figure_speed(67.11), "67.1");
	shows(figure_speed(845.4), "845");
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(bits_have_four_decimals),
		cmocka_unit_test(what_is_not_finite_is_not_shown),
		cmocka_unit_test(percent_has_one_decimal),
		cmocka_unit_test(counts_are_grouped_by_thousands),
		cmocka_unit_test(memory_is_in_powers_of_1024),
		cmocka_unit_test(layouts_read_as_in_set_files),
		cmocka_unit_test(speeds_have_three_digits),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
