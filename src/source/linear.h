/* Systems of linear equations. */
#ifndef SOURCE_LINEAR_H
#define SOURCE_LINEAR_H

#include "base/status.h"

#include <stddef.h>

/*
 * Solves A x = b by Gaussian elimination with row pivots; matrix is n x n by
 * rows and is destroyed, b becomes x. STATUS_BAD_INPUT: singular.
 */
MUST_USE enum status linear_solve(double *matrix, double *b, size_t n);

#endif
