#include "source/model.h"

#include "base/memory.h"
#include "base/random.h"
#include "source/model_build.h"
#include "source/stationary.h"

enum status model_begin(struct source_model *model, uint32_t regimes,
			uint32_t contexts, uint32_t alphabet, size_t edges,
			struct reason *why)
{
	size_t rows = (size_t)regimes * contexts;

	*model = (struct source_model){
		.regimes = regimes,
		.contexts = contexts,
		.alphabet = alphabet,
		.edge_room = edges,
	};
	if (!regimes || regimes > MODEL_REGIMES_MAX || !contexts || !alphabet ||
	    alphabet > 256)
		return reason_give(why, STATUS_BAD_INPUT,
				   "a source has 1 to %d regimes, a context or "
				   "more and 1 to 256 symbols, not %u, %u, %u",
				   MODEL_REGIMES_MAX, regimes, contexts,
				   alphabet);
	if (memory_new_zeroed(rows, sizeof(*model->rows), &model->rows) ||
	    memory_new_zeroed(edges, sizeof(*model->edges), &model->edges) ||
	    memory_new_zeroed((size_t)regimes * regimes, sizeof(*model->moves),
			      &model->moves) ||
	    memory_new_zeroed(rows, sizeof(*model->stationary),
			      &model->stationary) ||
	    memory_new_zeroed(rows, sizeof(*model->begin), &model->begin)) {
		source_model_release(model);
		return reason_give(why, STATUS_NO_MEMORY,
				   "no memory for a source of %zu edges",
				   edges);
	}
	return STATUS_OK;
}

void model_row_open(struct source_model *model, uint32_t row)
{
	model->rows[row] = (struct model_row){
		.first = (uint32_t)model->edge_count,
	};
}

enum status model_edge_add(struct source_model *model, uint32_t row,
			   uint8_t symbol, uint32_t weight, uint32_t next)
{
	struct model_row *at = &model->rows[row];
	uint32_t before = at->count ? model_total(model, row) : 0;

	if (!weight)
		return STATUS_OK;
	if (weight > UINT32_MAX - before)
		return STATUS_BAD_INPUT;
	model->edges[model->edge_count++] =
		(struct model_edge){before + weight, next, symbol};
	at->count++;
	return STATUS_OK;
}

enum status model_moves(struct source_model *model, const uint32_t *weights)
{
	for (uint32_t r = 0; r < model->regimes; r++) {
		uint32_t total = 0;

		for (uint32_t s = 0; s < model->regimes; s++) {
			size_t at = (size_t)r * model->regimes + s;

			if (weights[at] > UINT32_MAX - total)
				return STATUS_BAD_INPUT;
			total += weights[at];
			model->moves[at] = total;
		}
		if (!total)
			return STATUS_BAD_INPUT;
	}
	return STATUS_OK;
}

static enum status close_rows(struct source_model *model, struct reason *why)
{
	uint32_t rows = model->regimes * model->contexts;
	double sum = 0;

	for (uint32_t i = 0; i < rows; i++) {
		if (!model->rows[i].count)
			return reason_give(why, STATUS_BAD_INPUT,
					   "row %u has no weight", i);
	}
	TRY(stationary_find(model, why));
	for (uint32_t i = 0; i < rows; i++) {
		sum += model->stationary[i];
		/* Rounding may carry the last sums past 1. */
		model->begin[i] =
			sum < 1 ? (uint32_t)(sum * 0x1p32) : UINT32_MAX;
		if (model->stationary[i] > 0)
			model->begin_last = i;
	}
	return STATUS_OK;
}

enum status model_close(struct source_model *model, enum status so_far,
			struct reason *why)
{
	if (so_far == STATUS_BAD_INPUT)
		so_far = reason_give(why, so_far,
				     "the weights of a row must sum to 1 to "
				     "2^32 - 1");
	if (so_far == STATUS_OK)
		so_far = close_rows(model, why);
	if (so_far != STATUS_OK)
		source_model_release(model);
	return so_far;
}

uint32_t model_total(const struct source_model *model, uint32_t row)
{
	const struct model_row *at = &model->rows[row];

	return model->edges[at->first + at->count - 1].cumulative;
}

uint32_t model_weight(const struct source_model *model, uint32_t edge,
		      const struct model_row *row)
{
	const struct model_edge *at = &model->edges[row->first + edge];

	return at->cumulative - (edge ? at[-1].cumulative : 0);
}

double model_move(const struct source_model *model, uint32_t from, uint32_t to)
{
	const uint32_t *row = model->moves + (size_t)from * model->regimes;

	return (double)(row[to] - (to ? row[to - 1] : 0)) /
	       (double)row[model->regimes - 1];
}

void source_model_release(struct source_model *model)
{
	memory_free(model->rows);
	memory_free(model->edges);
	memory_free(model->moves);
	memory_free(model->stationary);
	memory_free(model->begin);
	*model = (struct source_model){0};
}

static const struct model_edge *draw(const struct source_model *model,
				     uint32_t row, struct random_stream *random)
{
	const struct model_row *at = &model->rows[row];
	const struct model_edge *edges = model->edges + at->first;
	uint32_t left = at->count;
	uint32_t point = random_below(random, edges[left - 1].cumulative);

	/* Halving without a branch on the point, which nothing predicts. */
	while (left > 1) {
		uint32_t half = left / 2;

		edges += point >= edges[half - 1].cumulative ? half : 0;
		left -= half;
	}
	return edges;
}

static uint32_t first_row(const struct source_model *model,
			  struct random_stream *random)
{
	uint32_t point = random_u32(random), row = 0;

	while (row < model->begin_last && point >= model->begin[row])
		row++;
	return row;
}

static uint32_t move(const struct source_model *model, uint32_t regime,
		     struct random_stream *random)
{
	const uint32_t *row = model->moves + (size_t)regime * model->regimes;
	uint32_t point = random_below(random, row[model->regimes - 1]);
	uint32_t to = 0;

	while (point >= row[to])
		to++;
	return to;
}

void source_model_make(const struct source_model *model, size_t symbols,
		       uint64_t seed, uint8_t *bytes)
{
	struct random_stream random;
	uint32_t row, context, regime;

	if (model->packed) {
		source_fill(model->packed, symbols, seed, bytes);
		return;
	}
	random_init(&random, seed, random_name("source model"));
	row = first_row(model, &random);
	context = row % model->contexts;
	regime = row / model->contexts;
	for (size_t i = 0; i < symbols; i++) {
		const struct model_edge *edge = draw(
			model, regime * model->contexts + context, &random);

		bytes[i] = edge->symbol;
		context = edge->next;
		if (model->regimes > 1)
			regime = move(model, regime, &random);
	}
}

void source_model_init_packed(struct source_model *model,
			      const struct source *source)
{
	*model = (struct source_model){.packed = source};
}
