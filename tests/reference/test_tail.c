/* Are tail probabilities those of published tables and closed forms? */
#include "resample/tail.h"

#include "support/near.h"

#include <math.h>

static void normal_table(void **state)
{
	(void)state;
	/* Abramowitz and Stegun, table 26.1. */
	assert_near(normal_upper(0), 0.5, 1e-15);
	assert_near(normal_upper(1.5), 0.0668072012688581, 1e-15);
	assert_near(normal_upper(-1.5), 1 - 0.0668072012688581, 1e-15);
	assert_near(normal_upper(3), 0.00134989803163009, 1e-16);
}

/* One and two degrees have closed forms (Student 1908). */
static void closed_forms(void **state)
{
	const double points[] = {-7.5, -0.6, 0, 0.385, 1.7, 6.25, 48};
	double pi = acos(-1.0);

	(void)state;
	for (size_t i = 0; i < sizeof(points) / sizeof(points[0]); i++) {
		double t = points[i];

		assert_near(student_upper(t, 1), 0.5 - atan(t) / pi, 1e-13);
		assert_near(student_upper(t, 2),
			    0.5 - t / (2 * sqrt(2 + t * t)), 1e-13);
	}
}

/* Percentage points of Abramowitz and Stegun, table 26.10: two-sided 1 - A. */
static void student_table(void **state)
{
	static const struct {
		double freedom, t, upper;
	} rows[] = {
		{5, 2.571, 0.025},    {10, 3.169, 0.005},  {10, 4.587, 0.0005},
		{20, 2.845, 0.005},   {30, 3.646, 0.0005}, {60, 2.660, 0.005},
		{120, 3.373, 0.0005},
	};

	(void)state;
	for (size_t i = 0; i < sizeof(rows) / sizeof(rows[0]); i++)
		/* The table has three decimals of t. */
		assert_near(student_upper(rows[i].t, rows[i].freedom),
			    rows[i].upper, 0.003 * rows[i].upper);
}

/* Many degrees are the normal (the limit). */
static void many_degrees(void **state)
{
	(void)state;
	for (double z = 0.25; z < 6; z += 0.25)
		assert_near(student_upper(z, 1e9) / normal_upper(z), 1, 1e-5);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(normal_table),
		cmocka_unit_test(closed_forms),
		cmocka_unit_test(student_table),
		cmocka_unit_test(many_degrees),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
