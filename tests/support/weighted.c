#include "support/weighted.h"

#include <math.h>
#include <stdbool.h>
#include <string.h>

/* One node: the decisions whose last symbols are these. */
struct node {
	const uint8_t *one;
	const uint8_t (*before)[16];
	size_t count;
	unsigned alphabet, depth;
};

static double log2_estimate(double zeros, double ones)
{
	const double log_pi = 1.1447298858494002;

	return (lgamma(zeros + .5) + lgamma(ones + .5) - log_pi -
		lgamma(zeros + ones + 1)) /
	       log(2);
}

/* log2 P_w of the node of so many symbols. */
static double log2_weighted(const struct node *tree, uint8_t *symbols,
			    unsigned length)
{
	double zeros = 0, ones = 0, local, deeper = 0;

	for (size_t i = 0; i < tree->count; i++) {
		if (memcmp(tree->before[i], symbols, length) != 0)
			continue;
		zeros += !tree->one[i];
		ones += tree->one[i];
	}
	if (zeros + ones == 0)
		return 0;
	local = log2_estimate(zeros, ones);
	if (length == tree->depth)
		return local;
	for (unsigned x = 0; x < tree->alphabet; x++) {
		symbols[length] = (uint8_t)x;
		deeper += log2_weighted(tree, symbols, length + 1);
	}
	return fmax(local, deeper) - 1 + log2(1 + exp2(-fabs(local - deeper)));
}

double weighted_bits(const uint8_t *one, const uint8_t (*before)[16],
		     size_t count, unsigned alphabet, unsigned depth)
{
	const struct node tree = {one, before, count, alphabet, depth};
	uint8_t symbols[16];

	return -log2_weighted(&tree, symbols, 0);
}
