/* Symbol probabilities by counts from the other folds, order by order. */
#ifndef ESTIMATE_CROSSFIT_FOLDS_H
#define ESTIMATE_CROSSFIT_FOLDS_H

#include "suffix/suffix.h"

#define CROSSFIT_FOLDS 8
/* Sums with an inverse at hand: a table that stays in the nearest cache. */
#define CROSSFIT_INVERSES 1024

/*
 * Fold f is the symbols from edge[f] = f n / 8 to edge[f + 1] - 1. Only grams
 * within one fold count. With counts c over the other seven folds and m_s the
 * different symbols that follow s there, the last symbol x of a gram s x has
 *   q_k(x|s) = (c(sx) + m_s q_{k-1}(x|s')) / (c(s) + m_s),
 * s' being s without its first symbol, and q_0 = 1/A. Witten and Bell 1991 have
 * this weight of the shorter context; leaving each fold out in turn: Stone
 * 1974.
 */
struct crossfit_folds {
	const struct suffix *suffix; /* borrowed */
	size_t edge[CROSSFIT_FOLDS + 1];
	unsigned order; /* k of share; 0 at first */
	/*
	 * Owned; for suffix r at symbol i: the fold of i times 32, plus the
	 * number of symbols that follow i in it, 31 for 31 or more.
	 */
	uint8_t *place;
	/*
	 * Owned; for symbol t q_k(t) (crossfit_share.h), where its fold holds
	 * the whole gram that ends at t.
	 */
	uint64_t *share;
	uint64_t inverse[CROSSFIT_INVERSES]; /* 2^64 / i, from 1 */
};

/* STATUS_NO_MEMORY. Takes 9 bytes a symbol. alphabet is A, 1 to 2^32. */
MUST_USE enum status crossfit_folds_init(struct crossfit_folds *folds,
					 const struct suffix *suffix,
					 uint64_t alphabet);
void crossfit_folds_release(struct crossfit_folds *folds);

/* From order k - 1 to k <= suffix->wrap. */
void crossfit_folds_lengthen(struct crossfit_folds *folds);

/* Symbols whose gram of the present order lies in one fold. */
size_t crossfit_folds_kept(const struct crossfit_folds *folds);

#endif
