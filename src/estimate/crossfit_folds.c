#include "estimate/crossfit_folds.h"

#include "estimate/crossfit_share.h"

#define PLACE_FOLLOWING 31
/* Suffixes between asking for a share and using it: hides a cache miss. */
#define AHEAD 24

/*
 * One context s: the suffixes that begin with it, and what the grams s x that
 * are kept say of it.
 */
struct context {
	size_t begin, end;
	uint32_t all, different; /* c(s) and m_s over all eight folds */
	uint32_t fold[CROSSFIT_FOLDS];
	/* successors that no other fold has */
	uint32_t only[CROSSFIT_FOLDS];
	uint64_t inverse[CROSSFIT_FOLDS]; /* 2^64 / (c(s) + m_s) */
};

/* The suffixes of one gram s x and its count by fold. */
struct gram {
	size_t begin, end;
	uint32_t all;
	uint32_t fold[CROSSFIT_FOLDS];
};

static unsigned fold_of(const struct crossfit_folds *folds, size_t symbol)
{
	unsigned fold = 0;

	for (unsigned f = 1; f < CROSSFIT_FOLDS; f++)
		fold += symbol >= folds->edge[f];
	return fold;
}

static void set_places(struct crossfit_folds *folds)
{
	for (size_t r = 0; r < folds->suffix->n; r++) {
		size_t symbol = (size_t)folds->suffix->start[r];
		unsigned fold = fold_of(folds, symbol);
		size_t following = folds->edge[fold + 1] - 1 - symbol;

		if (following > PLACE_FOLLOWING)
			following = PLACE_FOLLOWING;
		folds->place[r] = (uint8_t)(fold << 5 | following);
	}
}

enum status crossfit_folds_init(struct crossfit_folds *folds,
				const struct suffix *suffix, uint64_t alphabet)
{
	struct crossfit_folds made = {.suffix = suffix};
	size_t n = suffix->n;

	TRY(memory_new(n, 1, &made.place));
	if (memory_new(n, sizeof(*made.share), &made.share) != STATUS_OK) {
		memory_free(made.place);
		return STATUS_NO_MEMORY;
	}
	for (uint64_t total = 1; total < CROSSFIT_INVERSES; total++)
		made.inverse[total] = UINT64_MAX / total;
	for (size_t f = 0; f <= CROSSFIT_FOLDS; f++)
		made.edge[f] = n / CROSSFIT_FOLDS * f +
			       n % CROSSFIT_FOLDS * f / CROSSFIT_FOLDS;
	for (size_t t = 0; t < n; t++)
		made.share[t] = share_uniform(alphabet);
	set_places(&made);
	*folds = made;
	return STATUS_OK;
}

void crossfit_folds_release(struct crossfit_folds *folds)
{
	memory_free(folds->place);
	memory_free(folds->share);
	*folds = (struct crossfit_folds){.suffix = NULL};
}

size_t crossfit_folds_kept(const struct crossfit_folds *folds)
{
	size_t kept = 0;

	for (size_t f = 0; f < CROSSFIT_FOLDS; f++) {
		size_t symbols = folds->edge[f + 1] - folds->edge[f];

		if (symbols >= folds->order)
			kept += symbols - folds->order + 1;
	}
	return kept;
}

/*
 * That of the symbol which ends the gram at suffix r. (A function that only
 * asks for it ahead is dropped by gcc 12 as having no effect.)
 */
static uint64_t *share_at(const struct crossfit_folds *folds, size_t r)
{
	return folds->share + folds->suffix->start[r] + folds->order - 1;
}

/*
 * Where the suffixes that share so many symbols with the one at begin end. Asks
 * for what short runs further on will need; long ones do so themselves.
 */
static size_t run_end(const struct crossfit_folds *folds, size_t begin,
		      unsigned shared)
{
	const uint8_t *common = folds->suffix->common;
	size_t n = folds->suffix->n, end = begin;

	do {
		size_t later = end + AHEAD;

		if (end - begin < AHEAD && later + 1 < n &&
		    (common[later] >= shared || common[later + 1] >= shared))
			__builtin_prefetch(share_at(folds, later));
		end++;
	} while (end < n && common[end] >= shared);
	return end;
}

/* Counts the gram whose suffixes begin at begin. */
static void count_gram(const struct crossfit_folds *folds, size_t begin,
		       size_t end, struct gram *gram)
{
	const uint8_t *common = folds->suffix->common;
	unsigned order = folds->order;
	size_t r = begin;

	*gram = (struct gram){.begin = begin};
	do {
		unsigned place = folds->place[r++];
		unsigned kept = (place & PLACE_FOLLOWING) + 1 >= order;

		gram->fold[place >> 5] += kept;
		gram->all += kept;
	} while (r < end && common[r] >= order);
	gram->end = r;
}

static void add_gram(struct context *context, const struct gram *gram)
{
	if (!gram->all)
		return;
	context->all += gram->all;
	context->different++;
	for (unsigned f = 0; f < CROSSFIT_FOLDS; f++) {
		context->fold[f] += gram->fold[f];
		context->only[f] += gram->fold[f] == gram->all;
	}
}

/* Is the gram at r the only one of its order in the run that ends at end? */
static bool is_single(const struct crossfit_folds *folds, size_t r, size_t end)
{
	return r + 1 == end || folds->suffix->common[r + 1] < folds->order;
}

static bool is_kept(const struct crossfit_folds *folds, unsigned place)
{
	return (place & PLACE_FOLLOWING) + 1 >= folds->order;
}

/* A gram of one suffix. */
static void add_single(const struct crossfit_folds *folds,
		       struct context *context, size_t r)
{
	unsigned place = folds->place[r], kept = is_kept(folds, place);

	context->all += kept;
	context->different += kept;
	context->fold[place >> 5] += kept;
	context->only[place >> 5] += kept;
}

static void count_context(const struct crossfit_folds *folds,
			  struct context *context)
{
	size_t r = context->begin;

	while (r < context->end) {
		struct gram gram;

		if (is_single(folds, r, context->end)) {
			add_single(folds, context, r++);
			continue;
		}
		count_gram(folds, r, context->end, &gram);
		add_gram(context, &gram);
		r = gram.end;
	}
}

/* False where no fold learns from another. */
static bool invert(const struct crossfit_folds *folds, struct context *context)
{
	bool shared = false;

	for (unsigned f = 0; f < CROSSFIT_FOLDS; f++) {
		uint64_t total = (uint64_t)context->all - context->fold[f] +
				 context->different - context->only[f];

		if (context->fold[f] == 0 || context->fold[f] == context->all)
			continue;
		shared = true;
		context->inverse[f] = total < CROSSFIT_INVERSES
					      ? folds->inverse[total]
					      : UINT64_MAX / total;
	}
	return shared;
}

/* The symbol that ends the gram at suffix r, seen count times elsewhere. */
static void blend(struct crossfit_folds *folds, const struct context *context,
		  size_t r, uint32_t count)
{
	unsigned place = folds->place[r], f = place >> 5;
	uint64_t *share = share_at(folds, r);

	if (r + AHEAD < context->end)
		__builtin_prefetch(share_at(folds, r + AHEAD));
	if (is_kept(folds, place) && context->fold[f] != context->all)
		*share = share_blend(*share, count,
				     context->different - context->only[f],
				     context->inverse[f]);
}

static void blend_context(struct crossfit_folds *folds, size_t begin,
			  size_t end)
{
	struct context context = {.begin = begin, .end = end};
	size_t r = begin;

	count_context(folds, &context);
	if (!invert(folds, &context))
		return;
	while (r < end) {
		struct gram gram;

		if (is_single(folds, r, end)) {
			blend(folds, &context, r++, 0);
			continue;
		}
		count_gram(folds, r, end, &gram);
		for (; r < gram.end; r++)
			blend(folds, &context, r,
			      gram.all - gram.fold[folds->place[r] >> 5]);
	}
}

void crossfit_folds_lengthen(struct crossfit_folds *folds)
{
	size_t n = folds->suffix->n;

	folds->order++;
	for (size_t begin = 0, end; begin < n; begin = end) {
		end = run_end(folds, begin, folds->order - 1);
		if (end - begin > 1)
			blend_context(folds, begin, end);
	}
}
