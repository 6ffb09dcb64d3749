/* Learning curves: what a code's bits per symbol tend to. */
#ifndef GAP_CURVE_FIT_H
#define GAP_CURVE_FIT_H

#include <stddef.h>

/* Published forms of bits per symbol y after n symbols; 0 < b < 1. */
enum curve_form {
	CURVE_HILBERG,   /* y = h + A n^(b-1); after Hilberg 1990 */
	CURVE_LOGARITHM, /* y = h + A n^(b-1) ln n; Schurmann, Grassberger
			    1996 */
	CURVE_STRETCHED, /* ln y = ln h + A n^(b-1); Takahira, Tanaka-Ishii,
			    Debowski 2016 */
	CURVE_FORMS
};

struct curve {
	enum curve_form form;
	double h, a, b; /* h >= 0 */
};

/*
 * Least squares (of ln y for the stretched form) over b from .001 to .999, in
 * closed form for h and A. count >= 4 points, n and y above 0, borrowed.
 */
struct curve curve_fit(enum curve_form form, const double *n, const double *y,
		       size_t count);
/* y at n. */
double curve_at(const struct curve *curve, double n);

#endif
