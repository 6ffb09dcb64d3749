/* Frozen sources of finite memory. */
#include "base/memory.h"
#include "base/random.h"
#include "source/frozen_rows.h"
#include "source/source_rows.h"

#include <string.h>

static enum status zipf_bytes(struct source_model *model, struct reason *why)
{
	uint32_t weights[256];

	for (uint32_t r = 0; r < 256; r++)
		weights[(r * 167 + 101) % 256] = (1 << 20) / (r + 1);
	return source_model_init_iid(model, 256, weights, why);
}

static enum status uniform_201(struct source_model *model, struct reason *why)
{
	uint32_t weights[201];

	for (uint32_t i = 0; i < 201; i++)
		weights[i] = 1;
	return source_model_init_iid(model, 201, weights, why);
}

static enum status sticky_bit(struct source_model *model, struct reason *why)
{
	const uint32_t weights[4] = {99, 1, 1, 99};

	return source_model_init_markov(model, 2, 1, weights, why);
}

static enum status two_state(struct source_model *model, struct reason *why)
{
	const uint32_t weights[4] = {9, 1, 3, 7};

	return source_model_init_markov(model, 2, 1, weights, why);
}

/* Shannon 1948: letters A, B, C and their digrams. */
static enum status shannon_digrams(struct source_model *model,
				   struct reason *why)
{
	const uint32_t weights[9] = {0, 8, 2, 5, 5, 0, 5, 4, 1};

	return source_model_init_markov(model, 3, 1, weights, why);
}

static enum status order_3_bit(struct source_model *model, struct reason *why)
{
	/* Each of eight contexts leans its own way. */
	const uint32_t weights[16] = {9, 1, 4, 6, 2, 8, 7, 3,
				      3, 7, 5, 5, 8, 2, 1, 9};

	return source_model_init_markov(model, 2, 3, weights, why);
}

/* After any two of 16 symbols, 4 successors of random weights. */
static enum status sparse_order_2(struct source_model *model,
				  struct reason *why)
{
	struct random_stream random;
	uint32_t weights[16 * 16 * 16] = {0};

	random_init(&random, 1, random_name("sparse-order-2"));
	for (uint32_t row = 0; row < 256; row++) {
		for (unsigned i = 0; i < 4; i++)
			weights[row * 16 + random_below(&random, 16)] +=
				1 + random_below(&random, 100);
	}
	return source_model_init_markov(model, 16, 2, weights, why);
}

/* 32 symbols; every row is Zipf-like over its own order of them. */
static enum status chain_32(struct source_model *model, struct reason *why)
{
	uint32_t weights[32 * 32];

	for (uint32_t a = 0; a < 32; a++) {
		for (uint32_t r = 0; r < 32; r++)
			weights[a * 32 + (r * (2 * a + 1) + 7 * a) % 32] =
				55440 / (r + 1);
	}
	return source_model_init_markov(model, 32, 1, weights, why);
}

static enum status golden_mean(struct source_model *model, struct reason *why)
{
	return source_model_init_runs(model, 1, MODEL_NEVER, why);
}

static enum status runs_1_3(struct source_model *model, struct reason *why)
{
	return source_model_init_runs(model, 1, 3, why);
}

static enum status runs_2_7(struct source_model *model, struct reason *why)
{
	return source_model_init_runs(model, 2, 7, why);
}

enum { TRAINING_BYTES = 1 << 18 };

static enum status duty_chain(struct source_model *model, struct reason *why)
{
	enum status status;
	uint8_t *bytes;

	*model = (struct source_model){0};
	if (memory_new(TRAINING_BYTES, 1, &bytes))
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	source_fill(&source_dutylog, TRAINING_BYTES, 1, bytes);
	status = source_model_init_trained(model, bytes, TRAINING_BYTES, why);
	memory_free(bytes);
	return status;
}

const struct frozen_source frozen_finite[] = {
	{"zipf-bytes", "independent, 256 symbols, Zipf-like", FROZEN_FINITE, 0,
	 256, zipf_bytes},
	{"uniform-201", "independent, 201 symbols alike", FROZEN_FINITE, 0, 201,
	 uniform_201},
	{"sticky-bit", "binary chain, changes in .01", FROZEN_FINITE, 1, 2,
	 sticky_bit},
	{"two-state", "binary chain (.1, .3)", FROZEN_FINITE, 1, 2, two_state},
	{"shannon-digrams", "three letters of Shannon 1948", FROZEN_FINITE, 1,
	 3, shannon_digrams},
	{"chain-32", "32 symbols, Zipf-like rows", FROZEN_FINITE, 1, 32,
	 chain_32},
	{"golden-mean", "no two ones in a row", FROZEN_FINITE, 1, 2,
	 golden_mean},
	{"sparse-order-2", "16 symbols, up to 4 successors a pair",
	 FROZEN_FINITE, 2, 16, sparse_order_2},
	{"duty-chain", "order-2 chain of the duty log", FROZEN_FINITE, 2, 256,
	 duty_chain},
	{"order-3-bit", "binary chain of order 3", FROZEN_FINITE, 3, 2,
	 order_3_bit},
	{"runs-1-3", "1 to 3 zeros between ones", FROZEN_FINITE, 3, 2,
	 runs_1_3},
	{"runs-2-7", "2 to 7 zeros between ones", FROZEN_FINITE, 7, 2,
	 runs_2_7},
	{.name = NULL},
};
