/* A probability in one word, from 1 down to 2^-1023, relative error 2^-53. */
#ifndef ESTIMATE_CROSSFIT_SHARE_H
#define ESTIMATE_CROSSFIT_SHARE_H

#include "estimate/quick_log2.h"

/*
 * A share is m 2^-(64 + e): the upper 54 bits of m, whose highest bit is set,
 * below e. Fixed point would not do: a symbol that no context of any order has
 * seen keeps about n^-k at order k. 1 itself is the next number below it.
 */
#define SHARE_EXPONENT_BITS 54

static inline uint64_t share_pack(uint64_t mantissa, uint64_t exponent)
{
	if (exponent > 1023)
		exponent = 1023;
	return exponent << SHARE_EXPONENT_BITS | mantissa >> 10;
}

/* The parts again. */
static inline uint64_t share_mantissa(uint64_t share)
{
	return share << 10;
}

static inline unsigned share_exponent(uint64_t share)
{
	return (unsigned)(share >> SHARE_EXPONENT_BITS);
}

/* 1 / alphabet; 1 <= alphabet <= 2^32. */
static inline uint64_t share_uniform(uint64_t alphabet)
{
	uint64_t q64 = UINT64_MAX / alphabet;
	unsigned exponent = (unsigned)__builtin_clzll(q64);

	return share_pack(q64 << exponent, exponent);
}

/*
 * (count + weight share) / total for weight >= 1, through the inverse
 * 2^64 / total, rounded down; count + weight <= total. Rounds down by less than
 * 2^-31 of the value: the shares of all symbols never add up to more than 1.
 */
static inline uint64_t share_blend(uint64_t share, uint64_t count,
				   uint64_t weight, uint64_t inverse)
{
	uint64_t mantissa = share_mantissa(share);
	unsigned exponent = share_exponent(share), shift;
	uint64_t lower =
		(uint64_t)((wide_uint)(weight * inverse) * mantissa >> 64);

	if (count) {
		lower = exponent < 64 ? lower >> exponent : 0;
		lower += count * inverse;
		exponent = 0;
	}
	shift = (unsigned)__builtin_clzll(lower);
	return share_pack(lower << shift, exponent + shift);
}

/* Shares multiplied into one before a logarithm is taken. */
#define SHARE_RUN 64

/*
 * Sum of -log2 over count shares in Q32, never below 0. Runs of them are
 * multiplied first: each product loses less than 2^-62 of its value.
 */
static inline int64_t share_bits_q32(const struct quick_log2 *logs,
				     const uint64_t *share, size_t count)
{
	int64_t bits_q32 = 0;

	for (size_t i = 0; i < count; i += SHARE_RUN) {
		size_t end = count - i < SHARE_RUN ? count : i + SHARE_RUN;
		uint64_t product = UINT64_MAX, exponent = 64;
		int64_t run_q48;

		for (size_t j = i; j < end; j++) {
			uint64_t mantissa = share_mantissa(share[j]), small;

			product =
				(uint64_t)((wide_uint)product * mantissa >> 64);
			small = product >> 63 ^ 1;
			product <<= small;
			exponent += share_exponent(share[j]) + small;
		}
		run_q48 = (int64_t)((exponent << 48) -
				    quick_log2_q48(logs, product));
		if (run_q48 > 0)
			bits_q32 += (run_q48 + (1 << 15)) >> 16;
	}
	return bits_q32;
}

#endif
