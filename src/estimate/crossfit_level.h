/* From the shares of one order to those of the next. */
#ifndef ESTIMATE_CROSSFIT_LEVEL_H
#define ESTIMATE_CROSSFIT_LEVEL_H

#include "estimate/crossfit_folds.h"
#include "suffix/suffix.h"

/*
 * shares[t] is the probability given to symbol t by its fold's complement. With
 * grams of k symbols that lie within a fold, counts over the other seven, s the
 * k - 1 symbols before symbol x, m the different symbols that follow s there:
 *   share = (c(sx) + m share of order k - 1) / (c(s) + m)
 * and as it was where c(s) = 0. Symbols whose gram crosses an edge keep theirs.
 * This is interpolation by Witten and Bell 1991 (method C), cross-fitted.
 */
void crossfit_level(const struct suffix *suffix, const struct folds *folds,
		    unsigned k, uint64_t *shares);

#endif
