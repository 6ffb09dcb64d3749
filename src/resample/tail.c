#include "resample/tail.h"

#include <math.h>

/* It converges in O(sqrt(max(a, b))) steps; 1e5 degrees take a few hundred. */
#define STEPS_MOST 5000
/* Keeps the recurrence off zero without touching any digit. */
#define TINY 1e-290

double normal_upper(double z)
{
	return 0.5 * erfc(z / sqrt(2.0));
}

static double off_zero(double value)
{
	return fabs(value) < TINY ? TINY : value;
}

/* The continued fraction, from the front (Lentz 1976). */
static double fraction(double x, double a, double b)
{
	double c = 1, d = 1 / off_zero(1 - (a + b) * x / (a + 1));
	double value = d;

	for (unsigned step = 1; step <= STEPS_MOST; step++) {
		double m = step, change;
		double even = m * (b - m) * x / ((a + 2 * m - 1) * (a + 2 * m));
		double odd = -(a + m) * (a + b + m) * x /
			     ((a + 2 * m) * (a + 2 * m + 1));

		d = 1 / off_zero(1 + even * d);
		c = off_zero(1 + even / c);
		value *= d * c;
		d = 1 / off_zero(1 + odd * d);
		c = off_zero(1 + odd / c);
		change = d * c;
		value *= change;
		if (fabs(change - 1) < 1e-15)
			break;
	}
	return value;
}

static double log_beta(double a, double b)
{
	return lgamma(a) + lgamma(b) - lgamma(a + b);
}

/* Regularised incomplete beta; y is 1 - x, told apart to keep its digits. */
static double beta_share(double x, double y, double a, double b)
{
	double front;

	if (!(x > 0))
		return 0;
	if (!(y > 0))
		return 1;
	front = exp(a * log(x) + b * log(y) - log_beta(a, b));
	if (x < (a + 1) / (a + b + 2))
		return front * fraction(x, a, b) / a;
	return 1 - front * fraction(y, b, a) / b;
}

double student_upper(double t, double freedom)
{
	double square = t * t, all = freedom + square;
	double half =
		0.5 * beta_share(freedom / all, square / all, freedom / 2, 0.5);

	return t > 0 ? half : 1 - half;
}
