/* Is the Dirichlet row the best of its codes, by block and by page? */
#include "estimate/dirichlet_code.h"

#include "base/memory.h"
#include "base/random.h"
#include "estimate/estimator.h"
#include "estimate/quick_log.h"
#include "support/grams.h"
#include "support/near.h"
#include "support/symbols_of.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static int64_t note(const struct findings *findings, const char *key)
{
	int64_t value = -1;

	assert_true(findings_find(findings, key, &value));
	return value;
}

static struct findings measure(const struct sequence *sequence,
			       const struct cuts *cuts, size_t page_bytes)
{
	const struct cuts none = {0};
	struct estimate_input input = {.sequence = sequence,
				       .cuts = cuts ? cuts : &none,
				       .orders = 1,
				       .page_bytes = page_bytes,
				       .threads = 1};
	struct findings findings;

	assert_int_equal(
		estimator_find("dirichlet")->measure(&input, &findings, NULL),
		STATUS_OK);
	return findings;
}

/* Bits of symbols begin … end-1 by the definition, counting all the past. */
static double bits_by_definition(const struct sequence *sequence, size_t begin,
				 size_t end, unsigned order, double alphabet)
{
	double bits = 0;

	for (size_t t = begin; t < end; t++) {
		double context = 0, both = 0;

		for (size_t u = begin + order; u < t; u++) {
			unsigned j = 1;

			while (j <= order && t >= begin + order &&
			       code_of(sequence, u - j) ==
				       code_of(sequence, t - j))
				j++;
			if (j <= order)
				continue;
			context++;
			both += code_of(sequence, u) == code_of(sequence, t);
		}
		bits -= log2((alphabet * both + 1) /
			     (alphabet * context + alphabet));
	}
	return bits;
}

/* log2 of the number of subsets of that size, and of the possible sizes. */
static double subset_bits(double alphabet, double seen)
{
	double bits = log2(alphabet);

	for (double i = 0; i < seen; i++)
		bits += log2((alphabet - i) / (seen - i));
	return bits;
}

static double bits_of_pages(const struct sequence *sequence, size_t page,
			    unsigned order, double alphabet)
{
	double bits = 0;
	size_t end;

	for (size_t t = 0; t < sequence->n; t = end) {
		size_t number = page ? sequence_byte_of(sequence, t) / page : 0;

		for (end = t + 1; end < sequence->n; end++)
			if (page &&
			    sequence_byte_of(sequence, end) / page != number)
				break;
		bits += bits_by_definition(sequence, t, end, order, alphabet);
	}
	return bits;
}

static void check_by_definition(const struct sequence *sequence, size_t page)
{
	struct findings findings = measure(sequence, NULL, page);
	double all = (double)sequence->alphabet, best = HUGE_VAL;
	double seen = (double)sequence->distinct;
	unsigned chosen = 0;

	for (unsigned k = 0; k < DIRICHLET_ORDERS; k++) {
		double wide = bits_of_pages(sequence, page, k, all);
		double narrow = bits_of_pages(sequence, page, k, seen) +
				subset_bits(all, seen);
		double less = fmin(wide, narrow);
		char key[24];

		snprintf(key, sizeof(key), "order%u_q16", k);
		assert_near(bits_from_q16(note(&findings, key)), less, 2e-5);
		if (less < best) {
			best = less;
			chosen = k;
		}
	}
	assert_int_equal(findings.series_count, 1);
	assert_int_equal(findings.series[0].order, chosen);
	assert_near(bits_from_q16(findings.series[0].costs.headline_q16),
		    best + log2(12), 4e-5);
	assert_null(findings.series[0].costs.block_q16);
	findings_release(&findings);
}

static void test_definition(void **state)
{
	uint8_t text[700], wide[600];
	struct sequence sequence;

	(void)state;
	grams_pseudo_text(text, sizeof(text), 3);
	sequence = sequence_of((struct slice){text, sizeof(text)}, SYMBOL_BYTE);
	check_by_definition(&sequence, 0);
	check_by_definition(&sequence, 90);
	check_by_definition(&sequence, 1);
	sequence_release(&sequence);
	/* few symbols, far apart in a large alphabet */
	for (size_t i = 0; i < sizeof(wide); i++)
		wide[i] = (uint8_t)(i % 4 == 3 ? 200 : text[i / 4] % 5);
	sequence =
		sequence_of((struct slice){wide, sizeof(wide)}, SYMBOL_U32LE);
	check_by_definition(&sequence, 0);
	check_by_definition(&sequence, 250);
	sequence_release(&sequence);
	sequence = sequence_of((struct slice){text, 60}, SYMBOL_BIT);
	check_by_definition(&sequence, 0);
	check_by_definition(&sequence, 7);
	sequence_release(&sequence);
}

static void test_pages_of_code_points(void **state)
{
	static const char text[] =
		"T\xc3\xa9l\xc3\xa9m\xc3\xa9trie: 3\xe2\x82\xac, \xf0\x9f\x8c"
		"\x8a \xf0\x9f\x8c\x8a \xc3\xa9\xc3\xa9\xc3\xa9 t\xc3\xa9l";
	struct sequence sequence = sequence_of(LITERAL(text), SYMBOL_CODEPOINT);

	(void)state;
	for (size_t page = 0; page < 20; page++)
		check_by_definition(&sequence, page);
	sequence_release(&sequence);
}

static void test_blocks_add_up(void **state)
{
	size_t n = 50000, blocks[] = {1, 7, 100};
	uint8_t *text = malloc(n);
	struct sequence sequence;

	(void)state;
	grams_pseudo_text(text, n, 8);
	sequence = sequence_of((struct slice){text, n}, SYMBOL_BYTE);
	for (size_t page = 0; page <= 4096; page += 4096) {
		struct findings whole = measure(&sequence, NULL, page);

		for (size_t i = 0; i < 3; i++) {
			struct cuts cuts = grams_cuts(n, blocks[i]);
			struct findings cut = measure(&sequence, &cuts, page);
			const struct costs *costs = &cut.series[0].costs;

			assert_int_equal(costs->blocks, blocks[i]);
			assert_int_equal(costs_block_total(costs),
					 costs->headline_q16);
			assert_int_equal(costs->headline_q16,
					 whole.series[0].costs.headline_q16);
			findings_release(&cut);
			free(cuts.symbol);
		}
		findings_release(&whole);
	}
	sequence_release(&sequence);
	free(text);
}

/* A block's bits are those of its symbols after all that came before. */
static void test_blocks_hold_their_own(void **state)
{
	uint8_t text[900];
	struct sequence sequence, head;
	struct cuts cuts = grams_cuts(sizeof(text), 3);
	struct dirichlet_input input = {.cuts = &cuts, .alphabet = {256, 256}};
	struct dirichlet_sums sums;

	(void)state;
	grams_pseudo_text(text, sizeof(text), 5);
	sequence = grams_sequence(text, sizeof(text), 1);
	input.sequence = &sequence;
	assert_int_equal(dirichlet_code(&input, &sums), STATUS_OK);
	for (unsigned k = 0; k < DIRICHLET_ORDERS; k++) {
		double before = 0;

		for (size_t i = 0; i < 3; i++) {
			double bits;

			head = grams_sequence(text, cuts.symbol[i + 1], 1);
			bits = bits_by_definition(&head, 0, head.n, k, 256);
			assert_near(
				ldexp((double)dirichlet_blocks(&sums, k, 0)[i],
				      -32),
				bits - before, 1e-6);
			before = bits;
		}
	}
	dirichlet_sums_release(&sums);
	free(cuts.symbol);
}

/*
 * 16 of 256 bytes, almost any after any: naming them once is cheaper than a
 * surprise at each pair. With all 256 seen it cannot be.
 */
static void test_alphabet(void **state)
{
	uint8_t bytes[4096];
	struct random_stream random;
	struct sequence sequence;
	struct findings findings;

	(void)state;
	random_init(&random, 1, 0);
	bytes[0] = 0;
	for (size_t i = 1; i < sizeof(bytes); i++)
		bytes[i] = (uint8_t)(random_below(&random, 4)
					     ? (bytes[i - 1] * 5U + 1) % 16
					     : random_below(&random, 16));
	sequence = grams_sequence(bytes, sizeof(bytes), 1);
	findings = measure(&sequence, NULL, 0);
	assert_int_equal(note(&findings, "alphabet_seen"), 1);
	assert_int_equal(findings.series[0].order, 1);
	findings_release(&findings);
	for (size_t i = 0; i < sizeof(bytes); i++)
		bytes[i] = (uint8_t)i;
	sequence = grams_sequence(bytes, sizeof(bytes), 1);
	findings = measure(&sequence, NULL, 0);
	assert_int_equal(note(&findings, "alphabet_seen"), 0);
	assert_int_equal(findings.series[0].order, 1);
	findings_release(&findings);
}

/* One symbol over and over: naming it is nearly all there is to say. */
static void test_one_symbol(void **state)
{
	uint8_t bytes[1000];
	struct sequence sequence;
	struct findings findings;

	(void)state;
	memset(bytes, 77, sizeof(bytes));
	sequence = grams_sequence(bytes, sizeof(bytes), 1);
	for (size_t n = 1; n <= sizeof(bytes); n = n * 7) {
		double wide = 0;

		sequence.n = n;
		findings = measure(&sequence, NULL, 0);
		/* -log2 prod (256 i + 1) / (256 i + 256) */
		for (size_t i = 0; i < n; i++)
			wide -= log2((256 * (double)i + 1) /
				     (256 * (double)i + 256));
		assert_near(
			bits_from_q16(findings.series[0].costs.headline_q16),
			log2(12) + fmin(16, wide), 1e-4);
		findings_release(&findings);
	}
}

static void test_quick_log(void **state)
{
	struct random_stream random;
	struct quick_log *log;

	(void)state;
	random_init(&random, 9, 0);
	assert_int_equal(quick_log_new(&log), STATUS_OK);
	for (unsigned e = 0; e < 64; e++)
		assert_true(quick_log_q32(log, UINT64_C(1) << e) ==
			    (uint64_t)e << 32);
	for (uint64_t i = 0; i < 400000; i++) {
		uint64_t any = random_u64(&random) >> i % 64 | 1;
		uint64_t x = i < 5000 ? i + 1 : any;
		/* libm's logarithm of the nearest long double */
		long double wanted = ldexpl(log2l((long double)x), 32);

		assert_true(fabsl((long double)quick_log_q32(log, x) - wanted) <
			    0.52L);
	}
	memory_free(log);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(test_definition),
		cmocka_unit_test(test_pages_of_code_points),
		cmocka_unit_test(test_blocks_add_up),
		cmocka_unit_test(test_blocks_hold_their_own),
		cmocka_unit_test(test_alphabet),
		cmocka_unit_test(test_one_symbol),
		cmocka_unit_test(test_quick_log),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
