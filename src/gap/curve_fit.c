#include "gap/curve_fit.h"

#include <math.h>

#define B_LEAST 0.001
#define B_MOST 0.999
#define GRID 100  /* steps over b; the sum of squares has few dips */
#define GOLDEN 48 /* shrinks a step by 1e-10 */

/* Points to fit, with the value that is linear in h and A. */
struct points {
	enum curve_form form;
	const double *n, *y;
	size_t count;
};

static double regressor(enum curve_form form, double b, double n)
{
	double power = exp((b - 1) * log(n));

	return form == CURVE_LOGARITHM ? power * log(n) : power;
}

static double target(const struct points *points, size_t i)
{
	return points->form == CURVE_STRETCHED ? log(points->y[i])
					       : points->y[i];
}

/* Straight line through target against the regressor, at one b. */
static double fit_line(const struct points *points, double b, double *level,
		       double *slope)
{
	double n = (double)points->count, x_mean = 0, y_mean = 0;
	double xx = 0, xy = 0, squares = 0;

	for (size_t i = 0; i < points->count; i++) {
		x_mean += regressor(points->form, b, points->n[i]) / n;
		y_mean += target(points, i) / n;
	}
	for (size_t i = 0; i < points->count; i++) {
		double x = regressor(points->form, b, points->n[i]) - x_mean;

		xx += x * x;
		xy += x * (target(points, i) - y_mean);
	}
	*slope = xx > 0 ? xy / xx : 0;
	*level = y_mean - *slope * x_mean;
	/* A rate below 0 is none: through the origin then. */
	if (points->form != CURVE_STRETCHED && *level < 0) {
		*slope =
			(xy + n * x_mean * y_mean) / (xx + n * x_mean * x_mean);
		*level = 0;
	}
	for (size_t i = 0; i < points->count; i++) {
		double miss = target(points, i) - *level -
			      *slope * regressor(points->form, b, points->n[i]);

		squares += miss * miss;
	}
	return squares;
}

static double squares_at(const struct points *points, double b)
{
	double level, slope;

	return fit_line(points, b, &level, &slope);
}

static double coarse_minimum(const struct points *points, double step)
{
	double best = B_LEAST, least = squares_at(points, best);

	for (unsigned i = 1; i <= GRID; i++) {
		double b = B_LEAST + step * i, squares = squares_at(points, b);

		if (squares < least) {
			least = squares;
			best = b;
		}
	}
	return best;
}

static double fine_minimum(const struct points *points, double low, double high)
{
	const double ratio = 0.6180339887498949; /* 1 / golden mean */

	for (unsigned i = 0; i < GOLDEN; i++) {
		double left = high - ratio * (high - low);
		double right = low + ratio * (high - low);

		if (squares_at(points, left) < squares_at(points, right))
			high = right;
		else
			low = left;
	}
	return (low + high) / 2;
}

struct curve curve_fit(enum curve_form form, const double *n, const double *y,
		       size_t count)
{
	const struct points points = {form, n, y, count};
	double step = (B_MOST - B_LEAST) / GRID;
	double b = coarse_minimum(&points, step);
	struct curve curve = {.form = form};

	curve.b = fine_minimum(&points, fmax(B_LEAST, b - step),
			       fmin(B_MOST, b + step));
	(void)fit_line(&points, curve.b, &curve.h, &curve.a);
	if (form == CURVE_STRETCHED)
		curve.h = exp(curve.h);
	return curve;
}

double curve_at(const struct curve *curve, double n)
{
	double x = curve->a * regressor(curve->form, curve->b, n);

	return curve->form == CURVE_STRETCHED ? curve->h * exp(x)
					      : curve->h + x;
}
