#include "source/model_rate.h"

#include "base/sum.h"
#include "source/model_build.h"
#include "source/weights.h"

/* H of a row by its whole-number weights. */
static double row_entropy(const struct source_model *model, uint32_t row)
{
	const struct model_row *at = &model->rows[row];
	uint32_t total = model_total(model, row);
	struct sum sum = {0};

	for (uint32_t e = 0; e < at->count; e++) {
		uint32_t w = model_weight(model, e, at);

		sum_add(&sum, (double)w * log2_whole(w));
	}
	return log2_whole(total) - sum_value(&sum) / (double)total;
}

/* Cover and Thomas 2006, section 4.2: sum of pi_c H(row c). */
static void chain_rate(const struct source_model *model,
		       struct known_rate *rate)
{
	struct sum sum = {0};

	for (uint32_t c = 0; c < model->contexts; c++)
		sum_add(&sum, model->stationary[c] * row_entropy(model, c));
	*rate = (struct known_rate){sum_value(&sum), 1e-13};
}

enum status source_model_rate(const struct source_model *model,
			      struct known_rate *rate, struct reason *why)
{
	struct emissions emissions;
	enum status status = STATUS_OK;

	if (model->packed) {
		*rate = (struct known_rate){model->packed->bits_per_symbol(),
					    1e-12};
		return STATUS_OK;
	}
	if (model->regimes == 1) {
		chain_rate(model, rate);
		return STATUS_OK;
	}
	if (emissions_init(&emissions, model) != STATUS_OK)
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	if (!bounds_meet(&emissions, model, rate))
		status = belief_rate(&emissions, rate, why);
	emissions_release(&emissions);
	return status;
}
