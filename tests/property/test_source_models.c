/* Is what a model draws worth, on average, the rate that it states? */
#include "source/frozen.h"

#include "support/near.h"
#include "support/plugin.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

enum { SYMBOLS = 400000, BATCHES = 100 };

/*
 * P(symbol | all before) by the forward recursion (Baum and others 1970) over
 * rows, from the model's own rows but apart from its rate: belief is over
 * regimes, the context is known after the first symbols are summed over all.
 */
struct filter {
	const struct source_model *model;
	double *belief; /* rows */
	double *after;
};

static double move_of(const struct source_model *model, uint32_t from,
		      uint32_t to)
{
	const uint32_t *row = model->moves + (size_t)from * model->regimes;

	return (double)(row[to] - (to ? row[to - 1] : 0)) /
	       row[model->regimes - 1];
}

/* Adds to after what row i, of belief b, contributes with the symbol. */
static void see_row(struct filter *filter, uint32_t i, uint8_t symbol)
{
	const struct source_model *model = filter->model;
	const struct model_row *row = &model->rows[i];
	const struct model_edge *edges = model->edges + row->first;
	double total = edges[row->count - 1].cumulative;

	for (uint32_t e = 0; e < row->count; e++) {
		double p = (edges[e].cumulative -
			    (e ? edges[e - 1].cumulative : 0)) /
			   total;

		if (edges[e].symbol != symbol)
			continue;
		for (uint32_t r = 0; r < model->regimes; r++)
			filter->after[r * model->contexts + edges[e].next] +=
				filter->belief[i] * p *
				move_of(model, i / model->contexts, r);
	}
}

static double see(struct filter *filter, uint8_t symbol)
{
	uint32_t rows = filter->model->regimes * filter->model->contexts;
	double *held = filter->belief, sum = 0;

	memset(filter->after, 0, rows * sizeof(double));
	for (uint32_t i = 0; i < rows; i++) {
		if (filter->belief[i] > 0)
			see_row(filter, i, symbol);
	}
	for (uint32_t i = 0; i < rows; i++)
		sum += filter->after[i];
	for (uint32_t i = 0; i < rows; i++)
		filter->after[i] /= sum;
	filter->belief = filter->after;
	filter->after = held;
	return sum;
}

/* Mean and standard error, by batches, of -log2 P over what was drawn. */
static void code_length(const struct source_model *model, const uint8_t *bytes,
			double *mean, double *error)
{
	uint32_t rows = model->regimes * model->contexts;
	struct filter filter = {model, malloc(rows * sizeof(double)),
				malloc(rows * sizeof(double))};
	double sum = 0, squares = 0;

	assert_non_null(filter.belief);
	assert_non_null(filter.after);
	memcpy(filter.belief, model->stationary, rows * sizeof(double));
	for (size_t b = 0; b < BATCHES; b++) {
		double batch = 0;

		for (size_t i = 0; i < SYMBOLS / BATCHES; i++)
			batch -= log2(see(&filter,
					  bytes[b * (SYMBOLS / BATCHES) + i]));
		batch /= SYMBOLS / BATCHES;
		sum += batch;
		squares += batch * batch;
	}
	*mean = sum / BATCHES;
	squares = squares / BATCHES - *mean * *mean;
	*error = sqrt(fmax(squares, 0) / (BATCHES - 1));
	free(filter.belief);
	free(filter.after);
}

/* Shannon, McMillan and Breiman: -log2 P(x^n) / n tends to the rate. */
static void ideal_code_length_is_the_rate(void **state)
{
	const struct frozen_source *entry;
	uint8_t *bytes = malloc(SYMBOLS);

	(void)state;
	assert_non_null(bytes);
	for (size_t i = 0; (entry = frozen_at(i)); i++) {
		struct source_model model;
		struct known_rate rate;
		double mean, error;

		assert_int_equal(entry->init(&model, NULL), STATUS_OK);
		assert_int_equal(source_model_rate(&model, &rate, NULL),
				 STATUS_OK);
		assert_true(rate.error <= 1e-7);
		source_model_make(&model, SYMBOLS, 5, bytes);
		code_length(&model, bytes, &mean, &error);
		/* Four standard errors; uniform symbols have none. */
		assert_near(mean, rate.bits_per_symbol, 4 * error + 1e-9);
		source_model_release(&model);
	}
	free(bytes);
}

/* h_(order + 1) counted from the bytes alone, for sources well sampled. */
static void counted_entropy_is_the_rate(void **state)
{
	static const char *const names[] = {
		"zipf-bytes",  "uniform-201",     "sticky-bit",
		"two-state",   "shannon-digrams", "golden-mean",
		"order-3-bit", "runs-1-3",        "runs-2-7",
	};
	uint8_t *bytes = malloc(SYMBOLS);

	(void)state;
	assert_non_null(bytes);
	for (size_t i = 0; i < sizeof(names) / sizeof(*names); i++) {
		const struct frozen_source *entry = frozen_find(names[i]);
		struct codes longer = {0}, shorter = {0};
		struct source_model model;
		struct known_rate rate;

		assert_int_equal(entry->init(&model, NULL), STATUS_OK);
		assert_int_equal(source_model_rate(&model, &rate, NULL),
				 STATUS_OK);
		source_model_make(&model, SYMBOLS, 6, bytes);
		for (size_t at = 0; at + entry->order < SYMBOLS; at++) {
			uint64_t code = 1;

			for (unsigned k = 0; k < entry->order; k++)
				code = code << 8 | bytes[at + k];
			codes_add(&shorter, code);
			codes_add(&longer,
				  code << 8 | bytes[at + entry->order]);
		}
		/* Standard errors are below .002 at 400000 symbols. */
		assert_near(codes_entropy(&longer) - codes_entropy(&shorter),
			    rate.bits_per_symbol, .008);
		codes_release(&longer);
		codes_release(&shorter);
		source_model_release(&model);
	}
	free(bytes);
}

static void bounds_enclose_the_rate_and_close_in(void **state)
{
	static const char *const names[] = {"noisy-fast",   "noisy-sticky",
					    "noisy-faint",  "noisy-long",
					    "noisy-uneven", "regimes-bits"};

	(void)state;
	for (size_t i = 0; i < sizeof(names) / sizeof(*names); i++) {
		double lower = 0, upper = HUGE_VAL;
		struct source_model model;
		struct known_rate rate;

		assert_int_equal(frozen_find(names[i])->init(&model, NULL),
				 STATUS_OK);
		assert_int_equal(source_model_rate(&model, &rate, NULL),
				 STATUS_OK);
		for (unsigned n = 1; n <= 14; n++) {
			double low, high;

			assert_int_equal(source_model_bounds(&model, n, &low,
							     &high, NULL),
					 STATUS_OK);
			/* Theorem 4.5.1: monotone, and on either side. */
			assert_true(low >= lower - 1e-12);
			assert_true(high <= upper + 1e-12);
			assert_true(low <= rate.bits_per_symbol + 1e-9);
			assert_true(high >= rate.bits_per_symbol - 1e-9);
			lower = low;
			upper = high;
		}
		source_model_release(&model);
	}
}

/* The words of n bits without two ones in a row number F_(n + 2). */
static void golden_mean_words_are_fibonacci(void **state)
{
	static const size_t wanted[] = {2, 3, 5, 8, 13, 21, 34, 55, 89, 144};
	uint8_t *bytes = malloc(SYMBOLS), *seen = calloc(1024, 1);
	struct source_model model;

	(void)state;
	assert_non_null(bytes);
	assert_non_null(seen);
	assert_int_equal(frozen_find("golden-mean")->init(&model, NULL),
			 STATUS_OK);
	source_model_make(&model, SYMBOLS, 7, bytes);
	for (size_t n = 1; n <= 10; n++) {
		size_t words = 0;

		memset(seen, 0, 1024);
		for (size_t i = 0; i + n <= SYMBOLS; i++) {
			size_t word = 0;

			for (size_t k = 0; k < n; k++)
				word = 2 * word + bytes[i + k];
			words += !seen[word];
			seen[word] = 1;
		}
		assert_int_equal(words, wanted[n - 1]);
	}
	source_model_release(&model);
	free(bytes);
	free(seen);
}

/* Runs of zeros of every length from d to k and of no other. */
static void runs_keep_their_limits(void **state)
{
	uint8_t *bytes = malloc(SYMBOLS);
	unsigned lengths[64] = {0}, zeros = 0;
	struct source_model model;
	bool started = false;

	(void)state;
	assert_non_null(bytes);
	assert_int_equal(source_model_init_runs(&model, 2, 7, NULL), STATUS_OK);
	source_model_make(&model, SYMBOLS, 8, bytes);
	for (size_t i = 0; i < SYMBOLS; i++) {
		if (!bytes[i]) {
			zeros++;
			assert_true(zeros <= 7);
			continue;
		}
		lengths[zeros] += started;
		started = true;
		zeros = 0;
	}
	for (unsigned i = 0; i < 64; i++)
		assert_int_equal(lengths[i] > 0, i >= 2 && i <= 7);
	source_model_release(&model);
	free(bytes);
}

/* The first symbol already follows the stationary law. */
static void the_start_is_stationary(void **state)
{
	enum { DRAWS = 20000 };
	struct source_model model;
	unsigned ones = 0;

	(void)state;
	assert_int_equal(frozen_find("two-state")->init(&model, NULL),
			 STATUS_OK);
	for (uint64_t seed = 0; seed < DRAWS; seed++) {
		uint8_t byte;

		source_model_make(&model, 1, seed, &byte);
		ones += byte;
	}
	/* 1/4, five standard errors of .00306. */
	assert_near((double)ones / DRAWS, .25, .0154);
	source_model_release(&model);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(ideal_code_length_is_the_rate),
		cmocka_unit_test(counted_entropy_is_the_rate),
		cmocka_unit_test(bounds_enclose_the_rate_and_close_in),
		cmocka_unit_test(golden_mean_words_are_fibonacci),
		cmocka_unit_test(runs_keep_their_limits),
		cmocka_unit_test(the_start_is_stationary),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
