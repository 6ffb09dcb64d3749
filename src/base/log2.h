/* Base-2 logarithms in whole numbers, the same on every machine. */
#ifndef BASE_LOG2_H
#define BASE_LOG2_H

#include <stdint.h>

__extension__ typedef unsigned __int128 wide_uint;
__extension__ typedef __int128 wide_int;

/*
 * Units. Q32: a bit is 2^32 units (per-symbol work). Q16: a bit is 2^16 units
 * (facts: totals and block sums, so 2^47 bits fit a signed 64-bit number).
 */
#define BIT_Q32 (INT64_C(1) << 32)
#define BIT_Q16 (INT64_C(1) << 16)

/*
 * log2(x) in Q32, rounded to nearest, error below 0.51 units; x >= 1 (0 gives
 * 0). Series of the inverse hyperbolic tangent, integer arithmetic only.
 */
uint64_t log2_q32(uint64_t x);

/* log2(x) in Q56 for x >= 1, error below 2^-52 bit; for building tables. */
uint64_t log2_q56(uint64_t x);

/* Rounds Q32 (wide) to Q16, halves away from zero. */
int64_t q16_from_q32(wide_int q32);

/* Bits as a real number; for display and everything right of the ledger. */
double bits_from_q16(int64_t q16);

#endif
