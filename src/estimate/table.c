#include "estimate/estimator.h"

#include "estimate/rows.h"

#include <string.h>

/* clang-format off */
const struct estimator *const estimators[] = {
	&estimator_uniform,
	&estimator_ngram,
	&estimator_crossfit,
	&estimator_match,
	&estimator_dirichlet,
	&estimator_ctw,
	&estimator_mix,
	&estimator_mix_deep,
	&estimator_mix_warm,
	NULL,
};
/* clang-format on */

const struct estimator *estimator_find(const char *name)
{
	for (size_t i = 0; estimators[i]; i++) {
		if (strcmp(estimators[i]->name, name) == 0)
			return estimators[i];
	}
	return NULL;
}
