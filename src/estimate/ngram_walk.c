#include "estimate/ngram_walk.h"

/* An interval not left yet: where it began, how long its substring is. */
struct open_interval {
	size_t begin;
	size_t first_half; /* starts below n / 2 before begin */
	unsigned depth;
};

struct walk {
	const struct suffix *suffix;
	struct gram_tally *tally;
	struct block_losses *losses; /* or NULL */
	struct open_interval open[SUFFIX_WRAP_MAX + 1];
	unsigned deepest; /* index of the last open interval; [0] is the root */
	size_t first_half; /* starts below n / 2 so far */
	/* Suffixes that share deepest + 1 symbols with none, by half. */
	int64_t alone[2][SUFFIX_WRAP_MAX + 2];
};

static void leave(struct walk *walk, const struct open_interval *interval,
		  size_t end, unsigned above)
{
	size_t count = end - interval->begin;
	size_t first = walk->first_half - interval->first_half;
	unsigned depth = interval->depth;

	if (depth > above) {
		gram_tally_add(walk->tally, COUNT_ALL, count, above, depth);
		if (first)
			gram_tally_add(walk->tally, COUNT_FIRST_HALF, first,
				       above, depth);
		if (count > first)
			gram_tally_add(walk->tally, COUNT_SECOND_HALF,
				       count - first, above, depth);
	}
	if (walk->losses)
		block_losses_add(walk->losses, interval->begin, end, depth);
}

/*
 * Suffix end shares only depth symbols with the one before it. What was left
 * last began where an interval of that depth begins, so its place is reused.
 */
static void leave_deeper(struct walk *walk, size_t end, unsigned depth)
{
	struct open_interval *last = &walk->open[walk->deepest];

	for (;; last--) {
		unsigned above = last[-1].depth;

		leave(walk, last, end, above > depth ? above : depth);
		if (above <= depth)
			break;
	}
	walk->deepest = (unsigned)(last - walk->open) - 1;
	if (last[-1].depth < depth) {
		last->depth = depth;
		walk->deepest++;
	}
}

static void visit(struct walk *walk, size_t r, unsigned before, unsigned after)
{
	size_t half = walk->suffix->n / 2;
	size_t first = (size_t)walk->suffix->start[r] < half;
	unsigned depth = walk->open[walk->deepest].depth;

	walk->alone[!first][before > after ? before : after]++;
	if (after > depth) {
		walk->open[++walk->deepest] =
			(struct open_interval){r, walk->first_half, after};
		walk->first_half += first;
		return;
	}
	walk->first_half += first;
	if (after < depth)
		leave_deeper(walk, r + 1, after);
}

/* A suffix that shares m < K symbols at most is a gram seen once above m. */
static void count_alone(struct walk *walk)
{
	unsigned orders = walk->tally->orders;

	for (unsigned m = 0; m < orders; m++) {
		for (int half = 0; half < 2; half++) {
			enum count_set set =
				half ? COUNT_SECOND_HALF : COUNT_FIRST_HALF;
			uint64_t times = (uint64_t)walk->alone[half][m];

			gram_tally_add_once(walk->tally, set, times, m);
			gram_tally_add_once(walk->tally, COUNT_ALL, times, m);
		}
	}
}

void ngram_walk(const struct suffix *suffix, struct gram_tally *tally,
		struct block_losses *losses)
{
	struct walk walk = {.suffix = suffix, .tally = tally, .losses = losses};
	size_t n = suffix->n;
	unsigned before = 0;

	for (size_t r = 0; r < n; r++) {
		unsigned after = r + 1 < n ? suffix->common[r + 1] : 0;

		if (after > tally->orders)
			after = tally->orders;
		visit(&walk, r, before, after);
		before = after;
	}
	if (n > 1)
		leave(&walk, &walk.open[0], n, 0);
	count_alone(&walk);
}
