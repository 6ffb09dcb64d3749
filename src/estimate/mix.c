#include "estimate/rows.h"

#include "predict/plan.h"
#include "predict/predictor.h"

#include "base/memory.h"

/* Runs on to a byte position, starting afresh at every page. */
static wide_int run_to(struct predictor *predictor,
		       const struct estimate_input *input, size_t from,
		       size_t to)
{
	const uint8_t *bytes = input->sequence->canonical;
	size_t page = input->page_bytes;
	wide_int total = 0;

	while (from < to) {
		size_t end = to;

		if (from == 0 || (page && from % page == 0))
			predictor_restart(predictor, bytes + from);
		if (page && (from / page + 1) * page < to)
			end = (from / page + 1) * page;
		total += predictor_measure_q32(predictor, end - from);
		from = end;
	}
	return total;
}

/* The charge for the plan goes to the first block. */
static void measure_blocks(struct predictor *predictor,
			   const struct estimate_input *input,
			   int64_t charge_q32, struct costs *costs)
{
	const struct cuts *cuts = input->cuts;
	wide_int total = charge_q32;
	int64_t before = 0;

	for (size_t i = 0; i < costs->blocks; i++) {
		int64_t now;

		total += run_to(predictor, input, cuts->byte[i],
				cuts->byte[i + 1]);
		now = q16_from_q32(total);
		costs->block_q16[i] = now - before;
		before = now;
	}
	if (!costs->blocks)
		total += run_to(predictor, input, 0,
				input->sequence->canonical_bytes);
	costs->headline_q16 = q16_from_q32(total);
}

static MUST_USE enum status measure(const struct estimate_input *input,
				    enum predict_strength strength,
				    struct costs *costs,
				    struct predict_plan *plan)
{
	const struct sequence *sequence = input->sequence;
	struct plan_request request = {
		.bytes = sequence->canonical,
		.count = sequence->canonical_bytes,
		.page_bytes = input->page_bytes,
		.record_bytes = sequence->record_bytes,
		.strength = strength,
	};
	struct predictor *predictor;

	TRY(plan_choose(&request, plan));
	TRY(predictor_new(plan, &predictor));
	predictor_set_threads(predictor, input->threads);
	if (costs_init(costs, input->cuts->blocks) != STATUS_OK) {
		predictor_free(predictor);
		return STATUS_NO_MEMORY;
	}
	measure_blocks(predictor, input, plan_charge_q32(plan), costs);
	predictor_free(predictor);
	return STATUS_OK;
}

static enum status mix_with(const struct estimate_input *input,
			    enum predict_strength strength,
			    struct findings *findings, struct reason *why)
{
	struct findings made;
	struct predict_plan plan;

	if (input->sequence->canonical_bytes == 0)
		return reason_give(why, STATUS_TOO_SHORT, "no bytes");
	if (findings_init(&made, 1, 0) != STATUS_OK)
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	if (measure(input, strength, &made.series[0].costs, &plan) !=
	    STATUS_OK) {
		findings_release(&made);
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	}
	findings_note(&made, "family", (int64_t)plan.family);
	findings_note(&made, "stride", (int64_t)plan.stride);
	*findings = made;
	return STATUS_OK;
}

static enum status mix_measure(const struct estimate_input *input,
			       struct findings *findings, struct reason *why)
{
	return mix_with(input, STRENGTH_NIGHTLY, findings, why);
}

static enum status mix_deep_measure(const struct estimate_input *input,
				    struct findings *findings,
				    struct reason *why)
{
	return mix_with(input, STRENGTH_DEEP, findings, why);
}

const struct estimator estimator_mix = {
	.name = "mix",
	.summary = "integer mixing predictor: bit histories in many contexts",
	.source = "Mahoney 2005; Mattern 2013",
	.leans = LEANS_ABOVE,
	.is_code = true,
	.reads_words = true,
	.work = 1,
	.measure = mix_measure,
};

const struct estimator estimator_mix_deep = {
	.name = "mix-deep",
	.summary = "the mixing predictor with more contexts, for reviews",
	.source = "Mahoney 2005; Mattern 2013",
	.leans = LEANS_ABOVE,
	.is_code = true,
	.reads_words = true,
	.deep = true,
	.work = 4,
	.measure = mix_deep_measure,
};
