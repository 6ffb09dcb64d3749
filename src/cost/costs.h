/* What a method costs on a corpus: a headline in bits and bits by block. */
#ifndef COST_COSTS_H
#define COST_COSTS_H

#include "base/log2.h"
#include "base/status.h"

#include <stddef.h>
#include <stdint.h>

/*
 * All bits are Q16 (base/log2.h): whole numbers, so that they are the same on
 * every machine and add up exactly.
 */
struct costs {
	int64_t headline_q16; /* bits of the whole sequence */
	int64_t *block_q16;   /* owned; bits of each block, or NULL */
	size_t blocks;        /* 0: no blocks, the row says why */
};

/* Zeroed block sums for blocks >= 0 blocks. */
MUST_USE enum status costs_init(struct costs *costs, size_t blocks);
void costs_release(struct costs *costs);

/*
 * Sets block sums and headline from sums in Q32, by rounding the running total
 * at every cut: the blocks then add up to the headline exactly.
 */
void costs_set_q32(struct costs *costs, const int64_t *block_q32);

/* Sum of the block bits. */
int64_t costs_block_total(const struct costs *costs);

#endif
