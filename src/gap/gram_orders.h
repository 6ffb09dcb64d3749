/* The table of gram orders, and up to which order it can be believed. */
#ifndef GAP_GRAM_ORDERS_H
#define GAP_GRAM_ORDERS_H

#include "gap/analysis.h"

/* The row of a corpus that ended well, whole layout; NULL: none. */
const struct method_fact *method_done(const struct corpus_fact *fact,
				      const char *method);
/* Its series of an order; NULL: none. */
const struct series *series_of_order(const struct findings *findings,
				     unsigned order);

/*
 * Whether the losses of an order drift inside blocks too short to show it:
 * lag-1 correlation of the finer series (estimate/ngram_drift.h), corrected
 * for its bias, over the limit that holds for blocks (resample/batches.h).
 * false where no finer series was made.
 */
bool grams_drift_within(const struct findings *ngram, unsigned order);

/* Fills orders, order_count, trusted_order and trust_limit of view. */
MUST_USE enum status gram_orders_init(struct corpus_view *view);

/* Mean over the two halves of the corrected h of each of view's orders. */
void gram_orders_halves(const struct corpus_view *view, double *halves);

#endif
