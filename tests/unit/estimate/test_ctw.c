/* Is context-tree weighting what its definition gives? */
#include "support/coded.h"
#include "support/weighted.h"

#include "estimate/ctw_model.h"

#include "base/random.h"
#include "support/near.h"
#include "support/symbols_of.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

static double model_bits(const uint8_t *symbols, size_t known, size_t n,
			 unsigned alphabet, unsigned depth)
{
	struct ctw_model model;
	double bits;

	assert_int_equal(ctw_model_init(&model, alphabet, depth, n * 256),
			 STATUS_OK);
	bits = (double)ctw_model_measure_q32(&model, symbols, 0, known, n) *
	       0x1p-32;
	assert_int_equal(model.tree.refused, 0);
	ctw_model_release(&model);
	return bits;
}

/* Willems, Shtarkov, Tjalkens 1995, the worked example (from memory): after
 * …010 the sequence 0110100 has P_w = 95/32768 at depth 3. */
static void the_worked_example(void **state)
{
	static const uint8_t symbols[] = {0, 1, 0, 0, 1, 1, 0, 1, 0, 0};

	(void)state;
	assert_near(model_bits(symbols, 3, 10, 2, 3), log2(32768. / 95), 1e-6);
	assert_near(model_bits(symbols, 3, 10, 2, 3), 8.430144, 1e-6);
}

/* The decisions of one prefix: those symbols whose upper bits are it. */
static double tree_by_hand(const uint8_t *symbols, size_t n, unsigned alphabet,
			   unsigned depth, unsigned bit, unsigned prefix)
{
	static uint8_t one[600], before[600][16];
	size_t count = 0;

	if (((prefix << 1 | 1) << bit) >= alphabet)
		return 0;
	for (size_t t = 0; t < n; t++) {
		if (symbols[t] >> (bit + 1) != (uint8_t)prefix)
			continue;
		one[count] = symbols[t] >> bit & 1;
		for (unsigned d = 0; d < depth; d++)
			before[count][d] = t > d ? symbols[t - 1 - d] : 0;
		count++;
	}
	return weighted_bits(one, (const uint8_t(*)[16])before, count, alphabet,
			     depth);
}

static double by_hand(const uint8_t *symbols, size_t n, unsigned alphabet,
		      unsigned depth)
{
	unsigned decisions = 0;
	double bits = 0;

	while (1u << decisions < alphabet)
		decisions++;
	for (unsigned bit = 0; bit < decisions; bit++) {
		unsigned prefixes = 1u << (decisions - 1 - bit);

		for (unsigned prefix = 0; prefix < prefixes; prefix++)
			bits += tree_by_hand(symbols, n, alphabet, depth, bit,
					     prefix);
	}
	return bits;
}

static void fill(uint8_t *symbols, size_t n, unsigned alphabet, uint64_t seed)
{
	struct random_stream random;

	random_init(&random, seed, 0);
	for (size_t i = 0; i < n; i++)
		symbols[i] =
			(uint8_t)(i > 5 && random_below(&random, 6)
					  ? symbols[i - 2 - symbols[i - 1] % 3]
					  : random_below(&random, alphabet));
}

static void against_the_definition(void **state)
{
	uint8_t symbols[600];

	(void)state;
	for (unsigned round = 0; round < 29; round++) {
		size_t n = 1 + round * 20;
		unsigned alphabet = 1 + round % 5, depth = round % 7;

		fill(symbols, n, alphabet, round);
		assert_near(model_bits(symbols, 0, n, alphabet, depth),
			    by_hand(symbols, n, alphabet, depth), 1e-5);
	}
	fill(symbols, 600, 256, 99);
	assert_near(model_bits(symbols, 0, 600, 256, 2),
		    by_hand(symbols, 600, 256, 2), 1e-4);
}

/* A weight that would have gone below 2^-40 comes back sooner, to the good. */
static void limits_of_the_weights(void **state)
{
	uint8_t symbols[600];
	double bits, wanted;

	(void)state;
	fill(symbols, 581, 5, 29);
	bits = model_bits(symbols, 0, 581, 5, 1);
	wanted = by_hand(symbols, 581, 5, 1);
	assert_true(bits < wanted - 1);
	assert_true(bits > wanted - 40);
}

/* Counts beyond 2^24 are halved; half log2 of pi n still (Stirling). */
static void more_zeros_than_counts_hold(void **state)
{
	const size_t n = ((size_t)1 << 24) + 300000;
	uint8_t *symbols = calloc(n, 1);

	(void)state;
	assert_near(model_bits(symbols, 0, n, 2, 0),
		    log2(3.14159265358979324 * (double)n) / 2, 0.02);
	free(symbols);
}

/* Random bytes in a table far too small: paths end early, nothing breaks. */
static void a_full_table(void **state)
{
	enum { LENGTH = 30000 };
	static uint8_t symbols[LENGTH];
	struct random_stream random;
	struct ctw_model model;
	double bits;

	(void)state;
	random_init(&random, 1, 0);
	for (size_t i = 0; i < LENGTH; i++)
		symbols[i] = (uint8_t)random_below(&random, 256);
	assert_int_equal(ctw_model_init(&model, 256, 6, 1000), STATUS_OK);
	bits = (double)ctw_model_measure_q32(&model, symbols, 0, 0, LENGTH) *
	       0x1p-32;
	assert_true(model.tree.refused > 0);
	assert_true(model.tree.nodes <= 8192);
	assert_true(bits > 7.99 * LENGTH && bits < 8.2 * LENGTH);
	ctw_model_release(&model);
}

/* Small alphabets keep their symbols; which ones were seen is paid for. */
static void the_row_on_small_alphabets(void **state)
{
	static const char bases[] = "ACGT";
	uint8_t symbols[100], text[100];
	struct sequence sequence;
	struct findings findings;
	double subset = 1 + 8 + log2(256. * 255 * 254 * 253 / 24);

	(void)state;
	fill(symbols, sizeof(symbols), 4, 3);
	for (size_t i = 0; i < sizeof(symbols); i++)
		text[i] = (uint8_t)bases[symbols[i]];
	for (int plain = 0; plain < 2; plain++) {
		sequence = sequence_of((struct slice){text, sizeof(text)},
				       plain ? SYMBOL_BYTE : SYMBOL_NUCLEOTIDE);
		findings = coded_findings((struct coded_run){.row = "ctw"},
					  &sequence);
		assert_int_equal(findings.series[0].order, 12);
		assert_near(
			bits_from_q16(findings.series[0].costs.headline_q16),
			by_hand(symbols, sizeof(symbols), 4, 12) +
				(plain ? subset : 0),
			1e-4);
		findings_release(&findings);
		sequence_release(&sequence);
	}
}

/* Each page by itself, whatever the blocks; and blocks add up. */
static void pages_and_blocks(void **state)
{
	enum { LENGTH = 12800, PAGE = 500 };
	static uint8_t bytes[LENGTH];
	struct sequence sequence;
	struct cuts cuts;
	struct findings findings;
	double pages = 0;

	(void)state;
	fill(bytes, LENGTH, 20, 8);
	for (int kind = SYMBOL_BYTE; kind <= SYMBOL_U16LE; kind++) {
		sequence = sequence_of((struct slice){bytes, LENGTH},
				       (enum symbol_kind)kind);
		assert_int_equal(cuts_init(&cuts, &sequence), STATUS_OK);
		findings =
			coded_findings((struct coded_run){.row = "ctw",
							  .cuts = &cuts,
							  .page_bytes = PAGE},
				       &sequence);
		assert_int_equal(findings.series[0].costs.blocks, cuts.blocks);
		assert_int_equal(costs_block_total(&findings.series[0].costs),
				 findings.series[0].costs.headline_q16);
		pages = 0;
		for (size_t at = 0; at < LENGTH; at += PAGE) {
			size_t left = LENGTH - at < PAGE ? LENGTH - at : PAGE;

			if (kind != SYMBOL_BIT)
				pages +=
					model_bits(bytes + at, 0, left, 256, 6);
			else
				pages += model_bits(sequence.codes + 8 * at, 0,
						    8 * left, 2, 24);
		}
		assert_near(
			bits_from_q16(findings.series[0].costs.headline_q16),
			pages + (kind != SYMBOL_BIT), 1e-4);
		findings_release(&findings);
		cuts_release(&cuts);
		sequence_release(&sequence);
	}
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(the_worked_example),
		cmocka_unit_test(against_the_definition),
		cmocka_unit_test(limits_of_the_weights),
		cmocka_unit_test(more_zeros_than_counts_hold),
		cmocka_unit_test(a_full_table),
		cmocka_unit_test(the_row_on_small_alphabets),
		cmocka_unit_test(pages_and_blocks),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
