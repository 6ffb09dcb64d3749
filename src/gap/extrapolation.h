/* To what a code would come on endless data of this kind, if at all. */
#ifndef GAP_EXTRAPOLATION_H
#define GAP_EXTRAPOLATION_H

#include "gap/lengths.h"

/* Below, published forms disagree too much to be worth printing. */
#define EXTRAPOLATION_SYMBOLS_MIN 1000000
/* Spread over forms and starts, by the last value, beyond which it is none. */
#define EXTRAPOLATION_SPREAD_MOST 0.10

/*
 * Fits the three forms of gap/curve_fit.h to the cumulative bits per symbol of
 * the shortest code row at whole blocks, halving from the end, from two start
 * points. A spread, never one number, and never to be gated on. Refused, with
 * the reason, below a million symbols, where the curve rises (drift), with
 * fewer than 5 points, and where the spread passes 10% of the last value.
 */
void extrapolation_find(const struct ground *ground,
			const struct lengths *lengths,
			struct extrapolation_row *row);

#endif
