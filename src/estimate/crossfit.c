#include "estimate/crossfit_level.h"
#include "estimate/crossfit_share.h"
#include "estimate/rows.h"

#include "base/memory.h"

#include <assert.h>

/*
 * After so many orders in a row that cost more than the one before, no further
 * one is made: the least lies behind, and the orders say how many there are.
 */
#define RISES_MAX 4

struct crossfit {
	const struct estimate_input *input;
	struct folds folds;
	struct quick_log *log;
	uint64_t *shares;   /* owned; of n symbols */
	int64_t *block_q32; /* owned; losses of one order by block */
	size_t *dropped;    /* owned; symbols without a gram, by block */
};

/* The losses of one order. */
struct losses {
	wide_int total_q32;
	size_t kept; /* symbols whose gram lies within a fold */
};

static void crossfit_release(struct crossfit *fit)
{
	memory_free(fit->log);
	memory_free(fit->shares);
	memory_free(fit->block_q32);
	memory_free(fit->dropped);
}

static MUST_USE enum status crossfit_init(struct crossfit *fit,
					  const struct estimate_input *input)
{
	const struct sequence *sequence = input->sequence;
	size_t blocks = input->cuts->blocks;

	fit->input = input;
	folds_init(&fit->folds, sequence->n);
	TRY(quick_log_new(&fit->log));
	TRY(memory_new(sequence->n, sizeof(*fit->shares), &fit->shares));
	TRY(memory_new(blocks, sizeof(*fit->block_q32), &fit->block_q32));
	TRY(memory_new(blocks, sizeof(*fit->dropped), &fit->dropped));
	for (size_t t = 0; t < sequence->n; t++)
		fit->shares[t] = share_of_one_in(sequence->alphabet);
	return STATUS_OK;
}

/* Adds the losses of the symbols from … to-1, which lie in one fold. */
static void add_span(const struct crossfit *fit, unsigned k, size_t from,
		     size_t to, struct losses *losses)
{
	size_t first, fold = 0;
	uint64_t sum = 0;

	while (from >= fit->folds.edge[fold + 1])
		fold++;
	first = fit->folds.edge[fold] + k - 1;
	first = first < from ? from : first;
	first = first > to ? to : first;
	for (size_t t = first; t < to; t++)
		sum += share_loss_q32(fit->log, fit->shares[t]);
	losses->total_q32 += (wide_int)sum;
	losses->kept += to - first;
}

/* The losses of the symbols from … to-1. */
static struct losses add_range(const struct crossfit *fit, unsigned k,
			       size_t from, size_t to)
{
	struct losses losses = {0};

	for (unsigned f = 0; f < FOLDS; f++) {
		size_t begin = fit->folds.edge[f], end = fit->folds.edge[f + 1];

		begin = begin < from ? from : begin;
		end = end > to ? to : end;
		/* the sum of so many stays within 64 bits: 2^20 2^10 2^32 */
		for (size_t next; begin < end; begin = next) {
			next = end - begin > 1 << 20 ? begin + (1 << 20) : end;
			add_span(fit, k, begin, next, &losses);
		}
	}
	return losses;
}

static struct losses add_up(struct crossfit *fit, unsigned k)
{
	const struct cuts *cuts = fit->input->cuts;
	struct losses all = {0};

	if (!cuts->blocks)
		return add_range(fit, k, 0, fit->input->sequence->n);
	for (size_t i = 0; i < cuts->blocks; i++) {
		size_t from = cuts->symbol[i], to = cuts->symbol[i + 1];
		struct losses block = add_range(fit, k, from, to);

		fit->block_q32[i] = (int64_t)block.total_q32;
		fit->dropped[i] = to - from - block.kept;
		all.total_q32 += block.total_q32;
		all.kept += block.kept;
	}
	return all;
}

/* Dropped symbols count at the mean: L + dropped L / kept = n XF in all. */
static MUST_USE enum status fill_series(const struct crossfit *fit, unsigned k,
					const struct losses *losses,
					struct series *series)
{
	size_t blocks = fit->input->cuts->blocks, n = fit->input->sequence->n;
	wide_int kept = (wide_int)losses->kept, sum_q32 = 0, dropped = 0;
	int64_t before = 0;

	series->order = k;
	TRY(costs_init(&series->costs, blocks));
	series->costs.headline_q16 =
		q16_from_q32(losses->total_q32 +
			     ((wide_int)n - kept) * losses->total_q32 / kept);
	for (size_t i = 0; i < blocks; i++) {
		int64_t now;

		sum_q32 += fit->block_q32[i];
		dropped += (wide_int)fit->dropped[i];
		now = q16_from_q32(sum_q32 +
				   dropped * losses->total_q32 / kept);
		series->costs.block_q16[i] = now - before;
		before = now;
	}
	return STATUS_OK;
}

/* Whether the mean is above that of the order before. */
static int rose(const struct losses *now, const struct losses *before)
{
	return now->total_q32 * (wide_int)before->kept >
	       before->total_q32 * (wide_int)now->kept;
}

/* Orders 1, 2, … into findings until one is the last. */
static MUST_USE enum status fit_orders(struct crossfit *fit,
				       struct findings *findings)
{
	struct losses before = {0};
	unsigned rises = 0, orders = (unsigned)findings->series_count;

	findings->series_count = 0;
	for (unsigned k = 1; k <= orders && rises < RISES_MAX; k++) {
		struct losses now;

		crossfit_level(fit->input->suffix, &fit->folds, k, fit->shares);
		now = add_up(fit, k);
		if (!now.kept)
			return STATUS_OK;
		TRY(fill_series(fit, k, &now, &findings->series[k - 1]));
		findings->series_count = k;
		rises = k > 1 && rose(&now, &before) ? rises + 1 : 0;
		before = now;
	}
	return STATUS_OK;
}

static MUST_USE enum status fit_into(struct crossfit *fit,
				     const struct estimate_input *input,
				     struct findings *findings)
{
	struct findings made;
	enum status status;

	TRY(crossfit_init(fit, input));
	TRY(findings_init(&made, input->orders, 0));
	status = fit_orders(fit, &made);
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
	struct crossfit fit = {0};
	enum status status;

	assert(input->suffix && input->suffix->wrap >= input->orders);
	assert(input->orders >= 1 && input->orders <= FINDING_ORDERS_MAX);
	status = fit_into(&fit, input, findings);
	crossfit_release(&fit);
	if (status != STATUS_OK)
		return reason_give(why, status,
				   "out of memory: cross-fitting %zu symbols "
				   "needs about %zu bytes",
				   n, n * sizeof(*fit.shares));
	return STATUS_OK;
}

const struct estimator estimator_crossfit = {
	.name = "crossfit",
	.summary = "conditional entropy of every order by eight-fold "
		   "cross-fitting, interpolated over orders",
	.source = "Stone 1974; Witten and Bell 1991",
	.leans = LEANS_ABOVE,
	.needs_suffix = true,
	.reads_words = true,
	.work = 0.4,
	.measure = crossfit_measure,
};
