/* The bounds of Cover and Thomas 2006, theorem 4.5.1, by enumeration. */
#include "source/emissions.h"
#include "source/model_rate.h"

#include <math.h>

/*
 * Sum over all runs of `symbols` symbols of P(run) H(next symbol | run), the
 * belief holding P(regime, run so far) at the time of the next symbol.
 */
static double weighted_entropy(const struct emissions *emissions,
			       const double *belief, unsigned symbols)
{
	double joint[MODEL_REGIMES_MAX], after[MODEL_REGIMES_MAX];
	double bits = 0, total = 0;

	for (uint32_t x = 0; x < emissions->alphabet; x++) {
		double p = emissions_see(emissions, 0, x, belief, joint);

		total += p;
		if (symbols && p > 0) {
			emissions_move(emissions, joint, after);
			bits += weighted_entropy(emissions, after, symbols - 1);
		} else if (p > 0) {
			bits -= p * log2(p);
		}
	}
	return symbols || total <= 0 ? bits : bits + total * log2(total);
}

void bounds_at(const struct emissions *emissions,
	       const struct source_model *model, unsigned n,
	       struct rate_bounds *bounds)
{
	bounds->upper = weighted_entropy(emissions, model->stationary, n - 1);
	bounds->lower = 0;
	for (uint32_t r = 0; r < model->regimes; r++) {
		double known[MODEL_REGIMES_MAX] = {0};

		known[r] = model->stationary[r];
		bounds->lower += weighted_entropy(emissions, known, n - 1);
	}
}

static bool affordable(const struct source_model *model, unsigned n)
{
	return pow((double)model->alphabet, (double)n) <= 0x1p24;
}

enum status source_model_bounds(const struct source_model *model, unsigned n,
				double *lower, double *upper,
				struct reason *why)
{
	struct emissions emissions;
	struct rate_bounds bounds;

	if (model->packed || model->contexts != 1 || n < 1 ||
	    !affordable(model, n))
		return reason_give(why, STATUS_BAD_USAGE,
				   "bounds need one context, n >= 1 and at "
				   "most 2^24 runs of n symbols");
	if (emissions_init(&emissions, model) != STATUS_OK)
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	bounds_at(&emissions, model, n, &bounds);
	emissions_release(&emissions);
	*lower = bounds.lower;
	*upper = bounds.upper;
	return STATUS_OK;
}

/* The last n at which the bounds are tried, and how close they must be. */
enum { N_LAST = 22, N_FIRST = 6, N_SECOND = 10 };
#define MEET 1e-10

/* The last n to try: few enough runs that it costs less than a grid. */
static unsigned last_affordable(uint32_t alphabet)
{
	unsigned n = 0;

	while (n < N_LAST && pow((double)alphabet, n + 1.) <= 0x1p22)
		n++;
	return n;
}

bool bounds_meet(const struct emissions *emissions,
		 const struct source_model *model, struct known_rate *rate)
{
	unsigned last = last_affordable(model->alphabet);
	struct rate_bounds bounds;
	double first, gap, shrink;

	if (model->contexts != 1 || last < N_SECOND)
		return false;
	bounds_at(emissions, model, N_FIRST, &bounds);
	first = bounds.upper - bounds.lower;
	bounds_at(emissions, model, N_SECOND, &bounds);
	gap = bounds.upper - bounds.lower;
	/* The gap falls geometrically (Birch 1962): does it suffice? */
	shrink = gap > 0 && first > 0 ? pow(gap / first, 1. / 4) : 0;
	for (unsigned n = N_SECOND + 1; gap > MEET; n++) {
		if (n > last || gap * pow(shrink, last + 2. - n) > MEET)
			return false;
		bounds_at(emissions, model, n, &bounds);
		gap = bounds.upper - bounds.lower;
	}
	rate->bits_per_symbol = (bounds.upper + bounds.lower) / 2;
	rate->error = fmax(gap, 0) / 2;
	return true;
}
