#include "estimate/crossfit_level.h"

#include "estimate/crossfit_share.h"

/* Suffixes that memory is asked for ahead of their turn. */
#define AHEAD 64

struct level {
	const struct suffix *suffix;
	const struct folds *folds;
	unsigned k;
	uint64_t *shares;
};

/* Grams by fold; those that cross an edge are counted and never looked at. */
struct fold_counts {
	uint32_t in[FOLDS + 1];
	uint32_t total; /* without those */
};

/* What is known of a context: all suffixes that begin with it. */
struct context {
	struct fold_counts seen;
	uint32_t successors;
	uint32_t alone[FOLDS + 1]; /* successors that no other fold has */
	struct reciprocal divisor[FOLDS]; /* inverse 0: not made yet */
};

static inline unsigned fold_at(const struct level *level, size_t rank)
{
	return folds_find(level->folds, (size_t)level->suffix->start[rank],
			  level->k);
}

/* The first suffix from begin + 1 to end that shares fewer symbols. */
static inline size_t run_end(const struct level *level, size_t begin,
			     size_t end, unsigned symbols)
{
	const uint8_t *common = level->suffix->common;
	size_t r = begin + 1;

	while (r < end && common[r] >= symbols)
		r++;
	return r;
}

static inline struct fold_counts count_folds(const struct level *level,
					     size_t begin, size_t end)
{
	struct fold_counts counts = {0};

	for (size_t r = begin; r < end; r++)
		counts.in[fold_at(level, r)]++;
	counts.total = (uint32_t)(end - begin) - counts.in[FOLD_NONE];
	return counts;
}

static void add_successor(struct context *context,
			  const struct fold_counts *counts)
{
	if (!counts->total)
		return;
	context->successors++;
	context->seen.total += counts->total;
	for (unsigned f = 0; f < FOLDS; f++) {
		context->seen.in[f] += counts->in[f];
		context->alone[f] += counts->in[f] == counts->total;
	}
}

static struct context learn(const struct level *level, size_t begin, size_t end)
{
	struct context context = {0};
	size_t next;

	for (size_t r = begin; r < end; r = next) {
		next = run_end(level, r, end, level->k);
		if (next == r + 1) {
			unsigned fold = fold_at(level, r);

			context.seen.in[fold]++;
			context.alone[fold]++;
			context.seen.total += fold != FOLD_NONE;
			context.successors += fold != FOLD_NONE;
		} else {
			struct fold_counts counts = count_folds(level, r, next);

			add_successor(&context, &counts);
		}
	}
	return context;
}

static inline void update(const struct level *level, struct context *context,
			  size_t rank, const struct fold_counts *gram)
{
	unsigned fold = fold_at(level, rank);
	uint32_t others, weight;
	uint64_t *share;

	if (fold == FOLD_NONE)
		return;
	others = context->seen.total - context->seen.in[fold];
	if (!others)
		return;
	weight = context->successors - context->alone[fold];
	if (!context->divisor[fold].inverse)
		context->divisor[fold] =
			reciprocal_of((uint64_t)others + weight);
	share = &level->shares[(size_t)level->suffix->start[rank] + level->k -
			       1];
	*share = share_mix(*share, gram->total - gram->in[fold], weight,
			   context->divisor[fold]);
}

/*
 * The shares lie all over the memory: the one to be asked for when it is the
 * turn of suffix rank. The prefetch stands in the callers, as gcc drops calls
 * of functions that do nothing else.
 */
static inline const uint64_t *share_ahead(const struct level *level,
					  size_t rank)
{
	size_t n = level->suffix->n, t;

	t = (size_t)level->suffix
		    ->start[rank + AHEAD < n ? rank + AHEAD : rank] +
	    level->k - 1;
	return &level->shares[t < n ? t : 0];
}

static void apply(const struct level *level, struct context *context,
		  size_t begin, size_t end)
{
	size_t next;

	for (size_t r = begin; r < end; r = next) {
		struct fold_counts gram;

		next = run_end(level, r, end, level->k);
		gram = count_folds(level, r, next);
		for (size_t i = r; i < next; i++) {
			__builtin_prefetch(share_ahead(level, i), 1);
			update(level, context, i, &gram);
		}
	}
}

/* Seen in one fold at most, a context teaches the others nothing. */
static int is_shared(const struct context *context)
{
	for (unsigned f = 0; f < FOLDS; f++)
		if (context->seen.in[f] == context->seen.total)
			return 0;
	return 1;
}

void crossfit_level(const struct suffix *suffix, const struct folds *folds,
		    unsigned k, uint64_t *shares)
{
	struct level level = {suffix, folds, k, shares};
	size_t end;

	for (size_t begin = 0; begin < suffix->n; begin = end) {
		struct context context;

		end = run_end(&level, begin, suffix->n, k - 1);
		if (end > begin + 1) {
			context = learn(&level, begin, end);
			if (is_shared(&context)) {
				apply(&level, &context, begin, end);
				continue;
			}
		}
		for (size_t r = begin; r < end; r++)
			__builtin_prefetch(share_ahead(&level, r), 1);
	}
}
