#include "predict/plan.h"

/* Windows looked at, spread evenly, and bytes of each. */
#define WINDOWS 16
#define WINDOW 1024
#define SIDE 16 /* bytes compared at once */

/* A lag within this share of the best is as good, and the shortest is taken. */
#define NEAR_PERCENT 92

/* How many of WINDOW bytes equal those lag before. */
static unsigned equal_bytes(const uint8_t *bytes, size_t lag)
{
	const uint8_t *before = bytes - lag;
	uint8_t equal[SIDE] = {0}; /* WINDOW / SIDE is below 256 */
	unsigned sum = 0;

	for (size_t i = 0; i < WINDOW; i += SIDE) {
		for (size_t j = 0; j < SIDE; j++)
			equal[j] = (uint8_t)(equal[j] +
					     (bytes[i + j] == before[i + j]));
	}
	for (size_t j = 0; j < SIDE; j++)
		sum += equal[j];
	return sum;
}

static uint32_t equal_at(const uint8_t *bytes, size_t count, unsigned lag,
			 unsigned most)
{
	size_t step = (count - most - WINDOW) / WINDOWS;
	uint32_t equal = 0;

	for (unsigned i = 0; i < WINDOWS; i++)
		equal += equal_bytes(bytes + most + step * i, lag);
	return equal;
}

unsigned lag_find(const uint8_t *bytes, size_t count, unsigned most)
{
	uint32_t score[STRIDE_MAX + 1];
	uint32_t best = 0;

	if (count < 2 * WINDOW)
		return 1;
	if (most > STRIDE_MAX)
		most = STRIDE_MAX;
	if (most > count / 4)
		most = (unsigned)(count / 4);
	for (unsigned lag = 2; lag <= most; lag++) {
		score[lag] = equal_at(bytes, count, lag, most);
		best = score[lag] > best ? score[lag] : best;
	}
	for (unsigned lag = 2; lag <= most; lag++) {
		if ((uint64_t)score[lag] * 100 >= (uint64_t)best * NEAR_PERCENT)
			return lag;
	}
	return 1;
}
