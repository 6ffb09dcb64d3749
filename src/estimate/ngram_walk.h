/* One pass over the suffix order that counts the grams of all orders. */
#ifndef ESTIMATE_NGRAM_WALK_H
#define ESTIMATE_NGRAM_WALK_H

#include "estimate/ngram_blocks.h"
#include "estimate/ngram_counts.h"

/*
 * The substrings shared by neighbours form nested intervals of the suffix
 * order (Abouelhoda, Kurtz, Ohlebusch 2004); a stack of at most K + 1 of them
 * visits each once. Each goes to the tally at all the orders at which it is
 * the same gram, and to losses, unless that is NULL.
 */
void ngram_walk(const struct suffix *suffix, struct gram_tally *tally,
		struct block_losses *losses);

#endif
