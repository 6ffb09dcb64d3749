/* The plug-in log-loss of every symbol at every order, summed by block. */
#ifndef ESTIMATE_NGRAM_BLOCKS_H
#define ESTIMATE_NGRAM_BLOCKS_H

#include "cost/costs.h"
#include "estimate/ngram_tables.h"
#include "suffix/suffix.h"

/*
 * At order k the symbol t = s + k - 1 (mod n) costs
 * log2 c(symbols s … t-1) - log2 c(symbols s … t), cyclic counts; the count of
 * no symbols is n. That is nonzero only where a repeated substring branches,
 * so losses are spread when the walk leaves it, not symbol by symbol.
 */
struct block_losses {
	const struct suffix *suffix;   /* borrowed, like cuts and logs */
	const struct cuts *cuts;       /* at least one block */
	const struct count_logs *logs; /* those of the table */
	unsigned orders;               /* K */
	int64_t *sum_q32;              /* owned; [k - 1][block] */
	/*
	 * Owned; for suffix r at symbol s: the block of s times 16, plus the
	 * number of symbols that follow s in it, 15 for 15 or more.
	 */
	uint16_t *place;
	/*
	 * Owned; at the first suffix of each substring left so far its count:
	 * one byte, or 0 and the count in the next four.
	 */
	uint8_t *size;
	uint16_t *guess; /* owned; block of the first symbol in each bucket */
	unsigned bucket_shift;
};

/* STATUS_NO_MEMORY. Takes 3 bytes a symbol. */
MUST_USE enum status block_losses_init(struct block_losses *losses,
				       const struct suffix *suffix,
				       const struct cuts *cuts,
				       const struct count_logs *logs,
				       unsigned orders);
void block_losses_release(struct block_losses *losses);

/*
 * The walk leaves a substring of depth symbols that suffixes begin … end-1
 * share, two or more and as long as it can be; every longer one that any of
 * them share has been left before.
 */
void block_losses_add(struct block_losses *losses, size_t begin, size_t end,
		      unsigned depth);

#endif
