/* How often each gram of a sequence had been seen before, length by length. */
#ifndef ESTIMATE_DIRICHLET_GRAMS_H
#define ESTIMATE_DIRICHLET_GRAMS_H

#include "symbols/sequence.h"

/*
 * A gram of this length and the one before it share all but their ends, so a
 * gram is named by the number of the gram without its last symbol, and that
 * symbol. One table is held at a time.
 */
struct gram_slot {
	uint64_t key;
	uint32_t id; /* from 1 in the order of first sight; 0: free */
	uint32_t times;
};

/*
 * At most this many slots, filled to three quarters: 25 million grams. Single
 * symbols may take more, so that order 0 always works.
 */
#define GRAM_SLOTS_MAX ((size_t)1 << 25)

/*
 * For the symbol at t: context[t] is how often the length - 1 symbols before
 * it, and times[t] how often these and the symbol together, had been seen
 * earlier in its page. Both are 0 where its page holds fewer symbols before it.
 */
struct gram_chain {
	const struct sequence *sequence; /* borrowed */
	size_t page_bytes;               /* 0: one page */
	unsigned length;                 /* symbols a gram; 0 at first */
	uint32_t *id;                    /* owned; n each */
	uint32_t *context, *times;
	struct gram_slot *slots; /* owned; a power of two */
	size_t slot_count, used;
	size_t slot_limit;
};

/*
 * slot_limit is GRAM_SLOTS_MAX but in tests. STATUS_NO_MEMORY. Takes 12 bytes
 * a symbol, and 24 bytes a slot while the table grows: 768 MiB at the limit.
 * n must be below 2^32.
 */
MUST_USE enum status gram_chain_init(struct gram_chain *chain,
				     const struct sequence *sequence,
				     size_t page_bytes, size_t slot_limit);
void gram_chain_release(struct gram_chain *chain);

/*
 * Goes on to grams one symbol longer. *full: a page holds more of them than
 * the table may, and the chain is of no further use; the same on every machine.
 * STATUS_NO_MEMORY: the heap is exhausted.
 */
MUST_USE enum status gram_chain_lengthen(struct gram_chain *chain, bool *full);

#endif
