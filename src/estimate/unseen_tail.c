#include "estimate/corrections.h"

#include "base/sum.h"

#include <float.h>
#include <math.h>

/* From here the geometric series ends soon enough: .95^750 < 2^-53. */
#define DIRECT_FROM 0.05
/* Terms added one by one before the sum is replaced by an integral. */
#define FIRST_TERMS 64

/* e^x E1(x), x > 0: Abramowitz and Stegun 5.1.11 below 1, 5.1.22 above. */
static double scaled_exponential_integral(double x)
{
	const double gamma = 0.57721566490153286;
	double power = 1, sum = 0, fraction = 0;

	if (x < 1) {
		for (int k = 1; k < 25; k++) {
			power *= -x / k;
			sum -= power / k;
		}
		return exp(x) * (sum - gamma - log(x));
	}
	/* 1/(x + 1 - 1/(x + 3 - 4/(x + 5 - …))), from the far end. */
	for (int k = 120; k >= 1; k--)
		fraction = (double)k * k / (x + 2 * k + 1 - fraction);
	return 1 / (x + 1 - fraction);
}

static double direct(double first, double q)
{
	struct sum sum = {0};
	double power = q;

	for (double r = first; power > DBL_EPSILON * q; r++) {
		sum_add(&sum, power / r);
		power *= q;
	}
	return sum_value(&sum);
}

/*
 * sum over j >= 0 of f(j), f(x) = e^(-decay (x + 1)) / (r + x): Euler and
 * Maclaurin, integral + f/2 - f'/12 + f'''/720, where
 * (-1)^m f^(m) = D_m = decay^m f + m D_{m-1} / r.
 */
static double by_integral(double r, double decay)
{
	double value = exp(-decay) / r, power = value, derivative[4] = {value};

	for (int m = 1; m < 4; m++) {
		power *= decay;
		derivative[m] = power + m * derivative[m - 1] / r;
	}
	return exp(-decay) * scaled_exponential_integral(decay * r) +
	       value / 2 + derivative[1] / 12 - derivative[3] / 720;
}

double unseen_tail(double positions, double a)
{
	struct sum sum = {0};
	double power = 1, decay;

	if (a >= 1)
		return 0;
	if (a > DIRECT_FROM)
		return direct(positions, 1 - a);
	decay = -log1p(-a);
	for (int j = 0; j < FIRST_TERMS; j++) {
		power = exp(-decay * (j + 1));
		sum_add(&sum, power / (positions + j));
	}
	sum_add(&sum, power * by_integral(positions + FIRST_TERMS, decay));
	return sum_value(&sum);
}
