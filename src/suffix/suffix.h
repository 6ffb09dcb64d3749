/* The suffix order of a cyclic sequence, with common prefixes up to K. */
#ifndef SUFFIX_SUFFIX_H
#define SUFFIX_SUFFIX_H

#include "symbols/sequence.h"

#define SUFFIX_WRAP_MAX 32

/*
 * The text is the n codes followed by the first K - 1 of them again (a
 * sequence shorter than that repeats as often as it takes). So every start
 * below n has at least K symbols after it, and the runs of neighbours that
 * share k <= K symbols are exactly the cyclic k-grams, one run a gram.
 */
struct suffix {
	size_t n;       /* symbols, and suffixes kept */
	unsigned width; /* bytes a symbol, big-endian */
	unsigned wrap;  /* K */
	uint8_t *text;  /* owned; (n + K - 1) width bytes and 8 more zeros */
	int32_t *start; /* owned; n symbol positions below n, sorted */
	/* owned; symbols that suffix r shares with r - 1, K at most; [0] = 0 */
	uint8_t *common;
};

/*
 * Sorts (libdivsufsort, bytes). wrap from 1 to SUFFIX_WRAP_MAX; the sequence
 * is copied. STATUS_NO_MEMORY: the heap is exhausted, or the text would reach
 * 2^31 bytes; why names the amount.
 */
MUST_USE enum status suffix_init(struct suffix *suffix,
				 const struct sequence *sequence, unsigned wrap,
				 struct reason *why);
void suffix_release(struct suffix *suffix);

#endif
