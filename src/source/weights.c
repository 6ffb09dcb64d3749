#include "source/weights.h"

#include "base/sum.h"

#include <math.h>

uint32_t weights_total(const struct weights *weights)
{
	uint32_t total = 0;

	for (size_t i = 0; i < weights->count; i++)
		total += weights->weight[i];
	return total;
}

size_t weights_draw(const struct weights *weights, struct random_stream *random)
{
	uint32_t left = random_below(random, weights_total(weights));
	size_t i = 0;

	while (left >= weights->weight[i])
		left -= weights->weight[i++];
	return i;
}

double weights_entropy(const struct weights *weights)
{
	struct sum sum = {0, 0};
	double total = weights_total(weights);

	for (size_t i = 0; i < weights->count; i++) {
		double w = weights->weight[i];

		if (w > 0)
			sum_add(&sum, w * log2(w));
	}
	return log2(total) - sum_value(&sum) / total;
}

double weights_mean(const struct weights *weights, const double *value)
{
	struct sum sum = {0, 0};

	for (size_t i = 0; i < weights->count; i++)
		sum_add(&sum, weights->weight[i] * value[i]);
	return sum_value(&sum) / weights_total(weights);
}

void weights_zipf(uint32_t *weight, size_t count, uint32_t scale)
{
	for (size_t i = 0; i < count; i++) {
		weight[i] = scale / (uint32_t)(i + 1);
		if (!weight[i])
			weight[i] = 1;
	}
}

double binary_entropy(double p)
{
	if (p <= 0 || p >= 1)
		return 0;
	return -p * log2(p) - (1 - p) * log2(1 - p);
}
