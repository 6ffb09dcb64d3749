/* Does cross-fitting lean above the true rate, and by as much as measured? */
#include "support/coded.h"

#include "base/random.h"
#include "base/sum.h"
#include "support/near.h"

#include <math.h>
#include <stdlib.h>

#define LETTERS 256
#define STATES 256
#define NEXT 16

/* Draws by cumulative weights, and adds -log2 of what was drawn to *bits. */
static unsigned draw(struct random_stream *random, const double *cumulative,
		     unsigned count, double *bits)
{
	double at = random_unit(random) * cumulative[count - 1];
	unsigned low = 0, high = count - 1;

	while (low < high) {
		unsigned middle = (low + high) / 2;

		if (cumulative[middle] > at)
			high = middle;
		else
			low = middle + 1;
	}
	*bits -= log2((cumulative[low] - (low ? cumulative[low - 1] : 0)) /
		      cumulative[count - 1]);
	return low;
}

/*
 * Excess of the order over the bits that the source itself gives the same
 * symbols, in per cent: the same mean as over the rate, with less scatter.
 */
struct excess {
	struct sum percent, squares;
	unsigned count;
};

static double mean_of(const struct excess *excess)
{
	return sum_value(&excess->percent) / excess->count;
}

static double error_of(const struct excess *excess)
{
	double mean = mean_of(excess);

	return sqrt(
		(sum_value(&excess->squares) / excess->count - mean * mean) /
		(excess->count - 1));
}

static void add(struct excess *excess, const uint8_t *codes, size_t n,
		unsigned order, double own_bits)
{
	struct sequence sequence = coded_sequence(codes, n, LETTERS);
	struct findings findings = coded_findings(
		(struct coded_run){.row = "crossfit", .orders = order},
		&sequence);
	double percent =
		100 *
		(bits_from_q16(findings.series[order - 1].costs.headline_q16) /
			 own_bits -
		 1);

	assert_int_equal(findings.series_count, order);
	sum_add(&excess->percent, percent);
	sum_add(&excess->squares, percent * percent);
	excess->count++;
	findings_release(&findings);
}

/* Independent bytes, the i-th as likely as 1 / i. */
static struct excess zipf(size_t n, unsigned rounds)
{
	struct excess excess = {.count = 0};
	uint8_t *codes = calloc(n, 1);
	double cumulative[LETTERS], sum = 0;
	struct random_stream random;

	for (unsigned i = 0; i < LETTERS; i++)
		cumulative[i] = sum += 1 / (i + 1.0);
	random_init(&random, n, 1);
	for (unsigned round = 0; round < rounds; round++) {
		double bits = 0;

		for (size_t t = 0; t < n; t++)
			codes[t] = (uint8_t)draw(&random, cumulative, LETTERS,
						 &bits);
		add(&excess, codes, n, 1, bits);
	}
	free(codes);
	return excess;
}

/* Sparse rows: few successors of each pair are at all likely. */
static void fill_rows(double rows[STATES][NEXT])
{
	struct random_stream random;

	random_init(&random, 77, 2);
	for (unsigned s = 0; s < STATES; s++) {
		double sum = 0;

		for (unsigned x = 0; x < NEXT; x++) {
			double weight = -log(1 - random_unit(&random));

			rows[s][x] = sum += weight * weight * weight + 1e-9;
		}
	}
}

/* Order 2 over 16 symbols. */
static struct excess pairs(size_t n, unsigned rounds)
{
	static double rows[STATES][NEXT];
	struct excess excess = {.count = 0};
	uint8_t *codes = calloc(n, 1);
	struct random_stream random;

	fill_rows(rows);
	random_init(&random, n, 3);
	for (unsigned round = 0; round < rounds; round++) {
		double bits = 0;
		unsigned state = 0;

		for (size_t t = 0; t < n; t++) {
			codes[t] = (uint8_t)draw(&random, rows[state], NEXT,
						 &bits);
			state = (state * NEXT + codes[t]) % STATES;
		}
		add(&excess, codes, n, 3, bits);
	}
	free(codes);
	return excess;
}

/*
 * Measured on 60 to 300 replicates by another program: + .36 % at 1e4 and
 * + .03 % at 1e5 symbols for a Zipf-like source of 256 letters. In theory
 * (m - 1) / (2 (7/8) n ln 2) bits are lost on estimating m shares from 7/8.
 */
static void bytes_after_zipf(void **state)
{
	struct excess short_run = zipf(10000, 60), long_run = zipf(100000, 12);

	(void)state;
	assert_near(mean_of(&short_run), .36, .05 + 3 * error_of(&short_run));
	assert_near(mean_of(&long_run), .03, .01 + 3 * error_of(&long_run));
	assert_true(mean_of(&long_run) > 3 * error_of(&long_run));
}

/*
 * Likewise + 10.4 %, + 1.1 % and + .11 % at 1e4, 1e5 and 1e6 symbols on sparse
 * rows of another draw: the law 1 / n holds for any, the height within a factor
 * of 2.
 */
static void pairs_of_sixteen(void **state)
{
	struct excess e4 = pairs(10000, 20), e5 = pairs(100000, 10),
		      e6 = pairs(1000000, 2);

	(void)state;
	assert_true(mean_of(&e4) > 5.2 && mean_of(&e4) < 20.8);
	assert_true(mean_of(&e5) > .55 && mean_of(&e5) < 2.2);
	assert_true(mean_of(&e6) > .055 && mean_of(&e6) < .22);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(bytes_after_zipf),
		cmocka_unit_test(pairs_of_sixteen),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
