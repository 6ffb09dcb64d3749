/* Are the match-length forms those of their formulas and conventions? */
#include "estimate/estimator.h"

#include "base/memory.h"
#include "base/random.h"
#include "suffix/suffix.h"
#include "support/grams.h"
#include "support/near.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static enum status measure(const uint8_t *codes, size_t n, unsigned width,
			   struct findings *findings)
{
	const struct cuts none = {0};
	struct sequence sequence = grams_sequence(codes, n, width);
	struct suffix suffix;
	struct estimate_input input = {.sequence = &sequence,
				       .cuts = &none,
				       .suffix = &suffix,
				       .orders = 8,
				       .threads = 1};
	enum status status;

	assert_int_equal(suffix_init(&suffix, &sequence, 8, NULL), STATUS_OK);
	status = estimator_find("match")->measure(&input, findings, NULL);
	suffix_release(&suffix);
	return status;
}

static int64_t note(const struct findings *findings, const char *key)
{
	int64_t value = -1;

	assert_true(findings_find(findings, key, &value));
	return value;
}

static size_t longest_earlier(const uint8_t *codes, size_t n, size_t i)
{
	size_t best = 0;

	for (size_t j = 0; j < i; j++) {
		size_t l = 0;

		while (i + l < n && codes[i + l] == codes[j + l])
			l++;
		best = l > best ? l : best;
	}
	return best;
}

static int descending(const void *left, const void *right)
{
	double a = *(const double *)left, b = *(const double *)right;

	return (a < b) - (a > b);
}

/* h3 and h1 of Gao, Kontoyiannis and Bienenstock 2008, over i = 2 … m. */
static void check_by_definition(const uint8_t *codes, size_t n)
{
	size_t kept = n / 2, top;
	double inverse = 0, ratio = 0, all = 0, share = 0;
	double *lengths = calloc(n, sizeof(*lengths));
	struct findings findings;

	while (kept < n && longest_earlier(codes, n, kept) < n - kept)
		kept++;
	for (size_t i = 2; i <= kept; i++) {
		double length = 1 + (double)longest_earlier(codes, n, i - 1);

		inverse += log2((double)i) / length;
		ratio += length / log2((double)i);
		all += length;
		lengths[i - 2] = length;
	}
	qsort(lengths, kept - 1, sizeof(*lengths), descending);
	top = (kept - 1 + 99) / 100;
	for (size_t i = 0; i < top; i++)
		share += lengths[i];
	assert_int_equal(measure(codes, n, 1, &findings), STATUS_OK);
	assert_int_equal(note(&findings, "positions"), kept);
	assert_near(bits_from_q16(findings.series[0].costs.headline_q16),
		    (double)n * inverse / (double)kept, 1e-5);
	assert_near(bits_from_q16(note(&findings, "ratio_q16")),
		    (double)n * (double)kept / ratio, 1e-5);
	assert_near((double)note(&findings, "top1_share_ppm"),
		    1e6 * share / all, 1);
	assert_int_equal(findings.series[0].costs.blocks, 0);
	findings_release(&findings);
	free(lengths);
}

static void agrees_with_the_formulas(void **state)
{
	struct random_stream random;
	uint8_t codes[700];

	(void)state;
	random_init(&random, 4, 4);
	for (size_t n = 4; n <= 700; n += 1 + n / 5) {
		for (uint32_t letters = 1; letters < 5; letters++) {
			for (size_t i = 0; i < n; i++)
				codes[i] =
					(uint8_t)random_below(&random, letters);
			check_by_definition(codes, n);
		}
	}
}

static void text_with_a_long_copy(void **state)
{
	uint8_t codes[1200] = {0};

	(void)state;
	grams_pseudo_text(codes, 600, 29);
	memcpy(codes + 600, codes, 300);
	grams_pseudo_text(codes + 900, 300, 31);
	check_by_definition(codes, sizeof(codes));
}

/* All forms converge to the entropy rate (Wyner and Ziv 1989; Kontoyiannis and
 * others 1998), the ratio form with an error of order 1 / log n. */
static void uniform_letters_cost_two_bits(void **state)
{
	const size_t n = 200000;
	uint8_t *codes = calloc(n, 1);
	struct random_stream random;
	struct findings findings;

	(void)state;
	random_init(&random, 8, 8);
	for (size_t i = 0; i < n; i++)
		codes[i] = (uint8_t)random_below(&random, 4);
	assert_int_equal(measure(codes, n, 1, &findings), STATUS_OK);
	assert_near(bits_from_q16(note(&findings, "ratio_q16")) / (double)n, 2,
		    2 * 2 / log2((double)n));
	assert_near(bits_from_q16(findings.series[0].costs.headline_q16) /
			    (double)n,
		    2, 2 * 2 / log2((double)n));
	assert_true(note(&findings, "top1_share_ppm") < 30000);
	findings_release(&findings);
	free(codes);
}

static void wide_codes_match_in_symbols(void **state)
{
	const size_t n = 500;
	uint8_t narrow[500] = {0}, wide[2000];
	struct findings one, four;

	(void)state;
	grams_pseudo_text(narrow, n, 37);
	for (size_t i = 0; i < n; i++) {
		wide[4 * i] = wide[4 * i + 2] = 0;
		wide[4 * i + 1] = wide[4 * i + 3] = narrow[i];
	}
	assert_int_equal(measure(narrow, n, 1, &one), STATUS_OK);
	assert_int_equal(measure(wide, n, 4, &four), STATUS_OK);
	assert_int_equal(one.series[0].costs.headline_q16,
			 four.series[0].costs.headline_q16);
	assert_int_equal(note(&one, "ratio_q16"), note(&four, "ratio_q16"));
	findings_release(&one);
	findings_release(&four);
}

static void three_symbols_are_too_few(void **state)
{
	const uint8_t codes[] = {1, 2, 3};
	struct findings findings = {.order_count = 9};

	(void)state;
	assert_int_equal(measure(codes, 3, 1, &findings), STATUS_TOO_SHORT);
	assert_int_equal(findings.order_count, 9);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(agrees_with_the_formulas),
		cmocka_unit_test(text_with_a_long_copy),
		cmocka_unit_test(uniform_letters_cost_two_bits),
		cmocka_unit_test(wide_codes_match_in_symbols),
		cmocka_unit_test(three_symbols_are_too_few),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
