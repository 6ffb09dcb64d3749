/*
 * Are the gaps of the controls those of theory? Store, where every byte takes 8
 * bits; zeros, where only the longest match and a block's header are left; and
 * random bytes, where stored blocks and the container are all.
 */
#include "codec/codec.h"

#include "support/bytes.h"
#include "support/near.h"
#include "support/tiny_survey.h"

#include <string.h>

#define BLOCKS 100
#define LENGTH 1000000

static uint8_t bytes[LENGTH];

/* Bytes above a floor of floor_bits a byte: the cell's gap, as bytes. */
static double gap_bytes(const char *name, const char *level,
			const char *container, double floor_bits)
{
	const struct setting_words words = {level, container, NULL, NULL};
	const struct symbol_rules rules = {.kind = SYMBOL_BYTE};
	struct codec_setting setting;
	struct sequence sequence;
	struct cuts cuts;
	struct survey survey;
	struct analysis analysis;
	struct method_fact *floor;
	const struct cell_row *row;
	struct reason why;
	double gap;

	assert_int_equal(
		setting_parse(codec_find(name), &words, &setting, &why),
		STATUS_OK);
	assert_int_equal(sequence_init(&sequence, (struct slice){bytes, LENGTH},
				       &rules, &why),
			 STATUS_OK);
	assert_int_equal(cuts_init(&cuts, &sequence), STATUS_OK);
	tiny_survey(&survey, cuts.blocks, LENGTH / cuts.blocks);
	survey.corpora[0].n = LENGTH;
	floor = tiny_method(&survey, "uniform", 1);
	tiny_series(&survey, floor->findings.series, floor_bits, 0, 1);
	assert_int_equal(
		cell_measure(codec_find(name), &setting, 0, &sequence, &cuts,
			     &tiny_cell(&survey, name, level, 0, 0)->facts,
			     &why),
		STATUS_OK);
	floor->findings.series->costs.headline_q16 =
		(int64_t)(floor_bits * LENGTH * (double)BIT_Q16);
	tiny_analyse(&survey, &analysis);
	row = &analysis.corpora[0].cells[0];
	assert_true(row->known && row->stack.known);
	gap = row->gap * LENGTH / 8;
	assert_near(row->stack.floor + row->stack.restart + row->stack.family +
			    row->stack.effort + row->stack.framing,
		    row->bits_per_symbol, 1e-9);
	assert_near(row->stack.framing * LENGTH / 8,
		    (double)row->fact->facts.framing_bytes, 1e-6);
	analysis_release(&analysis);
	survey_release(&survey);
	cuts_release(&cuts);
	sequence_release(&sequence);
	return gap;
}

static void store_is_what_it_copies(void **state)
{
	(void)state;
	bytes_random(bytes, LENGTH, 4);
	assert_near(gap_bytes("store", "0", NULL, 8), 0, 1e-6);
	assert_near(gap_bytes("store", "0", NULL, 2), LENGTH * 6 / 8.0, 1e-6);
}

/*
 * A floor of 8 bits a byte. Deflate: a stored block of at most 65,535 bytes
 * takes 5 (RFC 1951, 3.2.4), zlib's own limit is 16,383 at its usual memLevel:
 * 16 to 62 blocks, and 0, 6 or 18 around. zstd: 3 a block of 128 KiB (RFC 8878,
 * 3.1.1.2), 9 around. LZMA2: 3 a chunk of at most 64 KiB (some may be
 * shorter) and 1, 12 + 12 + 12 + 12 around, a check and padding.
 */
static void random_bytes_cost_headers_only(void **state)
{
	double raw;

	(void)state;
	bytes_random(bytes, LENGTH, 4);
	raw = gap_bytes("zlib", "6", "raw", 8);
	assert_true(raw >= 16 * 5 && raw <= 62 * 5 + 1);
	assert_near(gap_bytes("zlib", "6", "zlib", 8), raw + 6, 1e-6);
	assert_near(gap_bytes("zlib", "6", "gzip", 8), raw + 18, 1e-6);
	assert_near(gap_bytes("zstd", "3", NULL, 8), 8 * 3 + 9, 1e-6);
	raw = gap_bytes("xz", "6", "raw", 8);
	assert_true(raw > 16 * 3 + 1 - 1e-6 && raw < 18 * 3 + 1);
	/* 12 + 12 + 12 + index of 12, padded to 4, CRC-64. */
	assert_near(gap_bytes("xz", "6", "crc64", 8),
		    raw + 48 + (4 - (LENGTH + (int)(raw + .5)) % 4) % 4 + 8,
		    1e-6);
}

/*
 * A floor of 0. Deflate's longest match is 258 bytes (RFC 1951, 3.2.5) and
 * takes at least two bits, one of length and one of distance. zstd repeats 128
 * KiB in a block of 3 + 1 (RLE) at best. LZMA2's longest match is 273 bytes; at
 * the range coder's surest probability, 31/2048 of a bit or more each of about
 * ten decisions (from memory of its format), that is some hundred bytes.
 */
static void zeros_cost_the_longest_match(void **state)
{
	double least = LENGTH / 258.0 * 2 / 8, gap;

	(void)state;
	memset(bytes, 0, LENGTH);
	gap = gap_bytes("zlib", "9", "raw", 0);
	assert_true(gap >= least && gap < least + 40);
	gap = gap_bytes("zstd", "3", NULL, 0);
	assert_true(gap >= 8 * 4 + 6 && gap <= 8 * 4 + 6 + 30);
	gap = gap_bytes("xz", "6", "raw", 0);
	assert_true(gap > 80 && gap < 300);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(store_is_what_it_copies),
		cmocka_unit_test(random_bytes_cost_headers_only),
		cmocka_unit_test(zeros_cost_the_longest_match),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
