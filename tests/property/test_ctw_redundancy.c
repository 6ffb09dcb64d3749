/* Does context-tree weighting keep its published bound on tree sources? */
#include "estimate/ctw_model.h"

#include "base/random.h"
#include "support/near.h"

#include <math.h>
#include <stdlib.h>

#define DEPTH 8

/*
 * A complete binary tree of past symbols, the nearest at the root: a leaf holds
 * the probability of a one. Node 1 is the root, 2 i + x the child of i that
 * has x one place further back.
 */
struct tree_source {
	double one[2 << DEPTH];   /* below 0: an inner node */
	unsigned leaves, shallow; /* |S| and those above DEPTH */
};

static void grow(struct tree_source *source, struct random_stream *random,
		 unsigned node, unsigned depth)
{
	source->one[node] = -1;
	if (depth < DEPTH && random_below(random, 100) < 72) {
		grow(source, random, 2 * node, depth + 1);
		grow(source, random, 2 * node + 1, depth + 1);
		return;
	}
	source->one[node] = random_unit(random);
	if (random_below(random, 3) == 0)
		source->one[node] = random_below(random, 2) ? .001 : .998;
	source->leaves++;
	source->shallow += depth < DEPTH;
}

static double probability_of_one(const struct tree_source *source,
				 const uint8_t *symbols, size_t t)
{
	unsigned node = 1;

	while (source->one[node] < 0)
		node = 2 * node + symbols[--t];
	return source->one[node];
}

/* Fills n symbols after DEPTH zeros; returns -log2 of their probability. */
static double draw(const struct tree_source *source,
		   struct random_stream *random, uint8_t *symbols, size_t n)
{
	double bits = 0;

	for (size_t t = 0; t < DEPTH; t++)
		symbols[t] = 0;
	for (size_t t = DEPTH; t < DEPTH + n; t++) {
		double one = probability_of_one(source, symbols, t);

		symbols[t] = random_unit(random) < one;
		bits -= log2(symbols[t] ? one : 1 - one);
	}
	return bits;
}

/*
 * Theorem 2 of Willems, Shtarkov, Tjalkens 1995 (from memory), without the two
 * bits of arithmetic coding:
 *   L <= -log2 P(x|S, theta) + Gamma_D(S) + |S| gamma(T / |S|),
 * Gamma_D(S) = |S| - 1 + (leaves above D), gamma(z) = z below 1, and
 * half log2 z + 1 from there.
 */
static double bound(const struct tree_source *source, size_t n, double bits)
{
	double leaves = source->leaves, z = (double)n / leaves;
	double estimate = z < 1 ? z : log2(z) / 2 + 1;

	return bits + leaves - 1 + source->shallow + leaves * estimate;
}

/* The bound holds for every sequence, not only on average. */
static void every_sequence_of_tree_sources(void **state)
{
	static const size_t lengths[] = {10, 100, 1000, 10000, 60000};
	uint8_t *symbols = calloc(DEPTH + 60000, 1);
	struct random_stream random;

	(void)state;
	random_init(&random, 1, 0);
	for (unsigned round = 0; round < 60; round++) {
		struct tree_source source = {.leaves = 0};
		size_t n = lengths[round % 5];
		struct ctw_model model;
		double own, got;

		grow(&source, &random, 1, 0);
		own = draw(&source, &random, symbols, n);
		assert_int_equal(ctw_model_init(&model, 2, DEPTH, 8192),
				 STATUS_OK);
		got = (double)ctw_model_measure_q32(&model, symbols, 0, DEPTH,
						    DEPTH + n) *
		      0x1p-32;
		assert_int_equal(model.tree.refused, 0);
		assert_true(got <= bound(&source, n, own) + 1e-3);
		/* Nor below what luck allows: 2^-40 by Markov's inequality. */
		assert_true(got >= own - 40);
		ctw_model_release(&model);
	}
	free(symbols);
}

/* A fair coin has nothing to learn: within half log2 n + 1 + 1 of n bits, and
 * the deeper trees do not add to it. */
static void a_fair_coin(void **state)
{
	const size_t n = 50000;
	uint8_t *symbols = calloc(n, 1);
	struct random_stream random;

	(void)state;
	random_init(&random, 2, 0);
	for (size_t t = 0; t < n; t++)
		symbols[t] = (uint8_t)random_below(&random, 2);
	for (unsigned depth = 0; depth < 20; depth += 6) {
		struct ctw_model model;
		double bits;

		assert_int_equal(ctw_model_init(&model, 2, depth, n * 64),
				 STATUS_OK);
		bits = (double)ctw_model_measure_q32(&model, symbols, 0, 0, n) *
		       0x1p-32;
		assert_true(bits <= (double)n + log2((double)n) / 2 + 2);
		assert_true(bits >= (double)n - 40);
		ctw_model_release(&model);
	}
	free(symbols);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(every_sequence_of_tree_sources),
		cmocka_unit_test(a_fair_coin),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
