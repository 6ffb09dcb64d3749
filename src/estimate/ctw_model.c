#include "estimate/ctw_model.h"

#include <assert.h>

/* Odd multipliers with bits well spread (of SplitMix64, Steele et al. 2014). */
#define SPREAD UINT64_C(0xBF58476D1CE4E5B9)
#define SPREAD_MORE UINT64_C(0x94D049BB133111EB)
#define APART UINT64_C(0x9E3779B97F4A7C15)

enum status ctw_model_init(struct ctw_model *model, unsigned alphabet,
			   unsigned depth, size_t slots_max)
{
	struct ctw_model made = {.alphabet = alphabet};

	assert(alphabet >= 1 && alphabet <= 1u << CTW_DECISIONS_MAX);
	while (1u << made.decisions < alphabet)
		made.decisions++;
	TRY(quick_log2_new(&made.logs));
	if (ctw_tree_init(&made.tree, depth, slots_max) != STATUS_OK) {
		memory_free(made.logs);
		return STATUS_NO_MEMORY;
	}
	*model = made;
	return STATUS_OK;
}

void ctw_model_release(struct ctw_model *model)
{
	ctw_tree_release(&model->tree);
	memory_free(model->logs);
	model->logs = NULL;
}

static uint64_t mix(uint64_t x, uint64_t multiplier)
{
	x *= multiplier;
	return x ^ x >> 32;
}

/* Bit i of the symbol, where it is not the only one possible. */
static bool is_free(const struct ctw_model *model, unsigned symbol, unsigned i)
{
	unsigned upper = (symbol >> (i + 1) << 1 | 1) << i;

	return upper < model->alphabet;
}

/* Names all nodes that the symbol at t will need, and asks for them. */
static void look_ahead(struct ctw_model *model, const uint8_t *symbols,
		       size_t known, size_t t)
{
	unsigned symbol = symbols[t], decisions = model->decisions;
	uint64_t(*names)[CTW_NODES_MAX] = model->names[t & 1];
	uint64_t context = APART;

	for (unsigned d = 0; d <= model->tree.depth; d++) {
		if (d > 0)
			context = mix(
				context + APART +
					(t >= known + d ? symbols[t - d] : 0),
				SPREAD);
		for (unsigned j = 0; j < decisions; j++) {
			/* A one, then the bits above: a number for each. */
			uint64_t prefix =
				(1u << decisions | symbol) >> (decisions - j);

			names[j][d] =
				mix(context + prefix * APART, SPREAD_MORE);
			ctw_tree_ask(&model->tree, names[j][d]);
		}
	}
}

/* Bits of one symbol whose nodes have been named. */
static int64_t code(struct ctw_model *model, unsigned symbol, size_t t)
{
	const uint64_t certain = UINT64_C(1) << 32;
	int64_t bits_q32 = 0;

	for (unsigned j = 0; j < model->decisions; j++) {
		unsigned i = model->decisions - 1 - j;
		bool one = symbol >> i & 1;
		uint64_t p;

		if (!is_free(model, symbol, i))
			continue;
		p = ctw_tree_predict(&model->tree, model->names[t & 1][j]);
		if (!one)
			p = certain - p;
		bits_q32 +=
			32 * BIT_Q32 - (int64_t)quick_log2_q32(model->logs, p);
		ctw_tree_learn(&model->tree, one);
	}
	return bits_q32;
}

wide_int ctw_model_measure_q32(struct ctw_model *model, const uint8_t *symbols,
			       size_t known, size_t first, size_t last)
{
	wide_int bits_q32 = 0;

	if (first < last)
		look_ahead(model, symbols, known, first);
	for (size_t t = first; t < last; t++) {
		if (t + 1 < last)
			look_ahead(model, symbols, known, t + 1);
		bits_q32 += code(model, symbols[t], t);
	}
	return bits_q32;
}
