#include "source/weights.h"

#include "base/log2.h"
#include "base/sum.h"

#include <assert.h>

void weights_init(struct weights *weights, const uint32_t *values,
		  uint32_t count)
{
	uint32_t total = 0;

	assert(count >= 1 && count <= WEIGHTS_MAX);
	for (uint32_t i = 0; i < count; i++) {
		assert(values[i] <= UINT32_MAX - total);
		total += values[i];
		weights->cumulative[i] = total;
	}
	assert(total > 0);
	weights->count = count;
	weights->total = total;
}

void weights_init_zipf(struct weights *weights, uint32_t count, uint32_t scale,
		       uint32_t shift)
{
	uint32_t values[WEIGHTS_MAX] = {0};

	for (uint32_t r = 0; r < count; r++)
		values[r] = scale / (r + shift);
	weights_init(weights, values, count);
}

void weights_init_dice(struct weights *weights, uint32_t sides)
{
	uint32_t values[WEIGHTS_MAX] = {0};
	uint32_t count = 2 * sides - 1;

	for (uint32_t i = 0; i < count; i++)
		values[i] = i < sides ? i + 1 : count - i;
	weights_init(weights, values, count);
}

uint32_t weights_draw(const struct weights *weights,
		      struct random_stream *random)
{
	uint32_t point = random_below(random, weights->total);
	uint32_t low = 0, left = weights->count;

	/* Halving without a branch on the point, which nothing predicts. */
	while (left > 1) {
		uint32_t half = left / 2;

		low += point >= weights->cumulative[low + half - 1] ? half : 0;
		left -= half;
	}
	return low;
}

uint32_t weights_of(const struct weights *weights, uint32_t item)
{
	return weights->cumulative[item] -
	       (item ? weights->cumulative[item - 1] : 0);
}

double weights_probability(const struct weights *weights, uint32_t item)
{
	return (double)weights_of(weights, item) / (double)weights->total;
}

double weights_entropy(const struct weights *weights)
{
	struct sum sum = {0};

	for (uint32_t i = 0; i < weights->count; i++) {
		uint32_t w = weights_of(weights, i);

		if (w)
			sum_add(&sum, (double)w * log2_whole(w));
	}
	return log2_whole(weights->total) -
	       sum_value(&sum) / (double)weights->total;
}

double log2_whole(uint64_t value)
{
	return (double)log2_q56(value) * 0x1p-56;
}
