#include "estimate/ngram_drift.h"
#include "estimate/ngram_walk.h"
#include "estimate/rows.h"

#include <assert.h>

/* What one measurement holds. */
struct ngram {
	struct count_logs *logs;
	struct gram_tally tally;
	struct cuts fine; /* of the losses; parts to a block */
	size_t parts;
	struct block_losses losses;
	wide_int plugin_q32[FINDING_ORDERS_MAX];
};

static void ngram_release(struct ngram *ngram)
{
	block_losses_release(&ngram->losses);
	cuts_release(&ngram->fine);
	gram_tally_release(&ngram->tally);
	memory_free(ngram->logs);
}

static MUST_USE enum status ngram_init(struct ngram *ngram,
				       const struct estimate_input *input)
{
	TRY(count_logs_table(&ngram->logs));
	TRY(gram_tally_init(&ngram->tally, ngram->logs, input->orders));
	if (input->cuts->blocks == 0)
		return STATUS_OK;
	ngram->parts = drift_parts(input->sequence, input->cuts);
	TRY(drift_cuts_init(input->cuts, ngram->parts, &ngram->fine));
	return block_losses_init(&ngram->losses, input->suffix, &ngram->fine,
				 ngram->logs, input->orders);
}

/* Block bits of an order: the sums of their parts. */
static MUST_USE enum status fill_blocks(const struct ngram *ngram,
					const int64_t *sum_q32,
					struct costs *costs)
{
	size_t blocks = ngram->fine.blocks / ngram->parts;
	int64_t *block_q32;

	TRY(costs_init(costs, blocks));
	TRY(memory_new_zeroed(blocks, sizeof(*block_q32), &block_q32));
	for (size_t i = 0; i < ngram->fine.blocks; i++)
		block_q32[i / ngram->parts] += sum_q32[i];
	costs_set_q32(costs, block_q32);
	memory_free(block_q32);
	return STATUS_OK;
}

/* The finer series is not kept: only how it hangs together. */
static MUST_USE enum status fill_notes(const struct ngram *ngram,
				       struct findings *findings)
{
	if (!ngram->losses.sum_q32 || ngram->parts < 2)
		return STATUS_OK;
	drift_note_parts(findings, ngram->fine.blocks);
	for (size_t i = 0; i < findings->series_count; i++) {
		int64_t ppm;

		TRY(drift_lag1_ppm(
			&ngram->fine,
			ngram->losses.sum_q32 + i * ngram->fine.blocks, &ppm));
		drift_note(findings, (unsigned)i + 1, ppm);
	}
	return STATUS_OK;
}

/*
 * n h_k = (sum c log2 c at order k - 1) - (the same at order k), where the gram
 * of no symbols was seen n times. The block bits add up to it exactly.
 */
static MUST_USE enum status fill_series(const struct ngram *ngram, size_t n,
					struct findings *findings)
{
	const struct block_losses *losses = &ngram->losses;
	wide_int shorter_q32 = (wide_int)n * (wide_int)log2_q32(n);

	for (size_t i = 0; i < findings->series_count; i++) {
		struct series *series = &findings->series[i];

		series->order = (unsigned)i + 1;
		if (losses->sum_q32)
			TRY(fill_blocks(
				ngram, losses->sum_q32 + i * ngram->fine.blocks,
				&series->costs));
		series->costs.headline_q16 =
			q16_from_q32(shorter_q32 - ngram->plugin_q32[i]);
		shorter_q32 = ngram->plugin_q32[i];
	}
	return fill_notes(ngram, findings);
}

static MUST_USE enum status count(struct ngram *ngram,
				  const struct estimate_input *input,
				  struct findings *findings)
{
	struct findings made;
	enum status status;

	TRY(ngram_init(ngram, input));
	ngram_walk(input->suffix, &ngram->tally,
		   ngram->losses.sum_q32 ? &ngram->losses : NULL);
	TRY(findings_init(&made, input->orders, input->orders));
	gram_tally_evaluate(&ngram->tally, input->suffix->n, made.orders,
			    ngram->plugin_q32);
	status = fill_series(ngram, input->suffix->n, &made);
	if (status == STATUS_OK)
		*findings = made;
	else
		findings_release(&made);
	return status;
}

static enum status ngram_measure(const struct estimate_input *input,
				 struct findings *findings, struct reason *why)
{
	struct ngram ngram = {0};
	enum status status;

	assert(input->suffix && input->suffix->wrap >= input->orders);
	assert(input->orders >= 1 && input->orders <= FINDING_ORDERS_MAX);
	status = count(&ngram, input, findings);
	ngram_release(&ngram);
	if (status != STATUS_OK)
		return reason_give(why, status,
				   "out of memory: counting the grams of %zu "
				   "symbols needs about %zu bytes",
				   input->suffix->n, input->suffix->n * 3);
	return STATUS_OK;
}

const struct estimator estimator_ngram = {
	.name = "ngram",
	.summary = "entropy of the grams of every order, from cyclic counts",
	.source = "Shannon 1948; Grassberger 2003; Chao, Wang, Jost 2013",
	.leans = LEANS_NONE,
	.needs_suffix = true,
	.reads_words = true,
	.work = 0.2,
	.measure = ngram_measure,
};
