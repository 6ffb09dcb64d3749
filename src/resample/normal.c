#include "resample/normal.h"

#include <math.h>

/* Lower half: Abramowitz and Stegun 26.2.23, within 4.5e-4, then polished. */
static double lower_quantile(double p)
{
	double t = sqrt(-2 * log(p));
	double x =
		-(t -
		  (2.515517 + t * (0.802853 + t * 0.010328)) /
			  (1 + t * (1.432788 + t * (0.189269 + t * 0.001308))));

	/* Halley's rule, cubic: three steps pass the last digit. */
	for (unsigned i = 0; i < 3; i++) {
		double density = exp(-0.5 * x * x) / sqrt(2 * acos(-1.0));
		double step = (0.5 * erfc(-x / sqrt(2.0)) - p) / density;

		x -= step / (1 + 0.5 * x * step);
	}
	return x;
}

double normal_quantile(double p)
{
	if (p == 0.5)
		return 0;
	return p < 0.5 ? lower_quantile(p) : -lower_quantile(1 - p);
}

double student_quantile(double p, double freedom)
{
	double z = normal_quantile(p), s = z * z, v = freedom;
	double g1 = (s + 1) * z / 4;
	double g2 = ((5 * s + 16) * s + 3) * z / 96;
	double g3 = (((3 * s + 19) * s + 17) * s - 15) * z / 384;
	double g4 = ((((79 * s + 776) * s + 1482) * s - 1920) * s - 945) * z /
		    92160;

	return z + (g1 + (g2 + (g3 + g4 / v) / v) / v) / v;
}
