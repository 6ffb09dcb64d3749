#include "support/modelled.h"

#include "support/near.h"

static void model_restart(void *self, const uint8_t *bytes)
{
	predictor_restart(self, bytes);
}

static unsigned model_probability(void *self)
{
	return predictor_probability(self);
}

static unsigned model_decision(const void *self, uint8_t byte)
{
	return predictor_decision(self, byte);
}

static bool model_update(void *self, unsigned decision, uint8_t *byte)
{
	return predictor_update(self, decision, byte);
}

struct coded_model modelled(struct predictor *predictor)
{
	return (struct coded_model){
		.self = predictor,
		.restart = model_restart,
		.probability = model_probability,
		.decision = model_decision,
		.update = model_update,
	};
}

struct predict_plan modelled_plan(const uint8_t *bytes, size_t count,
				  enum predict_strength strength)
{
	struct plan_request request = {
		.bytes = bytes, .count = count, .strength = strength};
	struct predict_plan plan;

	assert_int_equal(plan_choose(&request, &plan), STATUS_OK);
	return plan;
}
