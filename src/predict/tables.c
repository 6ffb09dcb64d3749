#include "predict/tables.h"

#include "base/log2.h"

/* e^(-1/256) in Q62 (forty-digit arithmetic). */
#define STEP_Q62 UINT64_C(4593706758521714574)

static uint64_t times_q62(uint64_t a, uint64_t b)
{
	return (uint64_t)(((wide_uint)a * b) >> 62);
}

/* Fills squash from 1 / (1 + e^-x) and its mirror image below 0. */
static void build_squash(struct predict_tables *tables)
{
	uint64_t one = UINT64_C(1) << 62, decay = one;

	for (int x = 0; x <= LOGIT_MAX; x++) {
		uint64_t below = (one + decay) >> 31;
		uint64_t p = ((one >> 15) + (below >> 1)) / below;

		/* (2^62 >> 15) / (2^62 (1 + d) >> 31) = 2^16 / (1 + d) */
		if (p > 65535)
			p = 65535;
		tables->squash[LOGIT_MAX + x] = (uint16_t)p;
		tables->squash[LOGIT_MAX - x] = (uint16_t)(65536 - p);
		decay = times_q62(decay, STEP_Q62);
	}
}

/* The x whose squash is nearest to each p, by one walk up both scales. */
static void build_stretch(struct predict_tables *tables)
{
	int x = 0;

	for (unsigned i = 0; i < 4096; i++) {
		unsigned p = 16 * i + 8;

		while (x + 1 < LOGIT_ROOM &&
		       2 * p > (unsigned)tables->squash[x] +
				       tables->squash[x + 1])
			x++;
		tables->stretch[i] = (int16_t)(x - LOGIT_MAX);
	}
	/* The exact mirror image, which rounding at the ends is not. */
	for (unsigned i = 0; i < 2048; i++)
		tables->stretch[i] = (int16_t)-tables->stretch[4095 - i];
}

void tables_build(struct predict_tables *tables)
{
	build_squash(tables);
	build_stretch(tables);
	for (unsigned n = 0; n < RATE_ROOM; n++)
		tables->rate[n] = (uint16_t)(131072 / (2 * n + 3));
	history_build(tables);
}
