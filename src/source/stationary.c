#include "source/stationary.h"

#include "base/memory.h"
#include "source/model_build.h"

#include <math.h>
#include <string.h>

/* Adds row i of the transition matrix, times scale, to out. */
static void transitions_add(const struct source_model *model, uint32_t row,
			    double scale, double *out)
{
	const struct model_row *at = &model->rows[row];
	uint32_t regime = row / model->contexts;
	double total = (double)model_total(model, row);

	for (uint32_t e = 0; e < at->count; e++) {
		double p = (double)model_weight(model, e, at) / total;
		uint32_t next = model->edges[at->first + e].next;

		for (uint32_t r = 0; r < model->regimes; r++)
			out[r * model->contexts + next] +=
				scale * p * model_move(model, regime, r);
	}
}

/* Marks every row that leads to (or, backwards, is led to from) the start. */
static void reach(const double *p, uint32_t n, uint32_t start, bool backwards,
		  uint8_t *marked, uint32_t *stack)
{
	uint32_t held = 1;

	memset(marked, 0, n);
	marked[start] = 1;
	stack[0] = start;
	while (held) {
		uint32_t i = stack[--held];

		for (uint32_t j = 0; j < n; j++) {
			double way = backwards ? p[(size_t)j * n + i]
					       : p[(size_t)i * n + j];

			if (way > 0 && !marked[j]) {
				marked[j] = 1;
				stack[held++] = j;
			}
		}
	}
}

/*
 * The members of the closed class, in stack; their number, or 0 where some row
 * does not lead to it, which means that there is a second one.
 */
static uint32_t closed_class(const double *p, uint32_t n, uint8_t *marks,
			     uint32_t *stack)
{
	uint8_t *onward = marks, *back = marks + n;
	uint32_t start = 0, count = 0, i;

	for (;;) {
		reach(p, n, start, false, onward, stack);
		reach(p, n, start, true, back, stack);
		for (i = 0; i < n && !(onward[i] && !back[i]); i++)
			;
		if (i == n)
			break;
		start = i; /* a row from which there is no way back */
	}
	for (i = 0; i < n; i++) {
		if (!back[i])
			return 0;
		if (onward[i])
			stack[count++] = i;
	}
	return count;
}

/* q: m x m, all of one class; becomes rubbish. */
static void eliminate(double *q, uint32_t m, double *pi)
{
	double sum = 1;

	for (uint32_t k = m - 1; k > 0; k--) {
		double out = 0;

		for (uint32_t j = 0; j < k; j++)
			out += q[(size_t)k * m + j];
		for (uint32_t i = 0; i < k; i++) {
			double share = q[(size_t)i * m + k] / out;

			q[(size_t)i * m + k] = share;
			for (uint32_t j = 0; j < k && share > 0; j++)
				q[(size_t)i * m + j] +=
					share * q[(size_t)k * m + j];
		}
	}
	pi[0] = 1;
	for (uint32_t k = 1; k < m; k++) {
		pi[k] = 0;
		for (uint32_t i = 0; i < k; i++)
			pi[k] += pi[i] * q[(size_t)i * m + k];
		sum += pi[k];
	}
	for (uint32_t k = 0; k < m; k++)
		pi[k] /= sum;
}

static enum status dense(struct source_model *model, double *p, double *pi,
			 uint8_t *marks, uint32_t *members)
{
	uint32_t n = model->regimes * model->contexts, m;

	for (uint32_t i = 0; i < n; i++)
		transitions_add(model, i, 1, p + (size_t)i * n);
	m = closed_class(p, n, marks, members);
	if (!m)
		return STATUS_BAD_INPUT;
	/* Members rise, so that moving rows up never overwrites one to come. */
	for (uint32_t i = 0; i < m; i++) {
		for (uint32_t j = 0; j < m; j++)
			p[(size_t)i * m + j] =
				p[(size_t)members[i] * n + members[j]];
	}
	eliminate(p, m, pi);
	for (uint32_t i = 0; i < m; i++)
		model->stationary[members[i]] = pi[i];
	return STATUS_OK;
}

static enum status dense_find(struct source_model *model, struct reason *why)
{
	size_t n = (size_t)model->regimes * model->contexts;
	double *p = NULL, *pi = NULL;
	uint8_t *marks = NULL;
	uint32_t *members = NULL;
	enum status status = STATUS_NO_MEMORY;

	if (memory_new_zeroed(n * n, sizeof(*p), &p) ||
	    memory_new(n, sizeof(*pi), &pi) || memory_new(2 * n, 1, &marks) ||
	    memory_new(n, sizeof(*members), &members)) {
		reason_give(why, status, "no memory for %zu states", n);
		goto out;
	}
	status = dense(model, p, pi, marks, members);
	if (status != STATUS_OK)
		reason_give(why, status,
			    "the source has more than one closed class of "
			    "states, so its rate depends on where it starts");
out:
	memory_free(p);
	memory_free(pi);
	memory_free(marks);
	memory_free(members);
	return status;
}

/* The law of the row sums, checked. */
static enum status from_totals(struct source_model *model, struct reason *why)
{
	uint32_t n = model->regimes * model->contexts;
	double sum = 0, worst = 0;
	double *after;

	if (memory_new_zeroed(n, sizeof(*after), &after))
		return reason_give(why, STATUS_NO_MEMORY,
				   "no memory for %u states", n);
	for (uint32_t i = 0; i < n; i++)
		sum += (double)model_total(model, i);
	for (uint32_t i = 0; i < n; i++) {
		model->stationary[i] = (double)model_total(model, i) / sum;
		transitions_add(model, i, model->stationary[i], after);
	}
	for (uint32_t i = 0; i < n; i++)
		worst = fmax(worst, fabs(after[i] - model->stationary[i]));
	memory_free(after);
	if (worst > 1e-13)
		return reason_give(why, STATUS_BAD_INPUT,
				   "a source of %u states must have at most %d",
				   n, STATIONARY_DENSE_MAX);
	return STATUS_OK;
}

enum status stationary_find(struct source_model *model, struct reason *why)
{
	if (model->regimes * model->contexts <= STATIONARY_DENSE_MAX)
		return dense_find(model, why);
	return from_totals(model, why);
}
