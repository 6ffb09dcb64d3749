/* The predictor as a model for the coder of tests. */
#ifndef SUPPORT_MODELLED_H
#define SUPPORT_MODELLED_H

#include "predict/predictor.h"

#include "support/coder.h"

/* predictor is borrowed. */
struct coded_model modelled(struct predictor *predictor);

/* The plan that plan_choose makes for the bytes. */
struct predict_plan modelled_plan(const uint8_t *bytes, size_t count,
				  enum predict_strength strength);

#endif
