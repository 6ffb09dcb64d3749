/* Do whole-number weights draw what they say and tell their entropy? */
#include "source/record_fields.h"
#include "source/walk.h"
#include "source/weights.h"

#include "support/near.h"
#include "support/plugin.h"

#include <math.h>

static void entropy_of_published_laws(void **state)
{
	/* Cover and Thomas 2006, examples 2.1.1 and 5.1.1: 7/4 bits. */
	const uint32_t quarters[4] = {4, 2, 1, 1};
	/* The horse race of Cover and Thomas 2006, section 2.1: 2 bits. */
	const uint32_t horses[8] = {32, 16, 8, 4, 1, 1, 1, 1};
	/* Shannon 1948, letters A to E: 2.12 bits; more digits by hand. */
	const uint32_t letters[5] = {4, 1, 2, 2, 1};
	struct weights weights;

	(void)state;
	weights_init(&weights, quarters, 4);
	assert_near(weights_entropy(&weights), 1.75, 1e-15);
	weights_init(&weights, horses, 8);
	assert_near(weights_entropy(&weights), 2, 1e-15);
	weights_init(&weights, letters, 5);
	assert_near(weights_entropy(&weights), 2.1219280949, 1e-10);
}

static void an_item_without_weight_is_never_drawn(void **state)
{
	const uint32_t values[5] = {0, 3, 0, 1, 0};
	struct random_stream random;
	struct weights weights;
	unsigned drawn[5] = {0};

	(void)state;
	weights_init(&weights, values, 5);
	random_init(&random, 11, 1);
	for (unsigned i = 0; i < 40000; i++)
		drawn[weights_draw(&weights, &random)]++;
	assert_int_equal(drawn[0] + drawn[2] + drawn[4], 0);
	/* 3/4 of 40000, five standard errors of 87 draws. */
	assert_near(drawn[1], 30000, 435);
	assert_near(weights_entropy(&weights), 0.8112781244591328, 1e-15);
}

static void dice_are_the_sums_of_two_dice(void **state)
{
	struct weights weights;

	(void)state;
	weights_init_dice(&weights, 6);
	assert_int_equal(weights.count, 11);
	assert_int_equal(weights.total, 36);
	assert_int_equal(weights_of(&weights, 5), 6); /* a seven */
	assert_int_equal(weights_of(&weights, 10), 1);
}

static void draws_have_the_entropy_they_state(void **state)
{
	struct random_stream random;
	struct weights weights;
	struct codes codes = {0};

	(void)state;
	weights_init_zipf(&weights, 50, 5040, 2);
	random_init(&random, 3, 9);
	for (unsigned i = 0; i < 400000; i++)
		codes_add(&codes, weights_draw(&weights, &random));
	/* Standard error of the plug-in: sd(-log2 p) / sqrt n < .003. */
	assert_near(codes_entropy(&codes), weights_entropy(&weights), 0.012);
	codes_release(&codes);
}

static void flips_are_geometric(void **state)
{
	struct random_stream random;
	struct codes codes = {0};

	(void)state;
	random_init(&random, 5, 0);
	for (unsigned i = 0; i < 400000; i++)
		codes_add(&codes, flips_before_one(&random));
	/* 2 bits: Cover and Thomas 2006, problem 2.1. */
	assert_near(codes_entropy(&codes), 2, 0.01);
	codes_release(&codes);
}

static void a_walk_stays_about_its_centre(void **state)
{
	struct random_stream random;
	struct walk walk;
	int64_t reading = 1000;
	double mean = 0;

	(void)state;
	walk_init(&walk, 1000, 7, 20);
	random_init(&random, 8, 0);
	for (unsigned i = 0; i < 100000; i++) {
		reading = walk_next(&walk, reading, &random);
		assert_in_range(reading, 1, 2000);
		mean += (double)reading / 100000;
	}
	assert_near(mean, 1000, 20);
}

static void a_walk_steps_alike_on_both_sides(void **state)
{
	struct random_stream random;
	struct walk walk;
	struct codes below = {0}, above = {0};

	(void)state;
	walk_init(&walk, 0, 4, 64);
	random_init(&random, 2, 0);
	for (unsigned i = 0; i < 300000; i++) {
		codes_add(&below,
			  (uint64_t)(walk_next(&walk, -1, &random) + 100));
		codes_add(&above,
			  (uint64_t)(walk_next(&walk, 0, &random) + 100));
	}
	assert_near(codes_entropy(&below), weights_entropy(&walk.step), .01);
	assert_near(codes_entropy(&above), weights_entropy(&walk.step), .01);
	codes_release(&below);
	codes_release(&above);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(entropy_of_published_laws),
		cmocka_unit_test(an_item_without_weight_is_never_drawn),
		cmocka_unit_test(dice_are_the_sums_of_two_dice),
		cmocka_unit_test(draws_have_the_entropy_they_state),
		cmocka_unit_test(flips_are_geometric),
		cmocka_unit_test(a_walk_stays_about_its_centre),
		cmocka_unit_test(a_walk_steps_alike_on_both_sides),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
