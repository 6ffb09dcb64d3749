/* Probabilities as whole numbers with an exponent, and their mixing. */
#ifndef ESTIMATE_CROSSFIT_SHARE_H
#define ESTIMATE_CROSSFIT_SHARE_H

#include "estimate/quick_log.h"

/*
 * A share is a probability in 64 bits: the low 54 hold a mantissa f with its
 * top bit set, the high 10 an exponent e, and it stands for f 2^-(53 + e). A
 * fixed point would not do: each order can divide a share by nearly 2^31, and
 * one that was cut off would cost less than it should. From 2^-32 on, 32 orders
 * end above 2^-1024. All results are rounded down, so no share passes 1.
 */
#define SHARE_BITS 54
#define SHARE_MASK ((UINT64_C(1) << SHARE_BITS) - 1)
#define SHARE_EXPONENT_MAX 1023

/* 1 / d for 1 <= d < 2^63 as inverse 2^(zeros - 127), inverse >= 2^63 - 1. */
struct reciprocal {
	uint64_t inverse;
	unsigned zeros; /* leading zeros of d */
};

static inline struct reciprocal reciprocal_of(uint64_t d)
{
	unsigned zeros = (unsigned)__builtin_clzll(d);
	wide_uint almost = ((wide_uint)1 << 127) - 1;

	return (struct reciprocal){(uint64_t)(almost / (d << zeros)), zeros};
}

/* number / d, number scaled down by 2^scale; number is not 0. */
static inline uint64_t share_divide(wide_uint number, unsigned scale,
				    struct reciprocal d)
{
	uint64_t high = (uint64_t)(number >> 64), top, quotient;
	unsigned zeros, exponent;

	if (high) {
		unsigned extra = 64 - (unsigned)__builtin_clzll(high);

		top = (uint64_t)(number >> extra);
		scale -= extra;
	} else {
		zeros = (unsigned)__builtin_clzll((uint64_t)number);
		top = (uint64_t)number << zeros;
		scale += zeros;
	}
	quotient = (uint64_t)(((wide_uint)top * d.inverse) >> 64);
	zeros = (unsigned)__builtin_clzll(quotient);
	exponent = scale + zeros - d.zeros;
	if (exponent > SHARE_EXPONENT_MAX)
		exponent = SHARE_EXPONENT_MAX;
	return (uint64_t)exponent << SHARE_BITS |
	       (quotient << zeros) >> (64 - SHARE_BITS);
}

/* 1 / d, d >= 1. */
static inline uint64_t share_of_one_in(uint64_t d)
{
	return share_divide(1, 0, reciprocal_of(d));
}

/* (count + weight share) / d, weight >= 1, both below 2^32. */
static inline uint64_t share_mix(uint64_t share, uint32_t count,
				 uint32_t weight, struct reciprocal d)
{
	wide_uint product = (wide_uint)(share & SHARE_MASK) * weight;
	unsigned exponent = (unsigned)(share >> SHARE_BITS);

	if (!count)
		return share_divide(product, SHARE_BITS - 1 + exponent, d);
	/* beside a count at least 1 nothing below 2^-64 matters */
	product = exponent < 96 ? (product << 11) >> exponent : 0;
	return share_divide(((wide_uint)count << 64) + product, 64, d);
}

/* -log2 of a share, in Q32. */
static inline uint64_t share_loss_q32(const struct quick_log *log,
				      uint64_t share)
{
	uint64_t scale = SHARE_BITS - 1 + (share >> SHARE_BITS);

	return (scale << 32) - quick_log_q32(log, share & SHARE_MASK);
}

#endif
