/* Start blocks of circular bootstrap draws, shared by series of one corpus. */
#ifndef RESAMPLE_DRAWS_H
#define RESAMPLE_DRAWS_H

#include "base/status.h"

#include <stddef.h>
#include <stdint.h>

#define DRAWS_BLOCKS_MAX 65535

/* draws x pieces starts, each below blocks, row by row. */
struct draws {
	uint16_t *starts; /* owned */
	size_t draws, pieces, blocks, length;
};

/*
 * Draws for resampling blocks values in pieces of length: every draw starts
 * ceil(blocks / length) pieces anywhere on the circle. The numbers depend on
 * the seed, the corpus, the length and blocks alone, so that two series with
 * the same block length are resampled alike. STATUS_NO_MEMORY.
 */
MUST_USE enum status draws_init(struct draws *draws, size_t count,
				size_t blocks, size_t length, uint64_t seed,
				const char *corpus);
void draws_release(struct draws *draws);

#endif
