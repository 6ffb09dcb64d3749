/* Does the cross-fit lean above the truth, and by as little as was promised? */
#include "base/random.h"
#include "estimate/estimator.h"
#include "suffix/suffix.h"
#include "support/grams.h"
#include "support/near.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

/* Bits a symbol at one order. */
static double fitted(const uint8_t *codes, size_t n, uint64_t alphabet,
		     unsigned order)
{
	const struct cuts none = {0};
	struct sequence sequence = grams_sequence(codes, n, 1);
	struct suffix suffix;
	struct estimate_input input = {.sequence = &sequence,
				       .cuts = &none,
				       .suffix = &suffix,
				       .orders = order,
				       .threads = 1};
	struct findings findings;
	double bits;

	sequence.alphabet = alphabet;
	assert_int_equal(suffix_init(&suffix, &sequence, order, NULL),
			 STATUS_OK);
	assert_int_equal(
		estimator_find("crossfit")->measure(&input, &findings, NULL),
		STATUS_OK);
	assert_int_equal(findings.series_count, order);
	bits = bits_from_q16(findings.series[order - 1].costs.headline_q16) /
	       (double)n;
	findings_release(&findings);
	suffix_release(&suffix);
	return bits;
}

static uint8_t draw(const double *shares, size_t count,
		    struct random_stream *random)
{
	double at = random_unit(random);
	size_t i = 0;

	while (i + 1 < count && at >= shares[i])
		at -= shares[i++];
	return (uint8_t)i;
}

static double entropy(const double *shares, size_t count)
{
	double bits = 0;

	for (size_t i = 0; i < count; i++)
		if (shares[i] > 0)
			bits -= shares[i] * log2(shares[i]);
	return bits;
}

static void scale(double *shares, size_t count)
{
	double sum = 0;

	for (size_t i = 0; i < count; i++)
		sum += shares[i];
	for (size_t i = 0; i < count; i++)
		shares[i] /= sum;
}

/*
 * Independent bytes, byte i as frequent as 1 / (i + 1): the exact entropy is
 * that of the shares. The excess is about (m - 1) / (2 n ln 2), doubled or so
 * by the held-out loss: some .5% of the rate at 1e4 symbols.
 */
static void test_independent_bytes(void **state)
{
	size_t n = 10000, replicates = 20;
	uint8_t *codes = malloc(n);
	double shares[256], excess = 0, rate;
	struct random_stream random;

	(void)state;
	random_init(&random, 77, 0);
	for (size_t i = 0; i < 256; i++)
		shares[i] = 1 / (double)(i + 1);
	scale(shares, 256);
	rate = entropy(shares, 256);
	for (size_t i = 0; i < replicates; i++) {
		for (size_t t = 0; t < n; t++)
			codes[t] = draw(shares, 256, &random);
		excess += fitted(codes, n, 256, 1) / rate - 1;
	}
	excess /= (double)replicates;
	assert_true(excess > 0);
	assert_true(excess < 0.01);
	free(codes);
}

#define LETTERS 16
#define STATES (LETTERS * LETTERS)

/* Order 2 over 16 symbols, rows of a few likely successors. */
struct chain {
	double row[STATES][LETTERS];
};

static void chain_init(struct chain *chain, struct random_stream *random)
{
	for (size_t s = 0; s < STATES; s++) {
		for (size_t x = 0; x < LETTERS; x++) {
			double unit = random_unit(random);

			chain->row[s][x] =
				random_below(random, 4) ? 0.01 : unit + 0.1;
		}
		scale(chain->row[s], LETTERS);
	}
}

/* The stationary mean of the rows' entropies, by iterating the chain. */
static double chain_rate(const struct chain *chain)
{
	double now[STATES], next[STATES], rate = 0;

	for (size_t s = 0; s < STATES; s++)
		now[s] = 1.0 / STATES;
	for (unsigned i = 0; i < 2000; i++) {
		memset(next, 0, sizeof(next));
		for (size_t s = 0; s < STATES; s++)
			for (size_t x = 0; x < LETTERS; x++)
				next[s % LETTERS * LETTERS + x] +=
					now[s] * chain->row[s][x];
		memcpy(now, next, sizeof(now));
	}
	for (size_t s = 0; s < STATES; s++)
		rate += now[s] * entropy(chain->row[s], LETTERS);
	return rate;
}

static double chain_excess(const struct chain *chain, size_t n,
			   struct random_stream *random)
{
	uint8_t *codes = malloc(n);
	size_t at = 0;
	double bits;

	for (size_t t = 0; t < n; t++) {
		codes[t] = draw(chain->row[at], LETTERS, random);
		at = at % LETTERS * LETTERS + codes[t];
	}
	bits = fitted(codes, n, LETTERS, 3);
	free(codes);
	return bits / chain_rate(chain) - 1;
}

/*
 * At the right order, above the rate, and less so with more data: the excess
 * shrinks about as 1 / n.
 */
static void test_markov_chain(void **state)
{
	struct random_stream random;
	struct chain chain;
	double small = 0, large;

	(void)state;
	random_init(&random, 1948, 0);
	chain_init(&chain, &random);
	for (unsigned i = 0; i < 5; i++)
		small += chain_excess(&chain, 10000, &random) / 5;
	large = chain_excess(&chain, 200000, &random);
	assert_true(small > 0.02);
	assert_true(small < 0.2);
	assert_true(large > 0);
	assert_true(large < small / 6);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(test_independent_bytes),
		cmocka_unit_test(test_markov_chain),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
