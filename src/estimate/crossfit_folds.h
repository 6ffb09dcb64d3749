/* Eight contiguous folds, and which fold holds a gram. */
#ifndef ESTIMATE_CROSSFIT_FOLDS_H
#define ESTIMATE_CROSSFIT_FOLDS_H

#include <stddef.h>
#include <stdint.h>

#define FOLDS 8
#define FOLD_NONE FOLDS /* of a gram that crosses an edge */

#define FOLD_BUCKETS 4096

/* The fold of symbol t of n is floor(8 t / n). */
struct folds {
	size_t edge[FOLDS +
		    1]; /* fold f is the symbols edge[f] … edge[f+1]-1 */
	unsigned shift;
	uint8_t guess[FOLD_BUCKETS]; /* the fold at symbol i << shift */
};

/* n >= 1. */
void folds_init(struct folds *folds, size_t n);

/* The fold that holds k >= 1 symbols from start on, or FOLD_NONE. */
static inline unsigned folds_find(const struct folds *folds, size_t start,
				  size_t k)
{
	unsigned fold = folds->guess[start >> folds->shift];

	/* a bucket is shorter than a fold: one step is all it takes */
	fold += start >= folds->edge[fold + 1];
	return start + k <= folds->edge[fold + 1] ? fold : FOLD_NONE;
}

#endif
