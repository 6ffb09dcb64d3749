#include "estimate/rows.h"

/* log2 of the kind's alphabet for every symbol: the cost of not modelling. */
static enum status uniform_measure(const struct estimate_input *input,
				   struct findings *findings,
				   struct reason *why)
{
	const struct sequence *sequence = input->sequence;
	const struct cuts *cuts = input->cuts;
	int64_t each_q32 = (int64_t)log2_q32(sequence->alphabet);
	struct costs costs;
	int64_t before = 0;

	TRY(costs_init(&costs, cuts->blocks));
	for (size_t i = 0; i < cuts->blocks; i++) {
		int64_t now = q16_from_q32((wide_int)each_q32 *
					   (wide_int)cuts->symbol[i + 1]);

		costs.block_q16[i] = now - before;
		before = now;
	}
	costs.headline_q16 =
		q16_from_q32((wide_int)each_q32 * (wide_int)sequence->n);
	if (findings_init(findings, 1, 0) != STATUS_OK) {
		costs_release(&costs);
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	}
	findings->series[0].costs = costs;
	return STATUS_OK;
}

const struct estimator estimator_uniform = {
	.name = "uniform",
	.summary = "log2 of the alphabet: every symbol equally likely",
	.source = "Hartley 1928",
	.leans = LEANS_ABOVE,
	.is_code = true,
	.work = 0.01,
	.measure = uniform_measure,
};
