/* Draws from whole-number weights, and the exact entropy of such a draw. */
#ifndef SOURCE_WEIGHTS_H
#define SOURCE_WEIGHTS_H

#include "base/random.h"

#include <stddef.h>
#include <stdint.h>

#define WEIGHTS_MAX 256

/*
 * Item i has probability w_i / W with whole w_i >= 0 and W = sum w_i, which is
 * what the draw realises exactly. No ownership: copy it freely.
 */
struct weights {
	uint32_t count;
	uint32_t total;                   /* W, 1 to 2^32 - 1 */
	uint32_t cumulative[WEIGHTS_MAX]; /* w_0 + .. + w_i */
};

/* count 1 to WEIGHTS_MAX; some weight > 0; the sum fits 32 bits. */
void weights_init(struct weights *weights, const uint32_t *values,
		  uint32_t count);
/* Item of rank r (from 0) has floor(scale / (r + shift)): Zipf-like. */
void weights_init_zipf(struct weights *weights, uint32_t count, uint32_t scale,
		       uint32_t shift);
/* Two dice of `sides` sides each: sums 0 .. 2 sides - 2; sides to 128. */
void weights_init_dice(struct weights *weights, uint32_t sides);

uint32_t weights_draw(const struct weights *weights,
		      struct random_stream *random);
uint32_t weights_of(const struct weights *weights, uint32_t item);
/* w_i / W. */
double weights_probability(const struct weights *weights, uint32_t item);
/* H = log2 W - sum w_i log2 w_i / W bits (Shannon 1948). */
double weights_entropy(const struct weights *weights);

/* log2 of a whole number >= 1 as a double, the same on every machine. */
double log2_whole(uint64_t value);

#endif
