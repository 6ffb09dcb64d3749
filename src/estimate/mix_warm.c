#include "estimate/rows.h"

#include "predict/plan.h"
#include "predict/predictor.h"

#include "base/memory.h"

#include <string.h>

/*
 * Every second page is read first, as a dictionary's trainer would, and then
 * each page of the others starts from there: whatever it taught is forgotten
 * before the next.
 */
struct halves {
	const uint8_t *bytes;
	size_t count, page;
	struct predict_plan plan;
	uint8_t *room; /* owned; a half's pages, then the page under way */
	size_t past;   /* bytes of that half */
};

static size_t page_length(const struct halves *halves, size_t at)
{
	size_t rest = halves->count - at;

	return rest < halves->page ? rest : halves->page;
}

/* Collects the pages of a half: 0 those of even number, 1 the others. */
static void collect(struct halves *halves, unsigned half)
{
	halves->past = 0;
	for (size_t at = half * halves->page; at < halves->count;
	     at += 2 * halves->page) {
		size_t length = page_length(halves, at);

		memcpy(halves->room + halves->past, halves->bytes + at, length);
		halves->past += length;
	}
}

/* Adds what the pages of the other half cost after this one. */
static MUST_USE enum status measure_half(struct halves *halves, unsigned half,
					 wide_int *total)
{
	struct predictor *predictor;
	enum status status;

	collect(halves, half);
	TRY(predictor_new(&halves->plan, &predictor));
	predictor_restart(predictor, halves->room);
	(void)predictor_measure_q32(predictor, halves->past);
	status = predictor_remember(predictor, halves->page);
	for (size_t at = (half ^ 1) * halves->page;
	     status == STATUS_OK && at < halves->count;
	     at += 2 * halves->page) {
		size_t length = page_length(halves, at);

		memcpy(halves->room + halves->past, halves->bytes + at, length);
		*total += predictor_measure_q32(predictor, length);
		predictor_rewind(predictor);
	}
	predictor_free(predictor);
	return status;
}

static MUST_USE enum status measure_halves(struct halves *halves,
					   wide_int *total)
{
	if (halves->plan.family == FAMILY_FLAT) {
		*total += (wide_int)(8 * halves->count) << 32;
		return STATUS_OK;
	}
	/* Nucleotides have no way back in their own family. */
	if (halves->plan.family == FAMILY_BASES)
		halves->plan.family = FAMILY_BINARY;
	halves->plan.bytes = halves->count / 2 + halves->page;
	TRY(memory_new(halves->count + halves->page, 1, &halves->room));
	TRY(measure_half(halves, 0, total));
	return measure_half(halves, 1, total);
}

static enum status warm_measure(const struct estimate_input *input,
				struct findings *findings, struct reason *why)
{
	const struct sequence *sequence = input->sequence;
	struct halves halves = {.bytes = sequence->canonical,
				.count = sequence->canonical_bytes,
				.page = input->page_bytes};
	struct plan_request request = {.bytes = halves.bytes,
				       .count = halves.count,
				       .record_bytes = sequence->record_bytes,
				       .strength = STRENGTH_NIGHTLY};
	struct findings made;
	wide_int total;
	enum status status;

	if (!halves.page || halves.count <= halves.page)
		return reason_give(why, STATUS_TOO_SHORT,
				   "warm pages need two pages or more");
	if (plan_choose(&request, &halves.plan) != STATUS_OK ||
	    findings_init(&made, 1, 0) != STATUS_OK)
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	total = plan_charge_q32(&halves.plan);
	status = costs_init(&made.series[0].costs, 0);
	if (status == STATUS_OK)
		status = measure_halves(&halves, &total);
	memory_free(halves.room);
	if (status != STATUS_OK) {
		findings_release(&made);
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	}
	made.series[0].costs.headline_q16 = q16_from_q32(total);
	*findings = made;
	return STATUS_OK;
}

const struct estimator estimator_mix_warm = {
	.name = "mix-warm",
	.summary = "mix on pages, each after every second page: beside "
		   "dictionaries",
	.source = "Mahoney 2005; Mattern 2013",
	.leans = LEANS_ABOVE,
	.reads_words = true,
	.warm = true,
	.work = 2.5,
	.measure = warm_measure,
};
