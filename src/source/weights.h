/* Draws from whole-number weights, and their entropy. */
#ifndef SOURCE_WEIGHTS_H
#define SOURCE_WEIGHTS_H

#include "base/random.h"

#include <stddef.h>
#include <stdint.h>

/* Probabilities weight[i] / total over count outcomes; weights borrowed. */
struct weights {
	const uint32_t *weight;
	size_t count;
};

/* An outcome from 0 to count - 1. */
size_t weights_draw(const struct weights *weights,
		    struct random_stream *random);
uint32_t weights_total(const struct weights *weights);
/* log2 W - sum w log2 w / W: Shannon 1948, in bits. */
double weights_entropy(const struct weights *weights);
/* Mean of value[i] under the weights. */
double weights_mean(const struct weights *weights, const double *value);

/* Zipf-like: weight[i] = scale / (i + 1), at least 1. */
void weights_zipf(uint32_t *weight, size_t count, uint32_t scale);

/* h2(p) = -p log2 p - (1 - p) log2 (1 - p) in bits. */
double binary_entropy(double p);

#endif
