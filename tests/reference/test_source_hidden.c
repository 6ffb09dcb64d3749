/* Are the rates of hidden and constrained sources those published? */
#include "source/model.h"

#include "support/near.h"

#include <math.h>
#include <stdio.h>

/* The rate of the model, which is released; fails with the reason. */
static double rate_of(enum status status, struct source_model *model,
		      double error_limit)
{
	struct known_rate rate = {0};
	struct reason why = {{0}};

	assert_int_equal(status, STATUS_OK);
	status = source_model_rate(model, &rate, &why);
	if (status != STATUS_OK)
		fprintf(stderr, "%s\n", why.text);
	assert_int_equal(status, STATUS_OK);
	assert_true(rate.error <= error_limit);
	source_model_release(model);
	return rate.bits_per_symbol;
}

static enum status noisy_init(struct source_model *model, uint32_t flip,
			      uint32_t noise)
{
	const uint32_t moves[4] = {1000 - flip, flip, flip, 1000 - flip};
	const uint32_t emits[4] = {1000 - noise, noise, noise, 1000 - noise};

	return source_model_init_hidden(model, 2, 2, moves, emits, NULL);
}

static double noisy_rate(uint32_t flip, uint32_t noise, double error_limit)
{
	struct source_model model;

	return rate_of(noisy_init(&model, flip, noise), &model, error_limit);
}

static void bounds_of_a_hidden_chain(void **state)
{
	static const struct {
		unsigned n;
		double lower, upper, tolerance;
	} wanted[] = {
		/* Theorem 4.5.1 of Cover and Thomas 2006, evaluated. */
		{2, .680077, .801629, 5e-7},
		{3, .751423, .774692, 5e-7},
		{4, .763462, .767977, 5e-7},
		{8, .766592031, .766598287, 5e-10},
	};
	struct source_model model;

	(void)state;
	assert_int_equal(noisy_init(&model, 100, 100), STATUS_OK);
	for (size_t i = 0; i < sizeof(wanted) / sizeof(*wanted); i++) {
		double lower, upper;

		assert_int_equal(source_model_bounds(&model, wanted[i].n,
						     &lower, &upper, NULL),
				 STATUS_OK);
		assert_near(lower, wanted[i].lower, wanted[i].tolerance);
		assert_near(upper, wanted[i].upper, wanted[i].tolerance);
	}
	source_model_release(&model);
}

static void limits_of_hidden_chains(void **state)
{
	(void)state;
	/* The limits of the same theorem's bounds. */
	assert_near(noisy_rate(100, 100, 1e-10), .7665962932, 1e-10);
	assert_near(noisy_rate(100, 10, 1e-10), .5149160764, 1e-10);
	assert_near(noisy_rate(300, 100, 1e-10), .9510424826, 1e-10);
	assert_near(noisy_rate(100, 1, 1e-10), .4740074409, 1e-10);
}

static double h2(double p)
{
	return -p * log2(p) - (1 - p) * log2(1 - p);
}

/*
 * Small noise: h(p) + c1 eps + c2 eps^2, c1 = 2 (1 - 2p) log2((1 - p)/p)
 * (Jacquet, Seroussi and Szpankowski 2004), c2 = -[2 (1 - 2p) ln((1 - p)/p) +
 * (1 - 2p)^2 / (2 p^2 (1 - p)^2)] / ln 2 (Zuk, Kanter and Domany 2005).
 */
static void small_noise_expansion(void **state)
{
	static const uint32_t flips[2] = {100, 300};
	static const double seconds[2] = {-60.03, -3.584};

	(void)state;
	for (int i = 0; i < 2; i++) {
		double p = flips[i] / 1000., q = 1 - 2 * p, eps = .001;
		double c1 = 2 * q * log2((1 - p) / p);
		double c2 = -(2 * q * log((1 - p) / p) +
			      q * q / (2 * p * p * (1 - p) * (1 - p))) /
			    log(2);
		double seen = (noisy_rate(flips[i], 1, 1e-9) - h2(p)) / eps;

		/* What is left is of the third order, c3 eps: 3.4%. */
		assert_near((seen - c1) / eps / c2, 1, .035);
		assert_near((seen - c1) / eps, seconds[i], .005);
	}
}

/*
 * Where the second state inverts nothing and the first everything, the output
 * is the state itself; the belief must say so too.
 */
static void a_chain_seen_clearly_is_no_longer_hidden(void **state)
{
	const uint32_t moves[4] = {9, 1, 3, 7};
	const uint32_t emits[4] = {1, 0, 0, 1};
	const uint32_t moves_3[9] = {0, 8, 2, 5, 5, 0, 5, 4, 1};
	const uint32_t emits_3[9] = {1, 0, 0, 0, 1, 0, 0, 0, 1};
	struct source_model model;

	(void)state;
	assert_near(rate_of(source_model_init_hidden(&model, 2, 2, moves, emits,
						     NULL),
			    &model, 1e-8),
		    .5720694200, 1e-8);
	assert_near(rate_of(source_model_init_hidden(&model, 3, 3, moves_3,
						     emits_3, NULL),
			    &model, 1e-7),
		    .9340474, 1e-7);
}

/* Regimes that do not differ are one chain, whatever the moves. */
static void regimes_alike_are_one_chain(void **state)
{
	const uint32_t moves[4] = {1999, 1, 1, 1999};
	const uint32_t weights[8] = {9, 1, 3, 7, 9, 1, 3, 7};
	struct source_model model;

	(void)state;
	assert_near(rate_of(source_model_init_switching(&model, 2, 2, moves,
							weights, NULL),
			    &model, 1e-8),
		    .5720694200, 1e-8);
}

static void run_lengths(void **state)
{
	static const struct {
		uint32_t d, k;
		double capacity;
	} wanted[] = {
		/* Tables of capacities: Marcus, Roth and Siegel 1998; Immink
		 * 2004 (from memory; recomputed from the characteristic
		 * equations). */
		{0, 1, .694242},           {0, 2, .879146},
		{0, 3, .946777},           {1, 2, .405685},
		{1, 3, .551463},           {1, 7, .679286},
		{2, 7, .517370},           {2, 10, .541797},
		{1, MODEL_NEVER, .694242}, {2, MODEL_NEVER, .551463},
		{3, MODEL_NEVER, .464958},
	};

	(void)state;
	for (size_t i = 0; i < sizeof(wanted) / sizeof(*wanted); i++) {
		struct source_model model;

		assert_near(rate_of(source_model_init_runs(&model, wanted[i].d,
							   wanted[i].k, NULL),
				    &model, 1e-12),
			    wanted[i].capacity, 5.1e-7);
	}
}

static void parry_measure_of_the_golden_mean(void **state)
{
	const double phi = (1 + sqrt(5)) / 2;
	struct source_model model;
	const struct model_edge *edges;

	(void)state;
	/* Parry 1964: P(0 to 1) = phi^-2, P(1) = 1 / (1 + phi^2). In runs (1,
	 * no limit), state 0 has just seen a one, state 1 may give one. */
	assert_int_equal(source_model_init_runs(&model, 1, MODEL_NEVER, NULL),
			 STATUS_OK);
	assert_near(model.stationary[0], .276393, 5e-7);
	assert_int_equal(model.rows[0].count, 1);
	assert_int_equal(model.rows[1].count, 2);
	edges = model.edges + model.rows[1].first;
	assert_int_equal(edges[0].symbol, 0);
	assert_near((double)edges[0].cumulative / edges[1].cumulative,
		    1 - 1 / (phi * phi), 1e-9);
	source_model_release(&model);
	assert_near(
		rate_of(source_model_init_runs(&model, 1, MODEL_NEVER, NULL),
			&model, 1e-12),
		log2(phi), 1e-13);
}

/*
 * Shannon 1948: telegraphy, a unit of time a symbol, 1 for line closed. Dot 10,
 * dash 1110, letter space 000, word space 000000; no space follows a space.
 * C = log2 of the root of x^-2 + x^-4 + x^-5 + x^-7 + x^-8 + x^-10 = 1: .539.
 */
static void telegraph_of_shannon(void **state)
{
	enum { SIGN, CLOSED, LONG, END, OPEN, OPENER, LETTER, W4, W5, WORD };
	static const uint32_t next[20] = {
		[2 * SIGN] = OPEN,
		[2 * SIGN + 1] = CLOSED,
		[2 * CLOSED] = SIGN,
		[2 * CLOSED + 1] = LONG,
		[2 * LONG] = MODEL_NEVER,
		[2 * LONG + 1] = END,
		[2 * END] = SIGN,
		[2 * END + 1] = MODEL_NEVER,
		[2 * OPEN] = OPENER,
		[2 * OPEN + 1] = MODEL_NEVER,
		[2 * OPENER] = LETTER,
		[2 * OPENER + 1] = MODEL_NEVER,
		[2 * LETTER] = W4,
		[2 * LETTER + 1] = CLOSED,
		[2 * W4] = W5,
		[2 * W4 + 1] = MODEL_NEVER,
		[2 * W5] = WORD,
		[2 * W5 + 1] = MODEL_NEVER,
		[2 * WORD] = MODEL_NEVER,
		[2 * WORD + 1] = CLOSED,
	};
	static const int powers[6] = {2, 4, 5, 7, 8, 10};
	struct source_model model;
	double bits, sum = 0;

	(void)state;
	bits = rate_of(source_model_init_graph(&model, 10, 2, next, NULL),
		       &model, 1e-12);
	assert_near(bits, .539, 5e-4); /* as printed */
	for (size_t i = 0; i < sizeof(powers) / sizeof(*powers); i++)
		sum += exp2(-powers[i] * bits);
	assert_near(sum, 1, 1e-12);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(bounds_of_a_hidden_chain),
		cmocka_unit_test(limits_of_hidden_chains),
		cmocka_unit_test(small_noise_expansion),
		cmocka_unit_test(a_chain_seen_clearly_is_no_longer_hidden),
		cmocka_unit_test(regimes_alike_are_one_chain),
		cmocka_unit_test(run_lengths),
		cmocka_unit_test(parry_measure_of_the_golden_mean),
		cmocka_unit_test(telegraph_of_shannon),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
