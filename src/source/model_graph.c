/* Inits of constrained sources: largest entropy on the paths of a graph. */
#include "base/memory.h"
#include "source/model_build.h"

#include <math.h>

/* Probabilities are rounded to multiples of this. */
#define WEIGHT_ONE 0x1p31

/* Iterations of the power method; each of the known constraints needs < 2000.
 */
#define POWER_STEPS_MAX 200000

/*
 * One step of the power method with (A + I) / 2, which has the eigenvectors of
 * the adjacency matrix A but no second eigenvalue of the same size. Scales to
 * largest entry 1; returns the largest change.
 */
static double power_step(uint32_t states, uint32_t alphabet,
			 const uint32_t *next, double *v, double *after)
{
	double largest = 0, change = 0;

	for (uint32_t i = 0; i < states; i++) {
		after[i] = v[i];
		for (uint32_t x = 0; x < alphabet; x++) {
			uint32_t to = next[(size_t)i * alphabet + x];

			if (to != MODEL_NEVER)
				after[i] += v[to];
		}
		largest = fmax(largest, after[i]);
	}
	for (uint32_t i = 0; i < states; i++) {
		change = fmax(change, fabs(after[i] / largest - v[i]));
		v[i] = after[i] / largest;
	}
	return change;
}

/*
 * Parry 1964: along an edge from i to j the probability is v_j / (lambda v_i),
 * v the right eigenvector of the largest eigenvalue lambda, which is the sum of
 * v_j over the edges of i, over v_i.
 */
static enum status parry_rows(struct source_model *model, const uint32_t *next,
			      const double *v)
{
	static const uint32_t stay = 1;

	TRY(model_moves(model, &stay));
	for (uint32_t i = 0; i < model->contexts; i++) {
		const uint32_t *row = next + (size_t)i * model->alphabet;
		double sum = 0;

		model_row_open(model, i);
		for (uint32_t x = 0; x < model->alphabet; x++)
			sum += row[x] == MODEL_NEVER ? 0 : v[row[x]];
		for (uint32_t x = 0; x < model->alphabet; x++) {
			double p = row[x] == MODEL_NEVER ? 0 : v[row[x]] / sum;

			TRY(model_edge_add(model, i, (uint8_t)x,
					   (uint32_t)(p * WEIGHT_ONE + .5),
					   row[x]));
		}
	}
	return STATUS_OK;
}

static enum status graph_rows(struct source_model *model, const uint32_t *next,
			      struct reason *why)
{
	uint32_t states = model->contexts;
	enum status status;
	double *v;

	if (memory_new(2 * (size_t)states, sizeof(*v), &v))
		return reason_give(why, STATUS_NO_MEMORY,
				   "no memory for %u states", states);
	for (uint32_t i = 0; i < states; i++)
		v[i] = 1;
	for (unsigned step = 0; step < POWER_STEPS_MAX; step++) {
		if (power_step(states, model->alphabet, next, v, v + states) <
		    1e-15)
			break;
	}
	status = parry_rows(model, next, v);
	memory_free(v);
	return status;
}

enum status source_model_init_graph(struct source_model *model, uint32_t states,
				    uint32_t alphabet, const uint32_t *next,
				    struct reason *why)
{
	TRY(model_begin(model, 1, states, alphabet, (size_t)states * alphabet,
			why));
	return model_close(model, graph_rows(model, next, why), why);
}

#define RUN_MAX 62

enum status source_model_init_runs(struct source_model *model, uint32_t d,
				   uint32_t k, struct reason *why)
{
	uint32_t next[2 * (RUN_MAX + 1)];
	/* The state is the number of zeros so far; past d, it no longer
	 * matters without an upper limit. */
	uint32_t last = k == MODEL_NEVER ? d : k;

	if (k <= d || last > RUN_MAX) {
		*model = (struct source_model){0};
		return reason_give(why, STATUS_BAD_INPUT,
				   "runs of %u to %u zeros: the first must be "
				   "less, the second at most %d or without "
				   "limit",
				   d, k, RUN_MAX);
	}
	for (uint32_t i = 0; i <= last; i++) {
		next[2 * i] = i < last           ? i + 1
			      : k == MODEL_NEVER ? i
						 : MODEL_NEVER;
		next[2 * i + 1] = i < d ? MODEL_NEVER : 0;
	}
	return source_model_init_graph(model, last + 1, 2, next, why);
}
