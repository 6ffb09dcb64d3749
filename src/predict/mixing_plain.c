#include "predict/parts.h"

/* Sums wrap; every order of addition gives the same. */
ALWAYS_INLINE int32_t lanes_dot(const int16_t *a, const int16_t *b,
				unsigned count)
{
	uint32_t sum = 0;

	for (unsigned i = 0; i < count; i++)
		sum += (uint32_t)((int32_t)a[i] * b[i]);
	return (int32_t)sum;
}

ALWAYS_INLINE void lanes_train(const int16_t *inputs, int16_t *weights,
			       unsigned count, int16_t step)
{
	for (unsigned i = 0; i < count; i++) {
		int32_t w = weights[i] + ((inputs[i] * step + (1 << 14)) >> 15);

		w = w > INT16_MAX ? INT16_MAX : w < INT16_MIN ? INT16_MIN : w;
		weights[i] = (int16_t)w;
	}
}

#define LANES_PREDICT plain_predict
#define LANES_UPDATE plain_update
#define LANES_BYTE plain_byte
#include "predict/mixing.inc"

const struct lanes lanes_plain = {
	.predict = plain_predict,
	.update = plain_update,
	.byte = plain_byte,
};
