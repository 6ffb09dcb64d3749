/* Frozen sources of infinite memory: hidden chains and slow regimes. */
#include "source/frozen_rows.h"

/* A binary chain that changes in flip of 1000, seen through a channel that
 * inverts a bit in noise of 1000. */
static enum status noisy_bit(struct source_model *model, uint32_t flip,
			     uint32_t noise, struct reason *why)
{
	const uint32_t moves[4] = {1000 - flip, flip, flip, 1000 - flip};
	const uint32_t emits[4] = {1000 - noise, noise, noise, 1000 - noise};

	return source_model_init_hidden(model, 2, 2, moves, emits, why);
}

static enum status noisy_fast(struct source_model *model, struct reason *why)
{
	return noisy_bit(model, 100, 100, why);
}

static enum status noisy_sticky(struct source_model *model, struct reason *why)
{
	return noisy_bit(model, 10, 100, why);
}

static enum status noisy_faint(struct source_model *model, struct reason *why)
{
	return noisy_bit(model, 50, 20, why);
}

static enum status noisy_long(struct source_model *model, struct reason *why)
{
	return noisy_bit(model, 3, 200, why);
}

/* One state is nearly always right, the other often wrong. */
static enum status noisy_uneven(struct source_model *model, struct reason *why)
{
	const uint32_t moves[4] = {95, 5, 15, 85};
	const uint32_t emits[4] = {90, 10, 35, 65};

	return source_model_init_hidden(model, 2, 2, moves, emits, why);
}

static enum status hidden_letters(struct source_model *model,
				  struct reason *why)
{
	const uint32_t moves[9] = {80, 15, 5, 5, 80, 15, 15, 5, 80};
	const uint32_t emits[12] = {70, 10, 10, 10, 10, 70,
				    10, 10, 10, 10, 40, 40};

	return source_model_init_hidden(model, 3, 4, moves, emits, why);
}

/* Three states; each is Zipf-like over its own order of the bytes. */
static enum status hidden_bytes(struct source_model *model, struct reason *why)
{
	const uint32_t moves[9] = {90, 8, 2, 3, 92, 5, 6, 4, 90};
	uint32_t emits[3 * 256];

	for (uint32_t s = 0; s < 3; s++) {
		for (uint32_t r = 0; r < 256; r++)
			emits[s * 256 + (r * (4 * s + 5) + 80 * s) % 256] =
				(1 << 20) / (r + 1);
	}
	return source_model_init_hidden(model, 3, 256, moves, emits, why);
}

/* Four letters; regimes of two thousand symbols, one of them livelier. */
static enum status regimes_letters(struct source_model *model,
				   struct reason *why)
{
	const uint32_t moves[4] = {1999, 1, 1, 1999};
	const uint32_t weights[32] = {
		85, 5,  5,  5,  5,  85, 5,  5,  5,  5,  85, 5,  5,  5,  5,  85,
		40, 20, 20, 20, 20, 40, 20, 20, 20, 20, 40, 20, 20, 20, 20, 40,
	};

	return source_model_init_switching(model, 2, 4, moves, weights, why);
}

/* Independent bits, mostly zeros or hardly so, in turns of a thousand. */
static enum status regimes_bits(struct source_model *model, struct reason *why)
{
	const uint32_t moves[4] = {999, 1, 1, 999};
	const uint32_t emits[4] = {95, 5, 60, 40};

	return source_model_init_hidden(model, 2, 2, moves, emits, why);
}

const struct frozen_source frozen_hidden[] = {
	{"noisy-fast", "bit that changes in .1, inverted in .1", FROZEN_HIDDEN,
	 0, 2, noisy_fast},
	{"noisy-sticky", "bit that changes in .01, inverted in .1",
	 FROZEN_HIDDEN, 0, 2, noisy_sticky},
	{"noisy-faint", "bit that changes in .05, inverted in .02",
	 FROZEN_HIDDEN, 0, 2, noisy_faint},
	{"noisy-long", "bit that changes in .003, inverted in .2",
	 FROZEN_HIDDEN, 0, 2, noisy_long},
	{"noisy-uneven", "two states of uneven noise", FROZEN_HIDDEN, 0, 2,
	 noisy_uneven},
	{"hidden-letters", "three states, four letters", FROZEN_HIDDEN, 0, 4,
	 hidden_letters},
	{"hidden-bytes", "three states, 256 symbols", FROZEN_HIDDEN, 0, 256,
	 hidden_bytes},
	{"regimes-letters", "two chains over four letters take turns of 2000",
	 FROZEN_SWITCHING, 0, 4, regimes_letters},
	{"regimes-bits", "two kinds of bits take turns of 1000",
	 FROZEN_SWITCHING, 0, 2, regimes_bits},
	{.name = NULL},
};
