/* The two ways to the rate of a hidden source. */
#ifndef SOURCE_MODEL_RATE_H
#define SOURCE_MODEL_RATE_H

#include "source/emissions.h"

struct rate_bounds {
	double lower, upper;
};

/* Cover and Thomas 2006, theorem 4.5.1, at n >= 1; one context. */
void bounds_at(const struct emissions *emissions,
	       const struct source_model *model, unsigned n,
	       struct rate_bounds *bounds);
/* Where the bounds meet to 1e-10 by n = 22: their middle, and true. */
bool bounds_meet(const struct emissions *emissions,
		 const struct source_model *model, struct known_rate *rate);
/* The transfer operator; see source_model_rate. */
MUST_USE enum status belief_rate(const struct emissions *emissions,
				 struct known_rate *rate, struct reason *why);

#endif
