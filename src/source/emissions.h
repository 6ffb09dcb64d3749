/* A model's hidden part as plain matrices of probabilities. */
#ifndef SOURCE_EMISSIONS_H
#define SOURCE_EMISSIONS_H

#include "source/model.h"

struct emissions {
	uint32_t regimes, contexts, alphabet;
	double *p; /* owned; [(regime * contexts + context) * alphabet + x] */
	uint32_t *next; /* owned; [context * alphabet + x] */
	double moves[MODEL_REGIMES_MAX][MODEL_REGIMES_MAX];
};

/* STATUS_NO_MEMORY. */
MUST_USE enum status emissions_init(struct emissions *emissions,
				    const struct source_model *model);
void emissions_release(struct emissions *emissions);

/*
 * The weights of the regimes jointly with seeing x in the context, before the
 * move: joint_r = belief_r P(x | r, context). Returns their sum.
 */
double emissions_see(const struct emissions *emissions, uint32_t context,
		     uint32_t x, const double *belief, double *joint);
/* after_s = sum_r belief_r moves[r][s]. */
void emissions_move(const struct emissions *emissions, const double *belief,
		    double *after);

#endif
