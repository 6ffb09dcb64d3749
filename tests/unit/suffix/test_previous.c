/* Are the longest earlier matches those of the definition, in linear time? */
#define _GNU_SOURCE
#include "suffix/previous.h"

#include "base/random.h"
#include "support/grams.h"
#include "support/near.h"

#include <string.h>
#include <time.h>

static uint32_t *previous(const uint8_t *codes, size_t n, unsigned width,
			  unsigned wrap)
{
	struct sequence sequence = grams_sequence(codes, n, width);
	struct suffix suffix;
	uint32_t *longest = NULL;

	assert_int_equal(suffix_init(&suffix, &sequence, wrap, NULL),
			 STATUS_OK);
	assert_int_equal(suffix_previous(&suffix, &longest), STATUS_OK);
	suffix_release(&suffix);
	return longest;
}

static void check_string(const char *text, const uint32_t *wanted)
{
	size_t n = strlen(text);

	for (unsigned wrap = 1; wrap <= 32; wrap++) {
		uint32_t *got = previous((const uint8_t *)text, n, 1, wrap);

		for (size_t i = 0; i < n; i++)
			assert_int_equal(got[i], wanted[i]);
		memory_free(got);
	}
}

/* The last is the running example of Crochemore and Ilie 2008; all four
 * recomputed by exact arithmetic from the definition. */
static void strings_worked_by_hand(void **state)
{
	const uint32_t banana[] = {0, 0, 0, 3, 2, 1};
	const uint32_t mississippi[] = {0, 0, 0, 1, 4, 3, 2, 1, 0, 1, 1};
	const uint32_t a_run[] = {0, 7, 6, 5, 4, 3, 2, 1};
	const uint32_t example[] = {0, 0, 1, 3, 2, 4, 3, 2, 1, 4, 3, 2, 2, 1};

	(void)state;
	check_string("banana", banana);
	check_string("mississippi", mississippi);
	check_string("aaaaaaaa", a_run);
	check_string("abaabababbabbb", example);
}

static uint32_t longest_earlier(const uint8_t *codes, size_t n, size_t width,
				size_t i)
{
	uint32_t best = 0;

	for (size_t j = 0; j < i; j++) {
		uint32_t l = 0;

		while (i + l < n && memcmp(codes + (i + l) * width,
					   codes + (j + l) * width, width) == 0)
			l++;
		best = l > best ? l : best;
	}
	return best;
}

static void agrees_with_the_definition(void **state)
{
	struct random_stream random;
	uint8_t codes[4 * 160];

	(void)state;
	random_init(&random, 5, 5);
	for (unsigned round = 0; round < 400; round++) {
		unsigned width = 1 + round % 4, wrap = 1 + round % 32;
		size_t n = 1 + random_below(&random, 160);
		uint32_t *got;

		for (size_t i = 0; i < n * width; i++)
			codes[i] =
				(uint8_t)random_below(&random, 1 + round % 3);
		got = previous(codes, n, width, wrap);
		for (size_t i = 0; i < n; i++)
			assert_int_equal(got[i],
					 longest_earlier(codes, n, width, i));
		memory_free(got);
	}
}

static double seconds(const uint8_t *codes, size_t n)
{
	struct timespec from, to;

	clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &from);
	memory_free(previous(codes, n, 1, 16));
	clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &to);
	return (double)(to.tv_sec - from.tv_sec) +
	       1e-9 * (double)(to.tv_nsec - from.tv_nsec);
}

/* A quadratic method would need 16 times as long for 4 times the length, and
 * minutes altogether; 12 leaves room for caches and a busy machine. */
static void repeats_take_linear_time(void **state)
{
	const size_t n = 2000000;
	uint8_t *codes = test_calloc(n, 1);

	(void)state;
	assert_true(seconds(codes, n) < 12 * seconds(codes, n / 4) + 0.05);
	grams_fibonacci(codes, n);
	assert_true(seconds(codes, n) < 12 * seconds(codes, n / 4) + 0.05);
	test_free(codes);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(strings_worked_by_hand),
		cmocka_unit_test(agrees_with_the_definition),
		cmocka_unit_test(repeats_take_linear_time),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
