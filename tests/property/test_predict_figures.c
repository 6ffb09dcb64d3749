/* Is the predictor's length the same by every way, and where it must be? */
#include "estimate/estimator.h"
#include "predict/predictor.h"

#include "support/near.h"
#include "support/samples.h"

#include <string.h>

#define BYTES 40000

static int64_t measured(enum predict_strength strength, unsigned family,
			enum predict_lanes lanes, const uint8_t *bytes)
{
	struct predict_plan plan = {.strength = strength,
				    .family = family,
				    .stride = 12,
				    .bytes = BYTES};
	struct predictor *predictor;
	int64_t q32;

	assert_int_equal(predictor_new(&plan, &predictor), STATUS_OK);
	predictor_set_lanes(predictor, lanes);
	predictor_restart(predictor, bytes);
	q32 = predictor_measure_q32(predictor, BYTES);
	predictor_free(predictor);
	return q32;
}

static void instruction_sets_agree(void **state)
{
	static uint8_t bytes[BYTES];

	(void)state;
	for (unsigned kind = 0; kind < SAMPLE_KINDS; kind++) {
		unsigned family = kind % FAMILY_BASES;

		sample_fill(kind, 21, bytes, BYTES);
		for (unsigned deep = 0; deep < 2; deep++) {
			assert_int_equal(
				measured(deep, family, LANES_BEST, bytes),
				measured(deep, family, LANES_PLAIN, bytes));
		}
	}
}

/* A predictor used before gives what a new one gives. */
static void restart_forgets(void **state)
{
	struct predict_plan plan = {.family = FAMILY_LINES, .bytes = BYTES};
	static uint8_t bytes[BYTES], other[BYTES];
	struct predictor *predictor;
	int64_t first;

	(void)state;
	sample_fill(SAMPLE_TABLE, 22, bytes, BYTES);
	sample_fill(SAMPLE_REPEATS, 23, other, BYTES);
	assert_int_equal(predictor_new(&plan, &predictor), STATUS_OK);
	predictor_restart(predictor, bytes);
	first = predictor_measure_q32(predictor, BYTES);
	predictor_restart(predictor, other);
	assert_true(predictor_measure_q32(predictor, BYTES) > 0);
	predictor_restart(predictor, bytes);
	assert_int_equal(predictor_measure_q32(predictor, BYTES), first);
	predictor_free(predictor);
}

/* Parts of odd lengths add up to the whole, by rounding of each only. */
static void parts_add_up(void **state)
{
	struct predict_plan plan = {.family = FAMILY_PROSE, .bytes = BYTES};
	static uint8_t bytes[BYTES];
	struct predictor *predictor;
	int64_t whole, parts = 0;

	(void)state;
	sample_fill(SAMPLE_REPEATS, 24, bytes, BYTES);
	assert_int_equal(predictor_new(&plan, &predictor), STATUS_OK);
	predictor_restart(predictor, bytes);
	whole = predictor_measure_q32(predictor, BYTES);
	predictor_restart(predictor, bytes);
	for (size_t at = 0, part = 1; at < BYTES; at += part) {
		part = part * 5 % 997 + 1;
		part = part < BYTES - at ? part : BYTES - at;
		parts += predictor_measure_q32(predictor, part);
	}
	/* Products are cut off at 47 bits or more. */
	assert_near((double)(parts - whole), 0, 64);
	predictor_free(predictor);
}

/* A row of the table over bytes as they are. */
static int64_t row_q16(const char *row, const uint8_t *bytes, size_t count,
		       size_t page_bytes)
{
	struct sequence sequence = {.kind = SYMBOL_BYTE,
				    .canonical = bytes,
				    .canonical_bytes = count,
				    .n = count,
				    .alphabet = 256};
	struct cuts cuts = {0};
	struct estimate_input input = {.sequence = &sequence,
				       .cuts = &cuts,
				       .page_bytes = page_bytes,
				       .threads = 1};
	struct findings findings;
	struct reason why;
	int64_t q16;

	assert_int_equal(estimator_find(row)->measure(&input, &findings, &why),
			 STATUS_OK);
	q16 = findings.series[0].costs.headline_q16;
	findings_release(&findings);
	return q16;
}

static void random_bytes_cost_eight_bits(void **state)
{
	static uint8_t bytes[1 << 18];
	double each;

	(void)state;
	for (uint64_t seed = 1; seed < 4; seed++) {
		sample_fill(SAMPLE_RANDOM, seed, bytes, sizeof(bytes));
		each = bits_from_q16(row_q16("mix", bytes, sizeof(bytes), 0)) /
		       (double)sizeof(bytes);
		/* No code does better; the width is asked for. */
		assert_in_range((int)(each * 1e6), 7999000, 8002000);
	}
}

static void zeros_cost_little(void **state)
{
	static uint8_t zeros[1000000];

	(void)state;
	/* Bits asked for, the charge for the plan among them. */
	assert_in_range(
		(int)bits_from_q16(row_q16("mix", zeros, sizeof(zeros), 0)), 1,
		300);
}

/* Pages are told apart: equal pages cost as much as one of them, each. */
static void pages_start_afresh(void **state)
{
	static uint8_t bytes[4 * 4096 + 100];
	int64_t one, four, odd;

	(void)state;
	sample_fill(SAMPLE_TABLE, 25, bytes, 4096);
	for (unsigned i = 1; i < 4; i++)
		memcpy(bytes + i * 4096, bytes, 4096);
	memcpy(bytes + 4 * 4096, bytes, 100);
	four = row_q16("mix", bytes, (size_t)4 * 4096, 4096);
	one = row_q16("mix", bytes, 4096, 4096);
	/* The charge for the plan comes once: below 16 bits. */
	assert_near(bits_from_q16(four), 4 * bits_from_q16(one), 48);
	odd = row_q16("mix", bytes, sizeof(bytes), 4096);
	assert_true(odd > four);
	/* And cost more than one stream does. */
	assert_true(row_q16("mix", bytes, (size_t)4 * 4096, 0) < four / 2);
}

static void blocks_add_up(void **state)
{
	static uint8_t bytes[BYTES];
	size_t at[] = {0, 1, 100, 9999, 20000, BYTES};
	struct sequence sequence = {.kind = SYMBOL_BYTE,
				    .canonical = bytes,
				    .canonical_bytes = BYTES,
				    .n = BYTES};
	struct cuts cuts = {.blocks = 5, .symbol = at, .byte = at};
	struct estimate_input input = {.sequence = &sequence, .cuts = &cuts};
	struct findings findings;
	struct reason why;

	(void)state;
	sample_fill(SAMPLE_PROSE, 26, bytes, BYTES);
	assert_int_equal(
		estimator_find("mix")->measure(&input, &findings, &why),
		STATUS_OK);
	assert_int_equal(costs_block_total(&findings.series[0].costs),
			 findings.series[0].costs.headline_q16);
	assert_near(bits_from_q16(findings.series[0].costs.headline_q16),
		    bits_from_q16(row_q16("mix", bytes, BYTES, 0)), 0.001);
	findings_release(&findings);
}

static void nothing_is_too_short(void **state)
{
	struct sequence sequence = {.kind = SYMBOL_BYTE};
	struct cuts cuts = {0};
	struct estimate_input input = {.sequence = &sequence, .cuts = &cuts};
	struct findings findings;
	struct reason why;
	uint8_t byte = 7;

	(void)state;
	assert_int_equal(
		estimator_find("mix")->measure(&input, &findings, &why),
		STATUS_TOO_SHORT);
	/* One byte has a price. */
	assert_true(row_q16("mix", &byte, 1, 0) > 0);
	assert_true(row_q16("mix-deep", &byte, 1, 0) > 0);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(instruction_sets_agree),
		cmocka_unit_test(restart_forgets),
		cmocka_unit_test(parts_add_up),
		cmocka_unit_test(random_bytes_cost_eight_bits),
		cmocka_unit_test(zeros_cost_little),
		cmocka_unit_test(pages_start_afresh),
		cmocka_unit_test(blocks_add_up),
		cmocka_unit_test(nothing_is_too_short),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
