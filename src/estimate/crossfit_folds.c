#include "estimate/crossfit_folds.h"

void folds_init(struct folds *folds, size_t n)
{
	for (size_t f = 0; f <= FOLDS; f++)
		folds->edge[f] =
			(size_t)(((uint64_t)f * n + FOLDS - 1) / FOLDS);
	folds->shift = 0;
	while ((n - 1) >> folds->shift >= FOLD_BUCKETS)
		folds->shift++;
	for (size_t i = 0; i << folds->shift < n && i < FOLD_BUCKETS; i++)
		folds->guess[i] =
			(uint8_t)(((uint64_t)(i << folds->shift) * FOLDS) / n);
}
