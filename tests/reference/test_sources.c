/* Are the rates of the source table those of the published formulas? */
#include "source/record_fields.h"
#include "source/source.h"

#include "support/near.h"

#include <math.h>

static double rate_of(const char *name)
{
	return source_find(name)->bits_per_symbol();
}

static double h2(double p)
{
	return -p * log2(p) - (1 - p) * log2(1 - p);
}

static void two_state_chains(void **state)
{
	(void)state;
	/* Cover and Thomas 2006, section 4.2: (beta h(alpha) + alpha h(beta))
	 * / (alpha + beta); the figure by arithmetic. */
	assert_near(rate_of("chain"), .5720694200, 5e-11);
	assert_near(two_state_rate(1, 3, 10), .5720694200, 5e-11);
	assert_near(two_state_rate(1, 10, 100),
		    (.1 * h2(.01) + .01 * h2(.1)) / .11, 1e-14);
	assert_near(two_state_rate(1, 10, 100), .116084, 5e-7);
	/* A symmetric chain is a fair flip of its changes: h(.01) of the
	 * binary entropy function (Cover and Thomas 2006, example 2.1.1). */
	assert_near(two_state_rate(1, 1, 100), .0807931359, 5e-11);
}

static void controls(void **state)
{
	(void)state;
	/* Shannon 1948: log2 256, and certainty. */
	assert_near(rate_of("random"), 8, 0);
	assert_near(rate_of("zeros"), 0, 0);
	/* 10 + 2 + .116084 bits in 8 bytes. */
	assert_near(rate_of("rec"), 1.514511, 1e-6);
}

static void zipf_like_bytes(void **state)
{
	double total = 0, bits = 0;

	(void)state;
	for (int r = 1; r <= 256; r++)
		total += floor(1048576.0 / r);
	for (int r = 1; r <= 256; r++) {
		double p = floor(1048576.0 / r) / total;

		bits -= p * log2(p);
	}
	assert_near(rate_of("iid"), bits, 1e-12);
}

/* Two dice and a pull of one in `pull` of 256 cases, by enumeration. */
static double pulled_dice_bits(int sides, int pull)
{
	double p[256] = {0}, bits = 0;

	for (int a = 0; a < sides; a++) {
		for (int b = 0; b < sides; b++) {
			p[a + b] += (256 - pull) / 256. / sides / sides;
			p[a + b + 1] += pull / 256. / sides / sides;
		}
	}
	for (int i = 0; i < 2 * sides; i++)
		bits -= p[i] > 0 ? p[i] * log2(p[i]) : 0;
	return bits;
}

static void frames_are_the_sum_of_their_fields(void **state)
{
	double jitter = -2 * (1 / 32. * log2(1 / 32.)) -
			2 * (4 / 32. * log2(4 / 32.)) -
			22 / 32. * log2(22 / 32.);
	double bits = jitter + pulled_dice_bits(14, 0) +
		      pulled_dice_bits(40, 64) + pulled_dice_bits(7, 20) +
		      pulled_dice_bits(4, 12) + pulled_dice_bits(3, 8) +
		      pulled_dice_bits(10, 48) + h2(.375) +
		      (.1 * h2(.01) + .01 * h2(.1)) / .11 + 2 +
		      pulled_dice_bits(64, 0);

	(void)state;
	/* Entropies of independent parts add: Cover and Thomas 2006, 2.6.6. */
	assert_near(rate_of("gauge-frames"), bits / 32, 1e-12);
}

static void table_rows_are_the_sum_of_their_columns(void **state)
{
	double bits = pulled_dice_bits(9, 64) + pulled_dice_bits(4, 32) +
		      pulled_dice_bits(3, 24) + pulled_dice_bits(4, 64) +
		      pulled_dice_bits(24, 192) + .75 * log2(4 / 3.) +
		      .25 * log2(8);

	(void)state;
	assert_near(rate_of("station-table"), bits / 54, 1e-12);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(two_state_chains),
		cmocka_unit_test(controls),
		cmocka_unit_test(zipf_like_bytes),
		cmocka_unit_test(frames_are_the_sum_of_their_fields),
		cmocka_unit_test(table_rows_are_the_sum_of_their_columns),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
