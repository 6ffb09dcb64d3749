#include "resample/start_up.h"

#include "base/sum.h"

/* Sums over the blocks from some place to the end. */
struct tail {
	double bits, symbols, first, second; /* of residuals and squares */
};

static void add_block(struct tail *tail, const struct block_series *series,
		      double mean, size_t i)
{
	double residual = series->bits[i] - mean * series->symbols[i];

	tail->bits += series->bits[i];
	tail->symbols += series->symbols[i];
	tail->first += residual;
	tail->second += residual * residual;
}

static double squared_error(const struct tail *tail, double blocks)
{
	return (tail->second - tail->first * tail->first / blocks) / blocks /
	       blocks;
}

size_t start_up_blocks(const struct block_series *series)
{
	size_t m = series->blocks, most = m / 10, best = most;
	double mean = sum_of(series->bits, m) / sum_of(series->symbols, m);
	struct tail tail = {0};
	double least;

	for (size_t i = m; i-- > most;)
		add_block(&tail, series, mean, i);
	least = squared_error(&tail, (double)(m - most));
	for (size_t d = most; d-- > 0;) {
		double error;

		add_block(&tail, series, mean, d);
		error = squared_error(&tail, (double)(m - d));
		/* Of equals the fewest blocks. */
		if (error <= least) {
			least = error;
			best = d;
		}
	}
	return best;
}
