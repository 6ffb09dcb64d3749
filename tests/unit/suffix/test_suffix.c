/* Is the order sorted, complete, and are the common prefixes right? */
#include "suffix/suffix.h"

#include "base/random.h"
#include "support/grams.h"
#include "support/near.h"

#include <string.h>

static unsigned shared(const struct sequence *sequence, size_t a, size_t b,
		       unsigned limit)
{
	size_t width = sequence->code_width;
	unsigned k = 0;

	while (k < limit &&
	       memcmp(sequence->codes + (a + k) % sequence->n * width,
		      sequence->codes + (b + k) % sequence->n * width,
		      width) == 0)
		k++;
	return k;
}

static int first_differs_downwards(const struct sequence *sequence, size_t a,
				   size_t b, unsigned k)
{
	size_t width = sequence->code_width;

	return memcmp(sequence->codes + (a + k) % sequence->n * width,
		      sequence->codes + (b + k) % sequence->n * width,
		      width) > 0;
}

/* The definition, checked against plain comparisons of cyclic symbols. */
static void check(const uint8_t *codes, size_t n, unsigned width, unsigned wrap)
{
	struct sequence sequence = grams_sequence(codes, n, width);
	struct suffix suffix;
	uint8_t *seen = test_calloc(n, 1);

	assert_int_equal(suffix_init(&suffix, &sequence, wrap, NULL),
			 STATUS_OK);
	assert_int_equal(suffix.n, n);
	assert_int_equal(suffix.common[0], 0);
	for (size_t r = 0; r < n; r++) {
		size_t here = (size_t)suffix.start[r], before;
		unsigned common;

		assert_true(here < n && !seen[here]);
		seen[here] = 1;
		if (r == 0)
			continue;
		before = (size_t)suffix.start[r - 1];
		common = shared(&sequence, before, here, wrap);
		assert_int_equal(suffix.common[r], common);
		if (common < wrap)
			assert_false(first_differs_downwards(&sequence, before,
							     here, common));
	}
	suffix_release(&suffix);
	test_free(seen);
}

static void small_alphabets_and_lengths(void **state)
{
	struct random_stream random;
	uint8_t codes[300];

	(void)state;
	random_init(&random, 1, 1);
	for (size_t n = 1; n <= 75; n++) {
		for (size_t i = 0; i < sizeof(codes); i++)
			codes[i] = (uint8_t)random_below(&random, 1 + n % 4);
		for (unsigned width = 1; width <= 4; width++) {
			check(codes, n, width, 1);
			check(codes, n, width, 7);
			check(codes, n, width, 32);
		}
	}
}

static void high_bytes_sort_unsigned(void **state)
{
	const uint8_t codes[] = {0xff, 0x00, 0x7f, 0x80,
				 0xff, 0xff, 0x00, 0x80};

	(void)state;
	check(codes, 8, 1, 5);
	check(codes, 4, 2, 5);
}

static void long_repeats(void **state)
{
	uint8_t *codes = test_calloc(5000, 1);

	(void)state;
	check(codes, 5000, 1, 32);
	grams_fibonacci(codes, 4181);
	check(codes, 4181, 1, 32);
	grams_pseudo_text(codes, 5000, 3);
	check(codes, 2500, 2, 16);
	test_free(codes);
}

/* libdivsufsort counts in 31 bits; nothing may be read or allocated here. */
static void too_long_is_refused_with_its_limit(void **state)
{
	static const uint8_t one[4];
	struct sequence sequence = grams_sequence(one, 1, 4);
	struct suffix suffix = {.n = 77};
	struct reason why = {""};

	(void)state;
	sequence.n = (size_t)INT32_MAX / 4 - 30;
	assert_int_equal(suffix_init(&suffix, &sequence, 32, &why),
			 STATUS_NO_MEMORY);
	assert_non_null(strstr(why.text, "2147483647"));
	assert_int_equal(suffix.n, 77);
}

static void released_twice(void **state)
{
	struct suffix suffix = {0};

	(void)state;
	suffix_release(&suffix);
	suffix_release(&suffix);
	assert_null(suffix.text);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(small_alphabets_and_lengths),
		cmocka_unit_test(high_bytes_sort_unsigned),
		cmocka_unit_test(long_repeats),
		cmocka_unit_test(too_long_is_refused_with_its_limit),
		cmocka_unit_test(released_twice),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
