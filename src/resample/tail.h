/* Upper tails of the normal and of Student's distribution. */
#ifndef RESAMPLE_TAIL_H
#define RESAMPLE_TAIL_H

/* P(Z > z); relative error that of erfc. */
double normal_upper(double z);
/*
 * P(T > t) for freedom > 0 degrees, need not be whole: half the regularised
 * incomplete beta function at freedom / (freedom + t^2), by its continued
 * fraction (Abramowitz and Stegun 26.5.8 and 26.7.1). Relative error below
 * 1e-10 for freedom up to 1e5.
 */
double student_upper(double t, double freedom);

#endif
