/* Base-2 logarithms from a table, for loops over every symbol. */
#ifndef ESTIMATE_QUICK_LOG_H
#define ESTIMATE_QUICK_LOG_H

#include "base/log2.h"
#include "base/status.h"

#define QUICK_LOG_STEPS 1024

/*
 * For mantissas from 1 + i / 1024 on: a factor just above their inverse, in
 * Q63, and the logarithm that it takes away, in Q56.
 */
struct quick_log {
	uint64_t inverse_q63[QUICK_LOG_STEPS];
	uint64_t log_q56[QUICK_LOG_STEPS];
};

/* The caller frees. STATUS_NO_MEMORY. */
MUST_USE enum status quick_log_new(struct quick_log **log);

/*
 * log2 x in Q32 for x >= 1, rounded, within 0.52 units; exact for powers of
 * two. With x = m 2^e and m times the inverse = 1 + z, 0 <= z < 2^-9.9:
 * log2 (1 + z) = (z - z^2/2 + z^3/3) / ln 2, the rest below 2^-41.
 */
static inline uint64_t quick_log_q32(const struct quick_log *log, uint64_t x)
{
	/* 1 / ln 2 = 1.44269504088896340736 in Q30 */
	const uint64_t inverse_ln2_q30 = 1549082005;
	unsigned shift = (unsigned)__builtin_clzll(x);
	uint64_t mantissa = x << shift;
	uint64_t step = mantissa >> 53 & (QUICK_LOG_STEPS - 1);
	wide_uint product = (wide_uint)mantissa * log->inverse_q63[step];
	uint64_t z = ((uint64_t)(product >> 64) - (UINT64_C(1) << 62)) >> 21;
	uint64_t square = (z * z) >> 41;
	uint64_t sum = z - square / 2 + ((square * z) >> 41) / 3;
	uint64_t part_q56 =
		log->log_q56[step] + ((sum * inverse_ln2_q30) >> 15);

	return ((uint64_t)(63 - shift) << 32) +
	       ((part_q56 + (UINT64_C(1) << 23)) >> 24);
}

#endif
