/* Contributions of estimates fitted to the data they are read on. */
#ifndef GAP_FITTED_H
#define GAP_FITTED_H

#include "gap/ground.h"

/*
 * Like contribution_of_series, with the excess that fitting makes: each free
 * parameter (distinct grams less distinct contexts) adds one square nat to the
 * spread of the losses, summed, but only a chi-square term of variance 1/2 to
 * that of the total: Basharin 1959, Harris 1975, var = V / n + (K - 1) / 2 n^2
 * + ...; for chains the likelihood ratio is chi-square of as many degrees
 * (Billingsley 1961). Grams seen once or twice do not count: no chi-square
 * holds there (Cochran 1954).
 */
struct contribution contribution_of_plugin(const struct corpus_view *view,
					   const struct series *series,
					   double total_bits);
/*
 * The same of Grassberger's correction: its term in (-1)^c moves by half a nat
 * with every count c, of grams and of contexts.
 */
struct contribution contribution_of_grassberger(const struct corpus_view *view,
						const struct series *series);
/* The same of the eight folds; total_bits is the headline. */
struct contribution contribution_of_crossfit(const struct corpus_view *view,
					     const struct series *series);

#endif
