/* Can a decoder live on the predictor's code length? */
#include "support/modelled.h"
#include "support/near.h"
#include "support/samples.h"

#include <string.h>

#define BYTES 65536

struct bench {
	uint8_t bytes[BYTES], decoded[BYTES];
	struct buffer code;
};

static int setup(void **state)
{
	static struct bench bench;

	*state = &bench;
	return 0;
}

static struct predictor *new_predictor(const struct predict_plan *plan,
				       enum predict_lanes lanes)
{
	struct predictor *predictor;

	assert_int_equal(predictor_new(plan, &predictor), STATUS_OK);
	predictor_set_lanes(predictor, lanes);
	return predictor;
}

/* Bits that the estimator's way over the bytes counts. */
static double claimed_bits(const struct predict_plan *plan,
			   const uint8_t *bytes, size_t count)
{
	struct predictor *predictor = new_predictor(plan, LANES_BEST);
	int64_t q32;

	predictor_restart(predictor, bytes);
	q32 = predictor_measure_q32(predictor, count);
	predictor_free(predictor);
	return (double)q32 * 0x1p-32;
}

static void encode(struct bench *bench, const struct predict_plan *plan)
{
	struct predictor *predictor = new_predictor(plan, LANES_BEST);
	struct coded_model model = modelled(predictor);

	buffer_init(&bench->code, 4 * BYTES);
	coder_encode(&model, bench->bytes, BYTES, &bench->code);
	predictor_free(predictor);
}

/* With plain C and a buffer that holds nothing but what was decoded. */
static void decode(struct bench *bench, const struct predict_plan *plan)
{
	struct predictor *predictor = new_predictor(plan, LANES_PLAIN);
	struct coded_model model = modelled(predictor);

	coder_decode(&model, &bench->code, bench->decoded, BYTES);
	predictor_free(predictor);
}

static void round_trip(struct bench *bench, const struct predict_plan *plan)
{
	double bits, coded;

	encode(bench, plan);
	bits = claimed_bits(plan, bench->bytes, BYTES);
	coded = 8.0 * (double)bench->code.length;
	/* An arithmetic coder's length: two bytes and rounding. */
	assert_near(coded, bits, 64 + 1e-4 * bits);
	decode(bench, plan);
	assert_memory_equal(bench->decoded, bench->bytes, BYTES);
	buffer_release(&bench->code);
}

static void every_kind_comes_back(struct bench *bench,
				  enum predict_strength strength)
{
	for (unsigned kind = 0; kind < SAMPLE_KINDS; kind++) {
		struct predict_plan plan;

		print_message("%s\n", sample_names[kind]);
		sample_fill(kind, 11, bench->bytes, BYTES);
		plan = modelled_plan(bench->bytes, BYTES, strength);
		round_trip(bench, &plan);
	}
}

static void nightly_comes_back(void **state)
{
	every_kind_comes_back(*state, STRENGTH_NIGHTLY);
}

static void deep_comes_back(void **state)
{
	every_kind_comes_back(*state, STRENGTH_DEEP);
}

/* Families on data that they are not made for, and odd strides. */
static void every_family_comes_back(void **state)
{
	struct bench *bench = *state;

	for (unsigned family = 0; family < FAMILY_COUNT; family++) {
		struct predict_plan plan = {
			.family = family, .stride = 13, .bytes = BYTES};

		if (family == FAMILY_BASES)
			continue;
		sample_fill(family % 2 ? SAMPLE_TABLE : SAMPLE_CODE, 12,
			    bench->bytes, BYTES);
		round_trip(bench, &plan);
	}
}

static void corrupted_tail_leaves_the_rest(void **state)
{
	static const enum sample_kind kinds[] = {SAMPLE_PROSE, SAMPLE_TABLE,
						 SAMPLE_RECORDS};
	struct bench *bench = *state;

	for (unsigned i = 0; i < sizeof(kinds) / sizeof(*kinds); i++) {
		struct predict_plan plan;
		size_t from, same = 0;

		sample_fill(kinds[i], 13, bench->bytes, BYTES);
		plan = modelled_plan(bench->bytes, BYTES, STRENGTH_NIGHTLY);
		encode(bench, &plan);
		from = bench->code.length * 3 / 4;
		for (size_t j = from; j < bench->code.length; j++)
			bench->code.bytes[j] ^= 0x5a;
		decode(bench, &plan);
		while (same < BYTES &&
		       bench->decoded[same] == bench->bytes[same])
			same++;
		/*
		 * Learning takes more of the code at first, so three quarters
		 * of it hold somewhat less than three quarters of the bytes.
		 */
		assert_in_range(same, BYTES * 60 / 100, BYTES - 1);
		buffer_release(&bench->code);
	}
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(nightly_comes_back),
		cmocka_unit_test(deep_comes_back),
		cmocka_unit_test(every_family_comes_back),
		cmocka_unit_test(corrupted_tail_leaves_the_rest),
	};

	return cmocka_run_group_tests(tests, setup, NULL);
}
