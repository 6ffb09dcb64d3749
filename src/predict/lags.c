#include "predict/plan.h"

/* Windows looked at, spread evenly, and bytes of each. */
#define WINDOWS 32
#define WINDOW 2048

/* A lag within this share of the best is as good, and the shortest is taken. */
#define NEAR_PERCENT 92

/* How many of count bytes equal those lag before; sums of bytes, no branch. */
static unsigned equal_bytes(const uint8_t *bytes, size_t count, size_t lag)
{
	const uint8_t *before = bytes - lag;
	unsigned equal = 0;

	for (size_t i = 0; i < count; i++)
		equal += bytes[i] == before[i];
	return equal;
}

static uint64_t equal_at(const uint8_t *bytes, size_t count, unsigned lag,
			 unsigned most)
{
	size_t window = count - most < WINDOW ? count - most : WINDOW;
	size_t room = count - most - window;
	uint64_t equal = 0;

	for (unsigned i = 0; i < WINDOWS; i++)
		equal += equal_bytes(bytes + most + room / WINDOWS * i, window,
				     lag);
	return equal;
}

unsigned lag_find(const uint8_t *bytes, size_t count, unsigned most)
{
	uint32_t score[STRIDE_MAX + 1];
	uint32_t best = 0;

	if (count < 64)
		return 1;
	if (most > STRIDE_MAX)
		most = STRIDE_MAX;
	if (most > count / 4)
		most = (unsigned)(count / 4);
	for (unsigned lag = 2; lag <= most; lag++) {
		score[lag] = (uint32_t)equal_at(bytes, count, lag, most);
		best = score[lag] > best ? score[lag] : best;
	}
	for (unsigned lag = 2; lag <= most; lag++) {
		if ((uint64_t)score[lag] * 100 >= (uint64_t)best * NEAR_PERCENT)
			return lag;
	}
	return 1;
}
