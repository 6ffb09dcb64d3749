/* Inits of chains: independent, Markov, hidden, switching. */
#include "source/model_build.h"

/* Contexts past this many need more memory than a chain is worth. */
#define CONTEXTS_MAX (1U << 20)

enum status source_model_init_iid(struct source_model *model, uint32_t alphabet,
				  const uint32_t *weights, struct reason *why)
{
	return source_model_init_markov(model, alphabet, 0, weights, why);
}

/* The rows of a regime: contexts are the last symbols, read as digits. */
static enum status chain_rows(struct source_model *model, uint32_t regime,
			      const uint32_t *weights)
{
	for (uint32_t c = 0; c < model->contexts; c++) {
		uint32_t row = regime * model->contexts + c;

		model_row_open(model, row);
		for (uint32_t x = 0; x < model->alphabet; x++) {
			uint64_t digits = (uint64_t)c * model->alphabet + x;

			TRY(model_edge_add(
				model, row, (uint8_t)x, weights[digits],
				(uint32_t)(digits % model->contexts)));
		}
	}
	return STATUS_OK;
}

enum status source_model_init_markov(struct source_model *model,
				     uint32_t alphabet, unsigned order,
				     const uint32_t *weights,
				     struct reason *why)
{
	static const uint32_t stay = 1;
	uint64_t contexts = 1;
	enum status status;

	for (unsigned i = 0; i < order && contexts <= CONTEXTS_MAX; i++)
		contexts *= alphabet;
	if (contexts > CONTEXTS_MAX) {
		*model = (struct source_model){0};
		return reason_give(why, STATUS_BAD_INPUT,
				   "order %u over %u symbols has more than %u "
				   "contexts",
				   order, alphabet, CONTEXTS_MAX);
	}
	TRY(model_begin(model, 1, (uint32_t)contexts, alphabet,
			(size_t)contexts * alphabet, why));
	status = model_moves(model, &stay);
	if (status == STATUS_OK)
		status = chain_rows(model, 0, weights);
	return model_close(model, status, why);
}

static enum status regime_rows(struct source_model *model,
			       const uint32_t *moves, const uint32_t *weights)
{
	size_t each = (size_t)model->contexts * model->alphabet;

	TRY(model_moves(model, moves));
	for (uint32_t r = 0; r < model->regimes; r++)
		TRY(chain_rows(model, r, weights + r * each));
	return STATUS_OK;
}

enum status source_model_init_hidden(struct source_model *model,
				     uint32_t states, uint32_t alphabet,
				     const uint32_t *moves,
				     const uint32_t *emits, struct reason *why)
{
	TRY(model_begin(model, states, 1, alphabet, (size_t)states * alphabet,
			why));
	return model_close(model, regime_rows(model, moves, emits), why);
}

enum status source_model_init_switching(struct source_model *model,
					uint32_t regimes, uint32_t alphabet,
					const uint32_t *moves,
					const uint32_t *weights,
					struct reason *why)
{
	TRY(model_begin(model, regimes, alphabet, alphabet,
			(size_t)regimes * alphabet * alphabet, why));
	return model_close(model, regime_rows(model, moves, weights), why);
}
