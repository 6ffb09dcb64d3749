/* Counts of counts by order, and the sums over them. */
#ifndef ESTIMATE_NGRAM_COUNTS_H
#define ESTIMATE_NGRAM_COUNTS_H

#include "cost/findings.h"
#include "estimate/ngram_tables.h"

#include <stddef.h>

/* A set of positions: the sets of struct order_counts, in that order. */
enum count_set { COUNT_FIRST_HALF, COUNT_SECOND_HALF, COUNT_ALL, COUNT_SETS };

/* Sums of grams too frequent for the table, at one order. */
struct frequent {
	int64_t distinct;
	wide_int plain_q32, psi_q56, grassberger_q56;
};

/*
 * Everything is held as differences over orders: what is true of orders
 * p + 1 to d is added at p + 1 and taken off at d + 1.
 */
struct gram_tally {
	const struct count_logs *logs; /* borrowed */
	unsigned orders;               /* K */
	size_t stride;                 /* K + 2 */
	/* Owned; [count][order]. Differences wrap round, values do not. */
	uint32_t *rare[COUNT_SETS];
	struct frequent *frequent[COUNT_SETS]; /* owned; [order] */
};

MUST_USE enum status gram_tally_init(struct gram_tally *tally,
				     const struct count_logs *logs,
				     unsigned orders);
void gram_tally_release(struct gram_tally *tally);

/* gram_tally_add for a count of COUNT_LOGS_TABLED or more. */
void gram_tally_add_frequent(struct gram_tally *tally, enum count_set set,
			     uint64_t count, unsigned above, unsigned deepest);

/*
 * A gram seen count >= 1 times in a set, at every order above to deepest. Here
 * because it is called for every node of the walk.
 */
static inline void gram_tally_add(struct gram_tally *tally, enum count_set set,
				  uint64_t count, unsigned above,
				  unsigned deepest)
{
	uint32_t *row;

	if (count >= COUNT_LOGS_TABLED) {
		gram_tally_add_frequent(tally, set, count, above, deepest);
		return;
	}
	row = tally->rare[set] + count * tally->stride;
	row[above + 1]++;
	row[deepest + 1]--;
}

/* times different grams, each seen once, at every order above. */
void gram_tally_add_once(struct gram_tally *tally, enum count_set set,
			 uint64_t times, unsigned above);

/*
 * The sums at every order from 1 to K, through orders[0 … K-1]; n cyclic
 * positions, of which n / 2 in the first half. plugin_q32[0 … K-1] gets
 * sum c log2 c over all positions, unrounded. Uses the tally up: call it once.
 */
void gram_tally_evaluate(struct gram_tally *tally, size_t n,
			 struct order_counts *orders, wide_int *plugin_q32);

#endif
