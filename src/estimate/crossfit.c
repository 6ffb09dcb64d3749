#include "estimate/crossfit_folds.h"
#include "estimate/crossfit_share.h"
#include "estimate/rows.h"

#include <assert.h>

/* Eight folds of eight symbols: fewer say nothing. */
#define SYMBOLS_MIN 64
/* Orders after which a mean that only rises is not followed further. */
#define RISES_MAX 4

/* What one measurement holds. */
struct crossfit {
	struct crossfit_folds folds;
	struct quick_log2 *logs;
	const struct cuts *cuts; /* borrowed */
	size_t parts;            /* blocks, or 1 for the whole */
	/* Owned; of the present order, by part: bits of the symbols kept, and
	 * how many are not kept. */
	wide_int *sum_q32;
	size_t *dropped;
};

static void crossfit_release(struct crossfit *held)
{
	crossfit_folds_release(&held->folds);
	memory_free(held->logs);
	memory_free(held->sum_q32);
	memory_free(held->dropped);
}

static MUST_USE enum status crossfit_init(struct crossfit *held,
					  const struct estimate_input *input)
{
	held->cuts = input->cuts;
	held->parts = input->cuts->blocks ? input->cuts->blocks : 1;
	TRY(quick_log2_new(&held->logs));
	TRY(memory_new(held->parts, sizeof(*held->sum_q32), &held->sum_q32));
	TRY(memory_new(held->parts, sizeof(*held->dropped), &held->dropped));
	return crossfit_folds_init(&held->folds, input->suffix,
				   input->sequence->alphabet);
}

/* Symbols first … last - 1, as far as fold f keeps them; returns how many. */
static size_t add_fold(const struct crossfit *held, size_t f, size_t first,
		       size_t last, wide_int *sum_q32)
{
	const struct crossfit_folds *folds = &held->folds;
	size_t from = folds->edge[f] + folds->order - 1;
	size_t to = folds->edge[f + 1];

	from = from > first ? from : first;
	to = to < last ? to : last;
	if (from >= to)
		return 0;
	*sum_q32 += share_bits_q32(held->logs, folds->share + from, to - from);
	return to - from;
}

static wide_int add_up(struct crossfit *held)
{
	const struct cuts *cuts = held->cuts;
	size_t n = held->folds.suffix->n;
	wide_int total = 0;

	for (size_t i = 0; i < held->parts; i++) {
		size_t first = cuts->blocks ? cuts->symbol[i] : 0;
		size_t last = cuts->blocks ? cuts->symbol[i + 1] : n;

		held->sum_q32[i] = 0;
		held->dropped[i] = last - first;
		for (size_t f = 0; f < CROSSFIT_FOLDS; f++)
			held->dropped[i] -= add_fold(held, f, first, last,
						     &held->sum_q32[i]);
		total += held->sum_q32[i];
	}
	return total;
}

/*
 * A symbol not kept counts as the mean of the others, so that block bits add
 * up to n times the mean.
 */
static MUST_USE enum status fill_series(const struct crossfit *held,
					wide_int total_q32,
					struct series *series)
{
	wide_int kept = (wide_int)crossfit_folds_kept(&held->folds);
	wide_int running = 0;
	size_t dropped = 0;
	int64_t before = 0;

	series->order = held->folds.order;
	TRY(costs_init(&series->costs, held->cuts->blocks));
	for (size_t i = 0; i < held->parts; i++) {
		int64_t now;

		running += held->sum_q32[i];
		dropped += held->dropped[i];
		now = q16_from_q32(running +
				   total_q32 * (wide_int)dropped / kept);
		if (series->costs.blocks)
			series->costs.block_q16[i] = now - before;
		before = now;
	}
	series->costs.headline_q16 = before;
	return STATUS_OK;
}

/* Orders 1, 2, … while there are grams and a lower mean may still come. */
static MUST_USE enum status fill(struct crossfit *held, unsigned orders,
				 struct findings *findings)
{
	unsigned rises = 0;
	int64_t before_q16 = 0;

	findings->series_count = 0;
	while (findings->series_count < orders && rises < RISES_MAX) {
		struct series *series =
			&findings->series[findings->series_count];

		crossfit_folds_lengthen(&held->folds);
		if (crossfit_folds_kept(&held->folds) == 0)
			break;
		TRY(fill_series(held, add_up(held), series));
		if (series->costs.headline_q16 <= before_q16)
			rises = 0;
		else if (findings->series_count)
			rises++;
		before_q16 = series->costs.headline_q16;
		findings->series_count++;
	}
	return STATUS_OK;
}

static MUST_USE enum status measure(struct crossfit *held,
				    const struct estimate_input *input,
				    struct findings *findings)
{
	struct findings made;
	enum status status;

	TRY(crossfit_init(held, input));
	TRY(findings_init(&made, input->orders, 0));
	status = fill(held, input->orders, &made);
	if (status == STATUS_OK)
		*findings = made;
	else
		findings_release(&made);
	return status;
}

static enum status crossfit_measure(const struct estimate_input *input,
				    struct findings *findings,
				    struct reason *why)
{
	size_t n = input->sequence->n;
	struct crossfit held = {.parts = 0};
	enum status status;

	assert(input->suffix && input->suffix->wrap >= input->orders);
	assert(input->orders >= 1 && input->orders <= FINDING_ORDERS_MAX);
	if (n < SYMBOLS_MIN)
		return reason_give(why, STATUS_TOO_SHORT,
				   "%zu symbols; eight folds need at least %d",
				   n, SYMBOLS_MIN);
	status = measure(&held, input, findings);
	crossfit_release(&held);
	if (status != STATUS_OK)
		return reason_give(why, status,
				   "out of memory: cross-fitting %zu symbols "
				   "needs about %zu bytes",
				   n, n * 9);
	return STATUS_OK;
}

/* The mean may have risen four orders in a row: longer grams have no series. */
const struct estimator estimator_crossfit = {
	.name = "crossfit",
	.summary = "log-loss of every order, each eighth by the counts of the "
		   "other seven",
	.source = "Stone 1974; Witten, Bell 1991",
	.leans = LEANS_ABOVE,
	.needs_suffix = true,
	.reads_words = true,
	.work = 0.2,
	.measure = crossfit_measure,
};
