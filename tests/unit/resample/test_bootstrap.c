/* Do intervals refuse, widen, pair and cover as they promise? */
#include "resample/bootstrap.h"

#include <math.h>
#include <string.h>

#include "base/random.h"
#include "resample/batches.h"
#include "resample/block_length.h"
#include "resample/normal.h"
#include "support/near.h"

#define BLOCKS_MOST 3200

static double bits[BLOCKS_MOST], symbols[BLOCKS_MOST];

/* AR(1) blocks of mean 2.385 bits a symbol, 100 symbols each. */
static void fill(double phi, size_t blocks, uint64_t run)
{
	struct random_stream random;
	double x = 0;

	random_init(&random, 3, run);
	for (size_t i = 0; i < blocks; i++) {
		double unit = random_unit(&random) + 0x1p-54;

		x = phi * x + normal_quantile(unit) * sqrt(1 - phi * phi);
		symbols[i] = 100;
		bits[i] = 100 * (2.385 + .1 * x);
	}
}

static struct bootstrap_result interval_of(const struct block_series *series,
					   uint64_t seed, const char *corpus)
{
	const struct bootstrap_rules rules = {1999, .95, seed, corpus};
	struct bootstrap_result result;
	struct bootstrap *bootstrap;

	assert_int_equal(bootstrap_new(&rules, &bootstrap), STATUS_OK);
	assert_int_equal(bootstrap_interval(bootstrap, series, &result),
			 STATUS_OK);
	bootstrap_free(bootstrap);
	return result;
}

static struct bootstrap_result interval(size_t blocks, uint64_t seed,
					const char *corpus)
{
	const struct block_series series = {bits, symbols, blocks, 0, false};

	return interval_of(&series, seed, corpus);
}

static void no_blocks_give_a_reason(void **state)
{
	struct bootstrap_result result = interval(0, 1, "a");

	(void)state;
	assert_false(result.known);
	assert_string_equal(result.reason, "no blocks to resample");
}

static void a_constant_series_has_no_width(void **state)
{
	struct bootstrap_result result;

	(void)state;
	for (size_t i = 0; i < 100; i++) {
		symbols[i] = 64 + (double)(i % 3);
		bits[i] = 7.25 * symbols[i];
	}
	result = interval(100, 1, "a");
	assert_true(result.known && result.constant);
	assert_int_equal(result.block_length, 1);
	assert_near(result.low, 7.25, 1e-12);
	assert_near(result.high, 7.25, 1e-12);
	assert_near(result.effective_blocks, 100, 0);
}

/* The first block of zeros costs bits and the others none. */
static void one_odd_block_is_no_spread(void **state)
{
	struct bootstrap_result result;

	(void)state;
	for (size_t i = 0; i < 100; i++) {
		symbols[i] = 1000;
		bits[i] = i ? 0.25 : 65;
	}
	result = interval(100, 1, "a");
	assert_false(result.known);
	assert_non_null(strstr(result.reason, "about 1 of the blocks"));
}

/* One long swing: so few independent pieces that nothing can be said. */
/*
 * Four blocks at the front cost 3 to 1 bits a symbol more. They are in the
 * mean; the spread is that of the 96 others, as if there were 100 of those.
 * White 1997, by hand: dropping one lowers the error, dropping a fifth, whose
 * deviation is like any other, does not.
 */
static void a_start_up_is_no_spread(void **state)
{
	struct block_series series = {bits, symbols, 100, 0, true};
	struct bootstrap_result still, started;

	(void)state;
	fill(0, 100, 5);
	still = interval_of(&series, 1, "a");
	for (size_t i = 0; i < 4; i++)
		bits[i] += 100 * (3 - .5 * (double)i);
	started = interval_of(&series, 1, "a");
	assert_true(started.known && started.start_up >= 4 &&
		    started.start_up <= 6);
	assert_near(started.mean - still.mean, .01 * (3 + 2.5 + 2 + 1.5),
		    1e-12);
	assert_near(started.standard_error / still.standard_error, 1, .1);
	assert_true(started.low < started.mean && started.mean < started.high);
	series.learns = false;
	started = interval_of(&series, 1, "a");
	assert_int_equal(started.start_up, 0);
	assert_true(!started.known ||
		    started.standard_error > 3 * still.standard_error);
}

/* Independent blocks without a start-up: little is dropped, little is lost. */
static void stillness_is_no_start_up(void **state)
{
	struct block_series series = {bits, symbols, 100, 0, true};
	double ratio = 0;

	(void)state;
	for (uint64_t run = 0; run < 200; run++) {
		double learning;

		fill(0, 100, 300 + run);
		learning = interval_of(&series, 1, "a").standard_error;
		ratio += learning / interval(100, 1, "a").standard_error / 200;
	}
	print_message("error with the rule by that without: %.4f\n", ratio);
	assert_near(ratio, 1, .03);
}

/* What lasts longer than a tenth of the blocks is a trend, not a start. */
static void a_long_decline_is_kept(void **state)
{
	struct block_series series = {bits, symbols, 100, 0, true};
	struct bootstrap_result result;

	(void)state;
	for (size_t i = 0; i < 100; i++) {
		symbols[i] = 100;
		bits[i] = 1000 - (double)i + (double)(i % 2);
	}
	result = interval_of(&series, 1, "a");
	assert_true(result.start_up <= 10);
	assert_true(result.standard_error > 0);
}

/* A known quarter of the variance is taken away; never over half of it. */
static void excess_is_taken_away(void **state)
{
	struct block_series series = {bits, symbols, 100, 0, false};
	struct bootstrap_result all, less;
	double variance;

	(void)state;
	fill(0, 100, 9);
	all = interval_of(&series, 1, "a");
	variance = all.standard_error * 10000 * all.standard_error * 10000;
	series.excess = variance / 4;
	less = interval_of(&series, 1, "a");
	assert_near(less.standard_error / all.standard_error, sqrt(.75), 1e-9);
	assert_near((less.high - less.low) / (all.high - all.low), sqrt(.75),
		    1e-9);
	series.excess = 5 * variance;
	less = interval_of(&series, 1, "a");
	assert_near(less.standard_error / all.standard_error, sqrt(.5), 1e-9);
}

static void too_few_effective_blocks_are_refused(void **state)
{
	struct bootstrap_result result;

	(void)state;
	for (size_t i = 0; i < 100; i++) {
		symbols[i] = 100;
		bits[i] = 100 * (2 + sin((double)i / 16));
	}
	result = interval(100, 1, "a");
	assert_false(result.known);
	assert_true(result.effective_blocks < EFFECTIVE_BLOCKS_MIN);
	assert_non_null(strstr(result.reason, "times as much data"));
	assert_true(result.drifts && result.guarded);
}

/* The mean is the sum of bits over the sum of symbols, whatever the blocks. */
static void the_mean_is_a_ratio(void **state)
{
	struct bootstrap_result result;
	struct random_stream random;

	(void)state;
	fill(0, 100, 1);
	random_init(&random, 6, 0);
	for (size_t i = 0; i < 100; i++) {
		if (random_below(&random, 2))
			continue;
		symbols[i] = 300;
		bits[i] *= 2;
	}
	result = interval(100, 1, "a");
	assert_true(result.known);
	assert_true(result.low < result.mean && result.mean < result.high);
	assert_near(result.mean, 2.385 * (2 + 1) / 4, .15);
}

static void only_seed_and_corpus_change_the_draws(void **state)
{
	struct bootstrap_result first, again, other, named;

	(void)state;
	fill(.3, 400, 9);
	first = interval(400, 1, "gauge");
	again = interval(400, 1, "gauge");
	other = interval(400, 2, "gauge");
	named = interval(400, 1, "duty");
	assert_memory_equal(&first.low, &again.low, sizeof(double));
	assert_true(first.low != other.low && first.low != named.low);
	/* Draws add only noise: 3% of the half-width at 1999 of them. */
	assert_near(first.low, other.low, .15 * (first.high - first.low));
}

static void correlation_shortens_and_widens(void **state)
{
	struct bootstrap_result loose, tight;

	(void)state;
	fill(0, 3200, 4);
	loose = interval(3200, 1, "a");
	fill(.8, 3200, 4);
	tight = interval(3200, 1, "a");
	assert_true(tight.block_length > 4 * loose.block_length);
	/* Long-run variance of AR(1) over i.i.d.: (1 + phi) / (1 - phi) = 9. */
	assert_near(tight.standard_error / loose.standard_error, 3, .6);
}

static void drift_is_seen_and_stillness_is_not(void **state)
{
	struct batches batches;
	size_t alarms = 0;

	(void)state;
	for (uint64_t run = 0; run < 400; run++) {
		fill(0, 100, run);
		for (size_t i = 0; i < 100; i++)
			bits[i] -= 238.5;
		batches_find(bits, 100, &batches);
		alarms += batches.drifts;
	}
	/* Two rules of about 1% each; 3.3% was the worst seen on sources. */
	assert_true(alarms <= 16);
	for (size_t i = 0; i < 100; i++)
		bits[i] += (double)i;
	batches_find(bits, 100, &batches);
	assert_true(batches.drifts);
}

/* Nominal .95; 2000 runs have a standard error of .005. */
static void coverage_is_nominal(void **state)
{
	static const struct {
		double phi;
		size_t blocks;
		double least;
	} rows[] = {{0, 100, .93}, {.3, 100, .92}, {.6, 800, .93}};

	(void)state;
	for (size_t r = 0; r < 3; r++) {
		unsigned runs = rows[r].blocks > 100 ? 400 : 1000;
		unsigned hits = 0, told = 0;
		double share;

		for (unsigned run = 0; run < runs; run++) {
			struct bootstrap_result result;

			fill(rows[r].phi, rows[r].blocks, 1000 + run);
			result = interval(rows[r].blocks, run, "a");
			if (!result.known)
				continue;
			told++;
			assert_true(result.low <= result.mean &&
				    result.mean <= result.high);
			hits += result.low <= 2.385 && 2.385 <= result.high;
		}
		share = (double)hits / told;
		print_message("phi %.1f: coverage %.3f of %u of %u\n",
			      rows[r].phi, share, told, runs);
		assert_true(told >= runs * 6 / 10);
		assert_true(share >= rows[r].least - .015 && share <= .98);
	}
}

static void lengths_refuse_and_clamp(void **state)
{
	struct block_length length = {.circular = 2.5};

	(void)state;
	assert_int_equal(block_length_find(bits, 7, &length), STATUS_TOO_SHORT);
	assert_near(length.circular, 2.5, 0);
	/* ceil(min(3 sqrt n, n / 3)) at 100 values is 30. */
	assert_int_equal(block_length_clamp(99, 100), 30);
	assert_int_equal(block_length_clamp(2.1, 100), 3);
	assert_int_equal(block_length_clamp(-1, 100), 1);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(no_blocks_give_a_reason),
		cmocka_unit_test(a_constant_series_has_no_width),
		cmocka_unit_test(one_odd_block_is_no_spread),
		cmocka_unit_test(a_start_up_is_no_spread),
		cmocka_unit_test(stillness_is_no_start_up),
		cmocka_unit_test(a_long_decline_is_kept),
		cmocka_unit_test(excess_is_taken_away),
		cmocka_unit_test(too_few_effective_blocks_are_refused),
		cmocka_unit_test(the_mean_is_a_ratio),
		cmocka_unit_test(only_seed_and_corpus_change_the_draws),
		cmocka_unit_test(correlation_shortens_and_widens),
		cmocka_unit_test(drift_is_seen_and_stillness_is_not),
		cmocka_unit_test(coverage_is_nominal),
		cmocka_unit_test(lengths_refuse_and_clamp),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
