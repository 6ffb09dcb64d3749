/* Many tests at once: which p-values still count. */
#ifndef RESAMPLE_MULTIPLICITY_H
#define RESAMPLE_MULTIPLICITY_H

#include "base/status.h"

#include <stddef.h>

/*
 * Each writes adjusted p-values, in the order of p (0 to 1, borrowed): a test
 * is rejected at level a where its adjusted value is <= a. STATUS_NO_MEMORY.
 */
/* Family-wise error, any dependence: Holm 1979. */
MUST_USE enum status adjust_holm(const double *p, size_t count,
				 double *adjusted);
/* False discovery rate, independent or positively dependent: Benjamini and
 * Hochberg 1995. */
MUST_USE enum status adjust_hochberg(const double *p, size_t count,
				     double *adjusted);
/* False discovery rate, any dependence: Benjamini and Yekutieli 2001. */
MUST_USE enum status adjust_yekutieli(const double *p, size_t count,
				      double *adjusted);

#endif
