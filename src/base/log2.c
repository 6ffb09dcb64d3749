#include "base/log2.h"

/* 2 / ln 2 = 2.8853900817779268147198493620037842 in Q61. */
#define TWO_OVER_LN2_Q61 UINT64_C(6653256548922161246)

/*
 * x = m 2^e with m in [1, 2). With z = (m - 1) / (m + 1) in [0, 1/3),
 * log2 m = (2 / ln 2) (z + z^3/3 + z^5/5 + …). To shorten the series m above
 * sqrt 2 is halved, so |z| <= 0.1716 and z^(2j+1) < 2^-60 by j = 11.
 */
#define LAST_POWER 25

static uint64_t series_q62(uint64_t z_q62)
{
	uint64_t square = (uint64_t)(((wide_uint)z_q62 * z_q62) >> 62);
	uint64_t power = z_q62, sum = z_q62;

	for (unsigned j = 3; j <= LAST_POWER; j += 2) {
		power = (uint64_t)(((wide_uint)power * square) >> 62);
		sum += power / j;
	}
	return sum;
}

static wide_int log2_q60(uint64_t x)
{
	const uint64_t root_two_q63 = UINT64_C(13043817825332782212);
	unsigned exponent = 63 - (unsigned)__builtin_clzll(x);
	uint64_t mantissa = x << (63 - exponent);
	int negative = mantissa > root_two_q63;
	uint64_t one = UINT64_C(1) << 63, z;
	wide_uint top, bottom;
	wide_int part;

	/* z = (m - 1)/(m + 1), or (2 - m)/(2 + m) for the halved mantissa. */
	if (negative) {
		top = ((wide_uint)1 << 64) - mantissa;
		bottom = ((wide_uint)1 << 64) + mantissa;
	} else {
		top = mantissa - one;
		bottom = (wide_uint)mantissa + one;
	}
	z = (uint64_t)((top << 61) / (uint64_t)(bottom >> 1));
	part = (wide_int)(((wide_uint)series_q62(z) * TWO_OVER_LN2_Q61) >> 63);
	if (negative)
		return ((wide_int)(exponent + 1) << 60) - part;
	return ((wide_int)exponent << 60) + part;
}

uint64_t log2_q56(uint64_t x)
{
	if (x < 2)
		return 0;
	return (uint64_t)((log2_q60(x) + 8) >> 4);
}

uint64_t log2_q32(uint64_t x)
{
	if (x < 2)
		return 0;
	return (uint64_t)((log2_q60(x) + (1 << 27)) >> 28);
}

int64_t q16_from_q32(wide_int q32)
{
	const wide_int half = 1 << 15;

	if (q32 < 0)
		return -(int64_t)((-q32 + half) >> 16);
	return (int64_t)((q32 + half) >> 16);
}

double bits_from_q16(int64_t q16)
{
	return (double)q16 / (double)BIT_Q16;
}
