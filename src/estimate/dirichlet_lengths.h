/* Lengths of the sequential Dirichlet code at one context length. */
#ifndef ESTIMATE_DIRICHLET_LENGTHS_H
#define ESTIMATE_DIRICHLET_LENGTHS_H

#include "estimate/dirichlet_grams.h"
#include "estimate/quick_log2.h"

/* Context lengths 0 … 5, each with the kind's alphabet and the one seen. */
#define DIRICHLET_ORDERS 6
enum dirichlet_alphabet {
	ALPHABET_OF_KIND,
	ALPHABET_SEEN,
	DIRICHLET_ALPHABETS
};

/*
 * The symbol x after the context s costs -log2 q(x|s), with
 * q(x|s) = (c(sx) + 1/A) / (c(s) + 1) = (A c(sx) + 1) / (A c(s) + A)
 * over the counts of what came before: a Dirichlet(1/A) prior for each context.
 * At A = 2 this is the estimator of Krichevsky and Trofimov 1981. The symbols
 * that open a page and have no full context cost log2 A.
 */
struct dirichlet_code {
	uint64_t alphabet; /* A, 1 to 2^32 */
	uint64_t alphabet_q32;
	uint64_t *letter_q32; /* owned; log2(A c + 1) for small c */
};

struct dirichlet_codes {
	struct dirichlet_code code[DIRICHLET_ALPHABETS];
	uint64_t *context_q32;   /* owned; log2(c + 1) for small c */
	struct quick_log2 *logs; /* owned */
};

/* For the alphabets of this sequence. STATUS_NO_MEMORY. */
MUST_USE enum status dirichlet_codes_init(struct dirichlet_codes *codes,
					  const struct sequence *sequence);
void dirichlet_codes_release(struct dirichlet_codes *codes);

/*
 * Adds the bits of every symbol from first to last - 1 to sum_q32, by
 * alphabet; context length chain->length - 1. Nothing chosen is charged here.
 */
void dirichlet_codes_add(const struct dirichlet_codes *codes,
			 const struct gram_chain *chain, size_t first,
			 size_t last, wide_int sum_q32[DIRICHLET_ALPHABETS]);

/*
 * Bits that tell the m symbols seen out of A possible ones: log2 A for m and
 * log2 C(A, m) for which, rounded up to 2^-16; without the first the lengths of
 * all sequences would not belong to one code.
 */
wide_int dirichlet_subset_q32(uint64_t alphabet, uint64_t seen);

#endif
