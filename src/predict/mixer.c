#include "predict/parts.h"

#include "base/log2.h"

void mixer_restart(struct mixer *mixer, int16_t even, int16_t odd)
{
	size_t rows = (size_t)mixer->sets * SET_ROWS;
	uint16_t first[STAGE_ROOM] = {0};

	for (size_t row = 0; row < rows; row++) {
		int16_t *w = mixer->weights + row * mixer->inputs;

		for (unsigned i = 0; i < mixer->inputs; i++)
			w[i] = i % 2 ? odd : even;
		w[mixer->inputs - 1] = 0;
	}
	for (size_t row = 0; row < SET_ROWS; row++) {
		for (unsigned i = 0; i < mixer->sets; i++)
			mixer->final[row][i] = (int32_t)(65536 / mixer->sets);
	}
	for (int i = 0; i < STAGE_USED; i++) {
		int x = (i - STAGE_USED / 2) * STAGE_STEP;

		x = x > LOGIT_MAX ? LOGIT_MAX : x;
		x = x < -LOGIT_MAX ? -LOGIT_MAX : x;
		first[i] = mixer->tables.squash[x + LOGIT_MAX];
	}
	for (size_t row = 0; row < STAGE_ROWS; row++) {
		memcpy(&mixer->stage[0][row * STAGE_ROOM], first,
		       sizeof(first));
		memcpy(&mixer->stage[1][row * STAGE_ROOM], first,
		       sizeof(first));
	}
	mixer->seen = 0;
	mixer->rate = mixer->rate_last + RATE_MORE;
}

int64_t tally_q32(const struct tally *tally)
{
	int64_t top = (int64_t)log2_q32(tally->mantissa) - 63 * BIT_Q32;

	return (int64_t)(tally->halvings << 32) - top;
}
