/* Between which bounds the entropy rate of the source lies. */
#ifndef GAP_BRACKET_H
#define GAP_BRACKET_H

#include "gap/lengths.h"

/* Below, coverage was never measured and nothing is promised. */
#define BRACKET_SYMBOLS_MIN 10000

/*
 * GR_k: Grassberger h_k; XF_k: cross-fit; w: half-width of an interval; D_k =
 * max(0, GR_k - mean GR_k of the two halves); k^: the highest order, below the
 * highest counted, up to which GR_k and its half-sample mean agree to 2%; kX:
 * the order of least XF. Then
 *
 *   lower = min(GR_k^ - D_k^, GR_kX - D_kX, N) - w
 *   upper = min over orders k and codes j of (XF_k + w_k, L_j / n + w_j)
 *
 * where N is the higher of the Grassberger and Chao-Wang-Jost h_(k^+1); left
 * out where k^ >= 2 and the coverage of the grams of order k^+1 is under half:
 * they are then fiction on either correction, and would widen the bracket with
 * more data. lower is at least 0. Open below: a code, or upper, is below lower.
 * Needs the orders of view. Without a bracket: STATUS_OK, known false and the
 * reason. STATUS_NO_MEMORY.
 */
MUST_USE enum status bracket_find(const struct corpus_view *view,
				  const struct ground *ground,
				  const struct lengths *lengths,
				  struct bracket_row *row);

#endif
