/* The length of a sequential Dirichlet code at every context order. */
#ifndef ESTIMATE_DIRICHLET_CODE_H
#define ESTIMATE_DIRICHLET_CODE_H

#include "base/log2.h"
#include "base/status.h"
#include "symbols/sequence.h"

#define DIRICHLET_ORDERS 6 /* context orders 0 to 5 */

/* The alphabet that probability is spread over. */
enum dirichlet_alphabet { ALPHABET_OF_KIND, ALPHABET_SEEN, ALPHABET_CHOICES };

/* What is coded. Borrowed. */
struct dirichlet_input {
	const struct sequence *sequence;
	const struct cuts *cuts;
	size_t page_bytes; /* start afresh every so many; 0: never */
	uint64_t alphabet[ALPHABET_CHOICES];
};

/*
 * Bits in Q32 by order and alphabet, without any charge. After the context s,
 * seen c_s times, symbol x, seen c_sx times in it, costs
 * -log2 of (A c_sx + 1) / (A c_s + A), the Dirichlet(1/A) estimate (Krichevsky
 * and Trofimov 1981 for A = 2). A context that would begin before the stream or
 * page was never seen: 1/A.
 */
struct dirichlet_sums {
	wide_int total_q32[DIRICHLET_ORDERS][ALPHABET_CHOICES];
	int64_t *block_q32; /* owned; [order][alphabet][block], or NULL */
	size_t blocks;
};

/*
 * Needs 8 bytes a symbol and at most 30 for each different gram of the order
 * with most. STATUS_NO_MEMORY, also from 2^32 - 2 symbols on.
 */
MUST_USE enum status dirichlet_code(const struct dirichlet_input *input,
				    struct dirichlet_sums *sums);
void dirichlet_sums_release(struct dirichlet_sums *sums);

/* The block sums of one choice; sums->blocks of them. */
int64_t *dirichlet_blocks(const struct dirichlet_sums *sums, unsigned order,
			  enum dirichlet_alphabet alphabet);

/* log2 of the number of ways to choose seen out of alphabet symbols, Q32. */
MUST_USE enum status subset_bits_q32(uint64_t alphabet, uint64_t seen,
				     wide_int *bits_q32);

#endif
