#include "suffix/previous.h"

#include <string.h>

#define NONE UINT32_MAX

/*
 * The suffix order as a doubly linked list over positions; shared[i] is what
 * suffix i has in common with the one before it in the list.
 */
struct chain {
	uint32_t *before, *after; /* position, or NONE at the ends */
	uint32_t *shared;
};

static void link_up(const struct chain *chain, const struct suffix *suffix)
{
	uint32_t last = NONE;

	for (size_t r = 0; r < suffix->n; r++) {
		uint32_t here = (uint32_t)suffix->start[r];

		chain->before[here] = last;
		if (last != NONE)
			chain->after[last] = here;
		last = here;
	}
	chain->after[last] = NONE;
}

static uint32_t extend(const struct suffix *suffix, size_t i, size_t j,
		       uint32_t known)
{
	size_t width = suffix->width, longer = i > j ? i : j;
	size_t limit = (suffix->n + suffix->wrap - 1 - longer) * width;
	size_t at = known * width;
	const uint8_t *a = suffix->text + i * width;
	const uint8_t *b = suffix->text + j * width;

	while (at + 8 <= limit && memcmp(a + at, b + at, 8) == 0)
		at += 8;
	while (at < limit && a[at] == b[at])
		at++;
	return (uint32_t)(at / width);
}

/*
 * Position i shares at least one less than i - 1 did: both neighbours moved on
 * by a symbol. That fails only after the neighbour that ended the sequence,
 * whose follower is not kept; from there counting starts anew, once. Prefixes
 * run on into the wrapped part, where the order was made.
 */
static void measure_shared(const struct chain *chain,
			   const struct suffix *suffix)
{
	uint32_t known = 0;

	for (size_t i = 0; i < suffix->n; i++) {
		uint32_t j = chain->before[i];

		if (j == NONE) {
			chain->shared[i] = known = 0;
			continue;
		}
		known = extend(suffix, i, j, known);
		chain->shared[i] = known;
		known = j + 1 < suffix->n && known ? known - 1 : 0;
	}
}

/*
 * Takes positions out from the last to the first: what is left then begins
 * earlier, and the longest match is with one of the two neighbours. The result
 * replaces shared[i], which is no longer needed.
 */
static void unlink_backwards(const struct chain *chain, size_t n)
{
	for (size_t i = n; i-- > 0;) {
		uint32_t before = chain->before[i], after = chain->after[i];
		uint32_t shared = chain->shared[i], longest = shared;

		if (before != NONE)
			chain->after[before] = after;
		if (after != NONE) {
			uint32_t next = chain->shared[after];

			chain->before[after] = before;
			chain->shared[after] = next < shared ? next : shared;
			longest = next > shared ? next : shared;
		}
		chain->shared[i] =
			longest > n - i ? (uint32_t)(n - i) : longest;
	}
}

enum status suffix_previous(const struct suffix *suffix, uint32_t **longest)
{
	struct chain chain = {0};
	enum status status;
	size_t n = suffix->n;

	if ((status = memory_new(n, sizeof(uint32_t), &chain.before)) !=
		    STATUS_OK ||
	    (status = memory_new(n, sizeof(uint32_t), &chain.after)) !=
		    STATUS_OK ||
	    (status = memory_new(n, sizeof(uint32_t), &chain.shared)) !=
		    STATUS_OK) {
		memory_free(chain.before);
		memory_free(chain.after);
		return status;
	}
	link_up(&chain, suffix);
	measure_shared(&chain, suffix);
	unlink_backwards(&chain, n);
	memory_free(chain.before);
	memory_free(chain.after);
	*longest = chain.shared;
	return STATUS_OK;
}
