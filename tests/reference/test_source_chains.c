/* Are the rates of chains those that were published for them? */
#include "source/model.h"

#include "support/near.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>

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

static double iid_rate(uint32_t alphabet, const uint32_t *weights)
{
	struct source_model model;

	return rate_of(source_model_init_iid(&model, alphabet, weights, NULL),
		       &model, 1e-12);
}

static void independent_symbols(void **state)
{
	const uint32_t quarters[4] = {4, 2, 1, 1};
	const uint32_t horses[8] = {32, 16, 8, 4, 1, 1, 1, 1};
	const uint32_t letters[5] = {4, 1, 2, 2, 1};
	uint32_t even[201];

	(void)state;
	for (int i = 0; i < 201; i++)
		even[i] = 3;
	/* Cover and Thomas 2006, examples 2.1.1; horse race of section 2.1. */
	assert_near(iid_rate(4, quarters), 1.75, 1e-14);
	assert_near(iid_rate(8, horses), 2, 1e-14);
	/* Shannon 1948, letters A to E (by hand: 2.1219280949). */
	assert_near(iid_rate(5, letters), 2.1219280949, 1e-10);
	assert_near(iid_rate(201, even), log2(201), 1e-14);
}

/* Weights of p to 2^-31 of their largest. */
static double rounded_rate(const double *p)
{
	uint32_t weights[256];
	double total = 0;

	for (int i = 0; i < 256; i++)
		total += p[i];
	for (int i = 0; i < 256; i++)
		weights[i] = (uint32_t)(p[i] / total * 0x1p31 + .5);
	return iid_rate(256, weights);
}

static void geometric_and_poisson_laws(void **state)
{
	static const struct {
		double lambda, bits;
	} poisson[] = {
		/* By arithmetic from the definition; the large-lambda form
		 * .5 log2(2 pi e lambda) gives 3.708 and 5.369. */
		{1, 1.8824894320},
		{10, 3.6953334113},
		{100, 5.3678153452},
	};
	double p[256];

	(void)state;
	/* Cover and Thomas 2006, problem 2.1: h(p) / p. */
	for (int i = 0; i < 256; i++)
		p[i] = ldexp(1, -i);
	assert_near(rounded_rate(p), 2, 2e-8);
	for (int i = 0; i < 256; i++)
		p[i] = .1 * pow(.9, i);
	assert_near(rounded_rate(p), 4.6899559359, 2e-7);
	for (size_t k = 0; k < sizeof(poisson) / sizeof(*poisson); k++) {
		for (int i = 0; i < 256; i++)
			p[i] = exp(i * log(poisson[k].lambda) -
				   poisson[k].lambda - lgamma(i + 1));
		assert_near(rounded_rate(p), poisson[k].bits, 2e-7);
	}
}

static double chain_rate(uint32_t alphabet, unsigned order,
			 const uint32_t *weights)
{
	struct source_model model;

	return rate_of(source_model_init_markov(&model, alphabet, order,
						weights, NULL),
		       &model, 1e-12);
}

static void two_state_chain(void **state)
{
	const uint32_t weights[4] = {9, 1, 3, 7};
	struct source_model model;

	(void)state;
	/* Cover and Thomas 2006, section 4.2. */
	assert_near(chain_rate(2, 1, weights), .5720694200, 5e-11);
	assert_int_equal(source_model_init_markov(&model, 2, 1, weights, NULL),
			 STATUS_OK);
	assert_near(model.stationary[0], .75, 1e-15);
	assert_near(model.stationary[1], .25, 1e-15);
	source_model_release(&model);
}

static void digrams_of_shannon(void **state)
{
	/* Shannon 1948: p_A(B) = 4/5, p_A(C) = 1/5; p_B(A) = p_B(B) = 1/2;
	 * p_C(A) = 1/2, p_C(B) = 2/5, p_C(C) = 1/10; p = (9, 16, 2)/27. */
	const uint32_t weights[9] = {0, 8, 2, 5, 5, 0, 5, 4, 1};
	struct source_model model;

	(void)state;
	assert_int_equal(source_model_init_markov(&model, 3, 1, weights, NULL),
			 STATUS_OK);
	assert_near(model.stationary[0], 9 / 27., 1e-15);
	assert_near(model.stationary[1], 16 / 27., 1e-15);
	assert_near(model.stationary[2], 2 / 27., 1e-15);
	source_model_release(&model);
	assert_near(chain_rate(3, 1, weights), .9340474, 5e-8);
}

static void golden_mean_by_its_best_chain(void **state)
{
	/* Cover and Thomas 2006, problem 4.7: rate h(p) / (1 + p), largest
	 * at p = .3819660113, where it is log2 of the golden ratio. */
	const uint32_t best[4] = {618033989, 381966011, 1, 0};
	const uint32_t half[4] = {1, 1, 1, 0};

	(void)state;
	assert_near(chain_rate(2, 1, best), .6942419136, 5e-11);
	assert_near(chain_rate(2, 1, half), 2 / 3., 1e-14);
}

enum piece { KING, ROOK, BISHOP, QUEEN, KNIGHT };

static bool moves_to(enum piece piece, int dx, int dy)
{
	bool straight = !dx || !dy, diagonal = abs(dx) == abs(dy);

	if (!dx && !dy)
		return false;
	switch (piece) {
	case KING:
		return abs(dx) <= 1 && abs(dy) <= 1;
	case ROOK:
		return straight;
	case BISHOP:
		return diagonal;
	case QUEEN:
		return straight || diagonal;
	default:
		return abs(dx * dy) == 2;
	}
}

/*
 * A piece that takes any of its moves alike on the squares of colour colour (0
 * or 1), or of either (2), but for the centre where skip is set.
 */
static double walk_rate(enum piece piece, int side, int colour, bool skip)
{
	static uint32_t weights[64 * 64];
	int squares[64], count = 0;

	for (int s = 0; s < side * side; s++) {
		if (colour < 2 && (s / side + s % side) % 2 != colour)
			continue;
		if (!skip || s != side * side / 2)
			squares[count++] = s;
	}
	for (int i = 0; i < count; i++) {
		for (int j = 0; j < count; j++)
			weights[i * count + j] = moves_to(
				piece, squares[i] / side - squares[j] / side,
				squares[i] % side - squares[j] % side);
	}
	return chain_rate((uint32_t)count, 1, weights);
}

static void chess_pieces_walk(void **state)
{
	(void)state;
	/* Random walks on graphs, Cover and Thomas 2006, section 4.3, whose
	 * exercise for the 3 x 3 board prints 2.24, 2, 1.33 and 1 for the
	 * bishop's colours, 2.65; more digits by sum d/2E log2 d. */
	assert_near(walk_rate(KING, 3, 2, false), 2.236453, 5e-7);
	assert_near(walk_rate(ROOK, 3, 2, false), 2, 1e-13);
	assert_near(walk_rate(BISHOP, 3, 0, false), 4 / 3., 1e-13);
	assert_near(walk_rate(BISHOP, 3, 1, false), 1, 1e-13);
	assert_near(walk_rate(QUEEN, 3, 2, false), 2.644254, 5e-7);
	assert_near(walk_rate(KNIGHT, 3, 2, true), 1, 1e-13);
	assert_near(walk_rate(KING, 8, 2, false), 2.765836, 5e-7);
	assert_near(walk_rate(ROOK, 8, 2, false), 3.807355, 5e-7);
	assert_near(walk_rate(QUEEN, 8, 2, false), 4.512504, 5e-7);
	assert_near(walk_rate(BISHOP, 8, 0, false), 3.160528, 5e-7);
	assert_near(walk_rate(KNIGHT, 8, 2, false), 2.494629, 5e-7);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(independent_symbols),
		cmocka_unit_test(geometric_and_poisson_laws),
		cmocka_unit_test(two_state_chain),
		cmocka_unit_test(digrams_of_shannon),
		cmocka_unit_test(golden_mean_by_its_best_chain),
		cmocka_unit_test(chess_pieces_walk),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
