#include "estimate/trust.h"

#include <math.h>

#define EPS 0.01              /* bits; also the share of grams seen once */
#define POSITIONS_MIN 100     /* below, corrections exceed what they correct */
#define CROSSFIT_SPREAD 0.139 /* of the mean of cross-fit and plug-in */
#define CORRECTION_SIZE 0.0051
#define NEGLIGIBLE 0.001 /* bits */
#define LN2 0.69314718055994531

const char *trust_test_name(enum trust_test test)
{
	static const char *const names[TRUST_TEST_COUNT] = {
		[TRUST_ALL_PASSED] = "none",
		[TRUST_POSITIONS] = "positions",
		[TRUST_COVERAGE] = "coverage",
		[TRUST_AGREEMENT] = "agreement",
		[TRUST_SUPPORT] = "support",
		[TRUST_STABILITY] = "stability",
		[TRUST_CROSSFIT] = "cross-fit",
		[TRUST_CORRECTION] = "correction size",
	};

	return names[test];
}

/* What the tests of one order look at; shorter is NULL at order 1. */
struct evidence {
	const struct order_counts *here, *shorter;
	struct corrected rate;
	double half_rate; /* mean Grassberger h_k of the halves */
	const double *crossfit;
};

static struct corrected conditional(const struct gram_counts *here,
				    const struct gram_counts *shorter,
				    unsigned k, double symbol_bits)
{
	struct corrected longer, before;

	corrected_from_counts(here, k * symbol_bits, &longer);
	if (!shorter)
		return corrected_difference(&longer, NULL);
	corrected_from_counts(shorter, (k - 1) * symbol_bits, &before);
	return corrected_difference(&longer, &before);
}

static struct evidence gather(const struct order_counts *orders, size_t i,
			      double symbol_bits, const double *crossfit)
{
	const struct order_counts *here = &orders[i];
	const struct order_counts *shorter = i ? &orders[i - 1] : NULL;
	struct evidence evidence = {.here = here,
				    .shorter = shorter,
				    .crossfit = crossfit ? crossfit + i : NULL};
	unsigned k = (unsigned)i + 1;

	evidence.rate = conditional(&here->all, shorter ? &shorter->all : NULL,
				    k, symbol_bits);
	for (int half = 0; half < 2; half++) {
		struct corrected part = conditional(
			&here->half[half],
			shorter ? &shorter->half[half] : NULL, k, symbol_bits);

		evidence.half_rate += part.grassberger / 2;
	}
	return evidence;
}

static int covered(const struct gram_counts *counts)
{
	return (double)counts->once <= EPS * (double)counts->positions;
}

static int agrees(const struct corrected *rate)
{
	return fabs(rate->grassberger - rate->chao_wang_jost) <= 2 * EPS &&
	       rate->grassberger - rate->plugin <= 5 * EPS;
}

static int supported(const struct evidence *evidence)
{
	double before =
		evidence->shorter ? support_chao1(&evidence->shorter->all) : 1;
	double grown = support_chao1(&evidence->here->all) - before;

	return grown <=
	       5 * EPS * 2 * (double)evidence->here->all.positions * LN2;
}

static int stable(const struct evidence *evidence)
{
	return fabs(evidence->rate.grassberger - evidence->half_rate) <=
	       2 * EPS;
}

static int crossfit_near(const struct evidence *evidence)
{
	double spread, middle;

	if (!evidence->crossfit)
		return 1;
	spread = *evidence->crossfit - evidence->rate.plugin;
	middle = (*evidence->crossfit + evidence->rate.plugin) / 2;
	return spread <= CROSSFIT_SPREAD * middle || spread <= NEGLIGIBLE;
}

static int correction_small(const struct corrected *rate)
{
	double size = fabs(rate->grassberger - rate->miller_madow);

	return size <= CORRECTION_SIZE * rate->grassberger ||
	       size <= NEGLIGIBLE;
}

/* Enough positions are there. */
static enum trust_test first_failed(const struct evidence *evidence)
{
	if (!covered(&evidence->here->all))
		return TRUST_COVERAGE;
	if (!agrees(&evidence->rate))
		return TRUST_AGREEMENT;
	if (!supported(evidence))
		return TRUST_SUPPORT;
	if (!stable(evidence))
		return TRUST_STABILITY;
	if (!crossfit_near(evidence))
		return TRUST_CROSSFIT;
	if (!correction_small(&evidence->rate))
		return TRUST_CORRECTION;
	return TRUST_ALL_PASSED;
}

struct trust trust_judge(const struct order_counts *orders, size_t count,
			 uint64_t alphabet, const double *crossfit)
{
	double symbol_bits = alphabet > 1 ? log2((double)alphabet) : 0;
	struct trust trust = {0};

	if (count && orders->all.positions < POSITIONS_MIN)
		return (struct trust){.failed = TRUST_POSITIONS};
	for (size_t i = 0; i < count; i++) {
		struct evidence evidence =
			gather(orders, i, symbol_bits, crossfit);
		const struct gram_counts *half = evidence.here->half;

		trust.failed = first_failed(&evidence);
		if (trust.failed != TRUST_ALL_PASSED) {
			trust.drifts = trust.failed == TRUST_STABILITY &&
				       covered(&half[0]) && covered(&half[1]);
			return trust;
		}
		trust.order = (unsigned)i + 1;
	}
	return trust;
}
