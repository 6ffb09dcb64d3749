#include "estimate/corrections.h"

#include <math.h>

#define LN2 0.69314718055994531 /* ln 2 */

/* Abramowitz and Stegun 6.3.5 and 6.3.18; x > 0. */
static double digamma(double x)
{
	double below = 0, square;

	for (; x < 16; x++)
		below += 1 / x;
	square = 1 / (x * x);
	return log(x) - 0.5 / x -
	       square * (1.0 / 12 -
			 square * (1.0 / 120 -
				   square * (1.0 / 252 - square / 240))) -
	       below;
}

/* Bits that the outcomes never seen add, by Chao, Wang and Jost. */
static double unseen_bits(const struct gram_counts *counts)
{
	double n = (double)counts->positions, once = (double)counts->once;
	double twice = (double)counts->twice, a;

	if (counts->once == 0)
		return 0;
	if (counts->twice)
		a = 2 * twice / ((n - 1) * once + 2 * twice);
	else
		a = 2 / ((n - 1) * (once - 1) + 2);
	return once / n * unseen_tail(n, a) / LN2;
}

static double between(double value, double low, double high)
{
	if (value < low)
		return low;
	return value > high ? high : value;
}

void corrected_from_counts(const struct gram_counts *counts,
			   double ceiling_bits, struct corrected *corrected)
{
	double n = (double)counts->positions, log_n = log2(n);
	double seen = (double)counts->distinct;

	corrected->plugin = log_n - bits_from_q16(counts->plugin_q16) / n;
	corrected->miller_madow =
		corrected->plugin + (seen - 1) / (2 * n * LN2);
	corrected->grassberger =
		between(log_n - bits_from_q16(counts->grassberger_q16) / n, 0,
			ceiling_bits);
	corrected->chao_wang_jost = digamma(n) / LN2 -
				    bits_from_q16(counts->psi_q16) / n +
				    unseen_bits(counts);
}

static double rise(double longer, double shorter)
{
	return longer > shorter ? longer - shorter : 0;
}

struct corrected corrected_difference(const struct corrected *longer,
				      const struct corrected *shorter)
{
	const struct corrected zero = {0};

	if (!shorter)
		shorter = &zero;
	return (struct corrected){
		.plugin = rise(longer->plugin, shorter->plugin),
		.miller_madow =
			rise(longer->miller_madow, shorter->miller_madow),
		.grassberger = rise(longer->grassberger, shorter->grassberger),
		.chao_wang_jost =
			rise(longer->chao_wang_jost, shorter->chao_wang_jost),
	};
}

double coverage_good_turing(const struct gram_counts *counts)
{
	return 1 - (double)counts->once / (double)counts->positions;
}

double coverage_chao_jost(const struct gram_counts *counts)
{
	double n = (double)counts->positions, once = (double)counts->once;
	double twice = (double)counts->twice;

	if (counts->once == 0)
		return 1;
	if ((n - 1) * once + 2 * twice == 0) /* a single position */
		return 0;
	return 1 - once / n * ((n - 1) * once / ((n - 1) * once + 2 * twice));
}

double support_chao1(const struct gram_counts *counts)
{
	double once = (double)counts->once, twice = (double)counts->twice;

	return (double)counts->distinct + once * (once - 1) / (2 * (twice + 1));
}
