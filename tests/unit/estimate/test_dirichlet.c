/* Is the Dirichlet code the one that counting by hand gives? */
#include "support/coded.h"

#include "base/random.h"
#include "support/grams.h"
#include "support/near.h"
#include "support/symbols_of.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

/* Does the gram of so many symbols that ends at t also end at u? */
static bool same(const struct sequence *sequence, size_t t, size_t u,
		 unsigned symbols)
{
	size_t width = sequence->code_width;

	return memcmp(sequence->codes + (t + 1 - symbols) * width,
		      sequence->codes + (u + 1 - symbols) * width,
		      symbols * width) == 0;
}

/* -log2 of the product of (A c(sx) + 1) / (A c(s) + A), counted from begin. */
static double by_hand(const struct sequence *sequence, size_t begin, size_t end,
		      unsigned k, double alphabet)
{
	double bits = 0;

	for (size_t t = begin; t < end; t++) {
		double s = 0, sx = 0;

		for (size_t u = begin + k; t >= begin + k && u < t; u++) {
			s += k == 0 || same(sequence, t - 1, u - 1, k);
			sx += same(sequence, t, u, k + 1);
		}
		bits += log2((alphabet * s + alphabet) / (alphabet * sx + 1));
	}
	return bits;
}

static void fill(uint8_t *codes, size_t n, unsigned letters, uint64_t seed)
{
	struct random_stream random;

	random_init(&random, seed, 0);
	for (size_t i = 0; i < n; i++)
		codes[i] = (uint8_t)(i && random_below(&random, 3)
					     ? codes[i / 2]
					     : random_below(&random, letters));
}

static void every_order_and_page(void **state)
{
	uint8_t codes[600];

	(void)state;
	for (unsigned round = 0; round < 18; round++) {
		size_t n = 1 + round * 35, page = round % 3 ? round * 7 : 0;
		struct sequence sequence;

		fill(codes, n, 2 + round % 5, round);
		sequence = coded_sequence(codes, n, 300);
		for (unsigned k = 0; k < DIRICHLET_ORDERS; k++) {
			double kind = 0, seen = 0;

			for (size_t at = 0, end; at < n; at = end) {
				end = page && at + page < n ? at + page : n;
				kind += by_hand(&sequence, at, end, k, 300);
				seen += by_hand(&sequence, at, end, k,
						sequence.distinct);
			}
			assert_near(coded_dirichlet(&sequence, page, k,
						    ALPHABET_OF_KIND),
				    kind, 1e-6);
			assert_near(coded_dirichlet(&sequence, page, k,
						    ALPHABET_SEEN),
				    seen, 1e-6);
		}
	}
}

/* Every kind, whatever the width of its codes; a page of 10 bytes holds the
 * symbols that begin in it. */
static void kinds_and_their_pages(void **state)
{
	const uint8_t text[] = "ACGTTGCAACGTTACGTTGCATTTACGTACGATTACAGATTACAAC";
	const struct slice bytes = {text, 44};
	static const size_t symbol_bits[] = {8, 1, 16, 16, 32, 8};

	(void)state;
	for (int kind = SYMBOL_BYTE; kind <= SYMBOL_NUCLEOTIDE; kind++) {
		struct sequence sequence =
			sequence_of(bytes, (enum symbol_kind)kind);
		double wanted = 0, all = (double)sequence.alphabet;

		for (size_t at = 0, page = 1, end; at < sequence.n;
		     at = end, page++) {
			end = (page * 80 + symbol_bits[kind] - 1) /
			      symbol_bits[kind];
			end = end < sequence.n ? end : sequence.n;
			wanted += by_hand(&sequence, at, end, 1, all);
		}
		assert_near(coded_dirichlet(&sequence, 10, 1, ALPHABET_OF_KIND),
			    wanted, 1e-6);
		sequence_release(&sequence);
	}
}

/* The row is the least of all ways, plus what it costs to name the way. */
static void the_row_takes_the_best(void **state)
{
	const double name = log2(12), half = 0x1p-15;
	uint8_t codes[9000];
	struct sequence sequence = {.n = 0};
	struct findings findings;
	double best = HUGE_VAL, subset = 8;
	unsigned order = 9;

	(void)state;
	grams_pseudo_text(codes, sizeof(codes), 5);
	sequence = coded_sequence(codes, sizeof(codes), 256);
	for (unsigned i = 0; i < sequence.distinct; i++)
		subset += log2((256.0 - i) / (i + 1.0));
	findings = coded_findings((struct coded_run){.row = "dirichlet"},
				  &sequence);
	for (unsigned k = 0; k < DIRICHLET_ORDERS; k++) {
		double kind =
			coded_dirichlet(&sequence, 0, k, ALPHABET_OF_KIND);
		double seen = subset +
			      coded_dirichlet(&sequence, 0, k, ALPHABET_SEEN);
		double less = fmin(kind, seen) + name;
		char key[] = "order0_q16";
		int64_t note;

		key[5] = (char)('0' + k);
		assert_true(findings_find(&findings, key, &note));
		assert_near(bits_from_q16(note), less, 3 * half);
		if (less < best)
			order = k;
		best = fmin(best, less);
	}
	assert_int_equal(findings.series_count, 1);
	assert_int_equal(findings.series[0].order, order);
	assert_near(bits_from_q16(findings.series[0].costs.headline_q16), best,
		    3 * half);
	findings_release(&findings);
}

/* Blocks add up exactly, and each is the code's own bits of its symbols. */
static void blocks_of_the_row(void **state)
{
	uint8_t codes[7000];
	struct sequence sequence, first;
	struct findings whole, parts;
	struct cuts cuts = grams_cuts(sizeof(codes), 7);
	int64_t charge, alphabet;

	(void)state;
	grams_pseudo_text(codes, sizeof(codes), 6);
	sequence = coded_sequence(codes, sizeof(codes), 256);
	cuts.byte = cuts.symbol;
	whole = coded_findings((struct coded_run){.row = "dirichlet"},
			       &sequence);
	parts = coded_findings(
		(struct coded_run){.row = "dirichlet", .cuts = &cuts},
		&sequence);
	assert_int_equal(parts.series[0].costs.blocks, 7);
	assert_int_equal(costs_block_total(&parts.series[0].costs),
			 whole.series[0].costs.headline_q16);
	first = sequence;
	first.n = cuts.symbol[1];
	assert_true(findings_find(&parts, "charge_q16", &charge));
	assert_true(findings_find(&parts, "alphabet", &alphabet));
	assert_near(bits_from_q16(parts.series[0].costs.block_q16[0] - charge),
		    coded_dirichlet(&first, 0, parts.series[0].order,
				    alphabet == 256 ? ALPHABET_OF_KIND
						    : ALPHABET_SEEN),
		    0x1p-14);
	findings_release(&whole);
	findings_release(&parts);
	free(cuts.symbol);
}

/* A symbol of 32 bits each time another one: nothing can be learnt. */
static void wide_symbols(void **state)
{
	uint8_t bytes[4 * 1000];
	struct sequence sequence;
	struct findings findings;

	(void)state;
	for (size_t i = 0; i < 1000; i++) {
		const uint32_t value = (uint32_t)i * UINT32_C(4000037);

		memcpy(bytes + 4 * i, &value, 4);
	}
	sequence =
		sequence_of((struct slice){bytes, sizeof(bytes)}, SYMBOL_U32LE);
	assert_int_equal(sequence.distinct, 1000);
	assert_near(coded_dirichlet(&sequence, 0, 5, ALPHABET_OF_KIND), 32000,
		    1e-6);
	findings = coded_findings((struct coded_run){.row = "dirichlet"},
				  &sequence);
	assert_int_equal(findings.series[0].costs.headline_q16,
			 32000 * BIT_Q16 + 234945);
	findings_release(&findings);
	sequence_release(&sequence);
}

/* One letter only: its name among 256 and their number, then nothing. */
static void one_letter(void **state)
{
	uint8_t codes[5000] = {0};
	struct sequence sequence = coded_sequence(codes, sizeof(codes), 256);
	struct findings findings = coded_findings(
		(struct coded_run){.row = "dirichlet"}, &sequence);

	(void)state;
	assert_int_equal(findings.series[0].order, 0);
	assert_near(bits_from_q16(findings.series[0].costs.headline_q16),
		    16 + log2(12), 0x1p-15);
	findings_release(&findings);
}

/* A table that may not grow ends the chain, but never at single symbols. */
static void a_full_table(void **state)
{
	uint8_t codes[20000] = {0};
	struct sequence sequence = coded_sequence(codes, sizeof(codes), 256);
	struct gram_chain chain;
	bool full = true;

	(void)state;
	for (size_t i = 0; i < sizeof(codes); i++)
		codes[i] = (uint8_t)(i * i >> 7);
	assert_int_equal(gram_chain_init(&chain, &sequence, 0, 1), STATUS_OK);
	assert_int_equal(gram_chain_lengthen(&chain, &full), STATUS_OK);
	assert_false(full);
	assert_int_equal(gram_chain_lengthen(&chain, &full), STATUS_OK);
	assert_true(full);
	gram_chain_release(&chain);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(every_order_and_page),
		cmocka_unit_test(kinds_and_their_pages),
		cmocka_unit_test(the_row_takes_the_best),
		cmocka_unit_test(blocks_of_the_row),
		cmocka_unit_test(wide_symbols),
		cmocka_unit_test(one_letter),
		cmocka_unit_test(a_full_table),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
