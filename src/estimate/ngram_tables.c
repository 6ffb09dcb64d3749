#include "estimate/ngram_tables.h"

#include "base/memory.h"

/* Euler's constant and ln 2 in Q60, 1 / ln 2 in Q62; rounded. */
#define GAMMA_Q60 INT64_C(665484352860916858)
#define LN2_Q60 INT64_C(799144290325165979)
#define ONE_OVER_LN2_Q62 INT64_C(6653256548922161246)
#define ONE_Q60 (INT64_C(1) << 60)

static int64_t bits_q56(wide_int nats_q60)
{
	return (int64_t)((nats_q60 * ONE_OVER_LN2_Q62) >> 66);
}

/*
 * psi(1) = -gamma, psi(c + 1) = psi(c) + 1/c. G(1) = -gamma - ln 2,
 * G(2) = G(1) + 2, G(2j + 2) = G(2j) + 2/(2j + 1), G(2j + 1) = G(2j).
 */
enum status count_logs_table(struct count_logs **table)
{
	struct count_logs *made;
	wide_int psi = -GAMMA_Q60, grassberger = -GAMMA_Q60 - LN2_Q60;

	TRY(memory_new_zeroed(COUNT_LOGS_TABLED, sizeof(*made), &made));
	for (int64_t c = 1; c < COUNT_LOGS_TABLED; c++) {
		if (c > 1)
			psi += ONE_Q60 / (c - 1);
		if (c % 2 == 0)
			grassberger += 2 * ONE_Q60 / (c - 1);
		made[c].plain_q32 = (int64_t)log2_q32((uint64_t)c);
		made[c].psi_q56 = bits_q56(psi);
		made[c].grassberger_q56 = bits_q56(grassberger);
	}
	*table = made;
	return STATUS_OK;
}

/* numerator / (divisor c^power) in Q60, a unit or two low; numerator < 8. */
static int64_t over_power(int64_t numerator, int64_t divisor, int64_t c,
			  unsigned power)
{
	int64_t value = numerator * ONE_Q60 / divisor;

	for (unsigned i = 0; i < power; i++)
		value /= c;
	return value;
}

/*
 * psi(c) = ln c - 1/(2c) - 1/(12 c^2) + 1/(120 c^4) - …
 * G(c) = ln c + 1/(6 c^2) - 7/(60 c^4) + … for even c.
 * What follows, of order 1/(4 c^6), is less than 2^-55 from c = 512 on.
 */
struct count_logs count_logs_large(uint64_t c)
{
	uint64_t even = c & ~UINT64_C(1);
	int64_t any = (int64_t)c, two = (int64_t)even;
	int64_t below = over_power(1, 2, any, 1) + over_power(1, 12, any, 2) -
			over_power(1, 120, any, 4);
	int64_t above = over_power(1, 6, two, 2) - over_power(7, 60, two, 4);
	struct count_logs logs = {
		.plain_q32 = (int64_t)log2_q32(c),
		.psi_q56 = (int64_t)log2_q56(c) - bits_q56(below),
		.grassberger_q56 = (int64_t)log2_q56(even) + bits_q56(above),
	};

	return logs;
}
