#include "source/emissions.h"

#include "base/memory.h"
#include "source/model_build.h"

static void row_spread(struct emissions *out, const struct source_model *model,
		       uint32_t row)
{
	const struct model_row *at = &model->rows[row];
	double total = (double)model_total(model, row);
	size_t next = (size_t)(row % model->contexts) * model->alphabet;

	for (uint32_t e = 0; e < at->count; e++) {
		const struct model_edge *edge = &model->edges[at->first + e];

		out->p[(size_t)row * model->alphabet + edge->symbol] =
			(double)model_weight(model, e, at) / total;
		out->next[next + edge->symbol] = edge->next;
	}
}

enum status emissions_init(struct emissions *out,
			   const struct source_model *model)
{
	size_t rows = (size_t)model->regimes * model->contexts;

	*out = (struct emissions){
		.regimes = model->regimes,
		.contexts = model->contexts,
		.alphabet = model->alphabet,
	};
	if (memory_new_zeroed(rows * model->alphabet, sizeof(*out->p),
			      &out->p) ||
	    memory_new_zeroed((size_t)model->contexts * model->alphabet,
			      sizeof(*out->next), &out->next)) {
		emissions_release(out);
		return STATUS_NO_MEMORY;
	}
	for (uint32_t i = 0; i < rows; i++)
		row_spread(out, model, i);
	for (uint32_t r = 0; r < model->regimes; r++) {
		for (uint32_t s = 0; s < model->regimes; s++)
			out->moves[r][s] = model_move(model, r, s);
	}
	return STATUS_OK;
}

void emissions_release(struct emissions *emissions)
{
	memory_free(emissions->p);
	memory_free(emissions->next);
	*emissions = (struct emissions){0};
}

double emissions_see(const struct emissions *emissions, uint32_t context,
		     uint32_t x, const double *belief, double *joint)
{
	double sum = 0;

	for (uint32_t r = 0; r < emissions->regimes; r++) {
		size_t row = (size_t)r * emissions->contexts + context;

		joint[r] =
			belief[r] * emissions->p[row * emissions->alphabet + x];
		sum += joint[r];
	}
	return sum;
}

void emissions_move(const struct emissions *emissions, const double *belief,
		    double *after)
{
	for (uint32_t s = 0; s < emissions->regimes; s++) {
		after[s] = 0;
		for (uint32_t r = 0; r < emissions->regimes; r++)
			after[s] += belief[r] * emissions->moves[r][s];
	}
}
