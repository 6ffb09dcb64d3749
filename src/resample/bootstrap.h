/* Intervals of a ratio of block sums: bits over symbols. */
#ifndef RESAMPLE_BOOTSTRAP_H
#define RESAMPLE_BOOTSTRAP_H

#include "base/status.h"

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

/* Values of each block, borrowed; symbols are above 0. */
struct block_series {
	const double *bits;
	const double *symbols;
	size_t blocks; /* 0, or 100 x 2^j up to DRAWS_BLOCKS_MAX */
	/*
	 * Known excess, bits^2, >= 0: by so much the variance of the sum of
	 * bits is smaller than the spread of the blocks makes it. At most half
	 * of the variance is ever taken away.
	 */
	double excess;
	/*
	 * The series of something that learns: its first blocks cost more for
	 * want of a past. That is in the mean, but it is no spread: blocks
	 * found to be start-up (resample/start_up.h) are left out of it.
	 */
	bool learns;
};

struct bootstrap_rules {
	unsigned draws;    /* at least 1999 */
	double confidence; /* two-sided, above 0 and below 1 */
	uint64_t seed;
	const char *corpus; /* borrowed; with seed it names the draws */
};

/* Fewer effective blocks than this carry no interval. */
#define EFFECTIVE_BLOCKS_MIN 8

struct bootstrap_result {
	double mean;           /* sum of bits over sum of symbols */
	double standard_error; /* of it, less the excess, after the guard */
	bool known;            /* an interval; otherwise reason says why not */
	double low, high;      /* low <= mean <= high */
	size_t block_length;   /* automatic, in blocks */
	double effective_blocks; /* blocks / block_length, after the guard;
				    also on a refusal */
	size_t start_up;         /* blocks left out of the spread */
	double lag1;             /* of 100 batch means, bias-corrected */
	bool guarded;            /* lag1 > .17: the error was widened */
	bool drifts;             /* see resample/batches.h */
	bool constant; /* no variance, or none in the long run: block length
			  1; no width where there is no variance at all */
	char reason[160];
};

/* Keeps draws between calls; one thread at a time. */
struct bootstrap;
/* rules are copied but for corpus. STATUS_NO_MEMORY. */
MUST_USE enum status bootstrap_new(const struct bootstrap_rules *rules,
				   struct bootstrap **bootstrap);
void bootstrap_free(struct bootstrap *bootstrap); /* NULL is allowed */

/*
 * Circular block bootstrap (Politis and Romano 1992), automatic block length
 * (resample/block_length.h), studentised by the block sums of each draw from
 * 30 effective blocks on; with fewer, Student's quantiles on the exact block
 * standard error. Where the lag-1 correlation rho of the batch means passes
 * .17, the variance is multiplied and the effective blocks divided by
 * (1 + rho) / (1 - rho). A series without blocks, with too few effective ones
 * or whose spread comes from too few is STATUS_OK with known false.
 * STATUS_NO_MEMORY.
 */
MUST_USE enum status bootstrap_interval(struct bootstrap *bootstrap,
					const struct block_series *series,
					struct bootstrap_result *result);

#endif
