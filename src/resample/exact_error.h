/* Standard errors of a mean that block bootstraps would reach with endless
 * draws: closed forms, no random numbers. */
#ifndef RESAMPLE_EXACT_ERROR_H
#define RESAMPLE_EXACT_ERROR_H

#include <stddef.h>

/*
 * values are borrowed; count >= 1, 1 <= length <= count. Where the length does
 * not divide the count, count / length blocks are meant as a real number.
 */
/* Moving blocks (Kunsch 1989), about the bootstrap's own mean. */
double error_moving(const double *values, size_t count, size_t length);
/* Blocks on a circle (Politis and Romano 1992). */
double error_circular(const double *values, size_t count, size_t length);
/* Geometric lengths of that mean (Politis and Romano 1994, lemma 1). */
double error_stationary(const double *values, size_t count, double length);

#endif
