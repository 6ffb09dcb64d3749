/* Quantiles of the normal and of Student's distribution. */
#ifndef RESAMPLE_NORMAL_H
#define RESAMPLE_NORMAL_H

/* 0 < p < 1; relative error below 1e-12. */
double normal_quantile(double p);
/*
 * Student's t with freedom >= 7 degrees (need not be whole), 0 < p < 1:
 * Abramowitz and Stegun 26.7.5, error below .001 for .005 <= p <= .995.
 */
double student_quantile(double p, double freedom);

#endif
