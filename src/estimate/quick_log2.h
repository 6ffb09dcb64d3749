/* Base-2 logarithms for inner loops: a table and three terms of a series. */
#ifndef ESTIMATE_QUICK_LOG2_H
#define ESTIMATE_QUICK_LOG2_H

#include "base/log2.h"
#include "base/status.h"

#include <stddef.h>

#define QUICK_LOG2_STEPS 2048

/* For each step of the mantissa, at i / 2048: log2(1 + i/2048) and its inverse.
 */
struct quick_log2 {
	uint64_t log_q48[QUICK_LOG2_STEPS];
	uint64_t inverse_q63[QUICK_LOG2_STEPS];
};

/* The caller gives it back with memory_free. STATUS_NO_MEMORY. */
MUST_USE enum status quick_log2_new(struct quick_log2 **table);

/*
 * log2(x) in Q48 for x >= 1, error below 2^-45 bit, the same on every machine.
 * x = (1 + i/2048) (1 + r) 2^e, and ln(1 + r) = r - r^2/2 + r^3/3 - … with
 * r < 2^-11. About 5 times as fast as log2_q32.
 */
static inline uint64_t quick_log2_q48(const struct quick_log2 *table,
				      uint64_t x)
{
	const uint64_t one_over_ln2_q62 = UINT64_C(6653256548922161246);
	unsigned exponent = 63 - (unsigned)__builtin_clzll(x);
	uint64_t mantissa = x << (63 - exponent);
	size_t step = mantissa >> 52 & (QUICK_LOG2_STEPS - 1);
	uint64_t rest = mantissa & ((UINT64_C(1) << 52) - 1);
	uint64_t r, square, cube, ln_q63;

	r = (uint64_t)((wide_uint)rest * table->inverse_q63[step] >> 63);
	square = (uint64_t)((wide_uint)r * r >> 63);
	cube = (uint64_t)((wide_uint)square * r >> 63);
	ln_q63 = r - square / 2 + cube / 3;
	return ((uint64_t)exponent << 48) + table->log_q48[step] +
	       (uint64_t)((wide_uint)ln_q63 * one_over_ln2_q62 >> 77);
}

/* The same in Q32, rounded to nearest. */
static inline uint64_t quick_log2_q32(const struct quick_log2 *table,
				      uint64_t x)
{
	return (quick_log2_q48(table, x) + (1 << 15)) >> 16;
}

#endif
