/* The rows of table 1, each defined at the end of its own file. */
#ifndef ESTIMATE_ROWS_H
#define ESTIMATE_ROWS_H

#include "estimate/estimator.h"

extern const struct estimator estimator_uniform;
extern const struct estimator estimator_ngram;
extern const struct estimator estimator_crossfit;
extern const struct estimator estimator_match;
extern const struct estimator estimator_dirichlet;
extern const struct estimator estimator_ctw;
extern const struct estimator estimator_mix;
extern const struct estimator estimator_mix_deep;
extern const struct estimator estimator_mix_warm;

#endif
