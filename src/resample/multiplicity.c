#include "resample/multiplicity.h"

#include "base/memory.h"

#include <math.h>
#include <stdlib.h>

struct ranked {
	double p;
	size_t place;
};

static int by_p(const void *left, const void *right)
{
	const struct ranked *a = left, *b = right;

	if (a->p != b->p)
		return a->p < b->p ? -1 : 1;
	return (a->place > b->place) - (a->place < b->place);
}

static enum status rank(const double *p, size_t count, struct ranked **ranked)
{
	TRY(memory_new(count, sizeof(**ranked), ranked));
	for (size_t i = 0; i < count; i++)
		(*ranked)[i] = (struct ranked){p[i], i};
	qsort(*ranked, count, sizeof(**ranked), by_p);
	return STATUS_OK;
}

enum status adjust_holm(const double *p, size_t count, double *adjusted)
{
	struct ranked *ranked;
	double most = 0;

	TRY(rank(p, count, &ranked));
	for (size_t i = 0; i < count; i++) {
		most = fmax(most, (double)(count - i) * ranked[i].p);
		adjusted[ranked[i].place] = fmin(1, most);
	}
	memory_free(ranked);
	return STATUS_OK;
}

static enum status step_up(const double *p, size_t count, double factor,
			   double *adjusted)
{
	struct ranked *ranked;
	double least = 1;

	TRY(rank(p, count, &ranked));
	for (size_t i = count; i-- > 0;) {
		least = fmin(least, factor * (double)count / (double)(i + 1) *
					    ranked[i].p);
		adjusted[ranked[i].place] = least;
	}
	memory_free(ranked);
	return STATUS_OK;
}

enum status adjust_hochberg(const double *p, size_t count, double *adjusted)
{
	return step_up(p, count, 1, adjusted);
}

enum status adjust_yekutieli(const double *p, size_t count, double *adjusted)
{
	double harmonic = 0;

	for (size_t i = 1; i <= count; i++)
		harmonic += 1 / (double)i;
	return step_up(p, count, harmonic, adjusted);
}
