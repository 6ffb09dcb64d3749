/* Do cuts fall where they may, leave no block empty and keep blocks even? */
#include "symbols/sequence.h"

#include "support/near.h"
#include "support/symbols_of.h"

#include <string.h>

/* Bytes for any kind: letters, spaces and accents in irregular lengths. */
static uint8_t *text_new(size_t length)
{
	uint32_t random = 12345;
	uint8_t *text;

	assert_int_equal(memory_new(length, 1, &text), STATUS_OK);
	for (size_t i = 0; i < length; i++) {
		random = random * 1664525 + 1013904223;
		text[i] = (uint8_t) "tide  ebb\nflood"[(random >> 16) % 15];
		if (i && (random >> 28) == 0 && i + 1 < length) {
			text[i - 1] = 0xC3;
			text[i] = 0xA9;
		}
	}
	/* A pair may have been half overwritten by the next one. */
	for (size_t i = 0; i < length; i++) {
		if (text[i] == 0xC3 && (i + 1 == length || text[i + 1] != 0xA9))
			text[i] = 'x';
		if (text[i] == 0xA9 && (!i || text[i - 1] != 0xC3))
			text[i] = 'y';
	}
	return text;
}

/* Checks every promise of the header; returns the number of blocks. */
static size_t check(size_t length, struct symbol_rules rules, size_t apart)
{
	struct sequence sequence;
	size_t blocks, least = SIZE_MAX, most = 0, bytes_least = SIZE_MAX;
	uint8_t *text = text_new(length);
	struct cuts cuts;

	assert_int_equal(sequence_init(&sequence, (struct slice){text, length},
				       &rules, NULL),
			 STATUS_OK);
	assert_int_equal(cuts_init(&cuts, &sequence), STATUS_OK);
	blocks = cuts.blocks;
	for (size_t i = 0; i < blocks; i++) {
		size_t symbols = cuts.symbol[i + 1] - cuts.symbol[i];
		size_t bytes = cuts.byte[i + 1] - cuts.byte[i];

		assert_true(cuts.symbol[i + 1] > cuts.symbol[i]);
		assert_true(cuts.byte[i + 1] > cuts.byte[i]);
		assert_int_equal(cuts.symbol[i] % apart, 0);
		if (i)
			assert_int_equal(
				cuts.byte[i],
				sequence_byte_of(&sequence, cuts.symbol[i]));
		least = symbols < least ? symbols : least;
		most = symbols > most ? symbols : most;
		bytes_least = bytes < bytes_least ? bytes : bytes_least;
	}
	if (blocks) {
		assert_int_equal(cuts.symbol[0], 0);
		assert_int_equal(cuts.byte[0], 0);
		assert_int_equal(cuts.symbol[blocks], sequence.n);
		assert_int_equal(cuts.byte[blocks], sequence.canonical_bytes);
		assert_true(most - least <= apart);
		assert_true(blocks == 100 || bytes_least >= 4096);
		assert_true(blocks <= CUTS_BLOCKS_MAX);
	}
	cuts_release(&cuts);
	cuts_release(&cuts);
	sequence_release(&sequence);
	memory_free(text);
	return blocks;
}

static void short_sequences_have_none(void **state)
{
	struct symbol_rules rules = {.kind = SYMBOL_BYTE};

	(void)state;
	assert_int_equal(check(6399, rules, 1), 0);
	assert_int_equal(check(6400, rules, 1), 100);
	rules.kind = SYMBOL_U32LE;
	assert_int_equal(check(4 * 6399, rules, 1), 0);
	assert_int_equal(check(4 * 6400, rules, 1), 100);
	rules.kind = SYMBOL_BIT;
	assert_int_equal(check(799, rules, 8), 0);
	assert_int_equal(check(800, rules, 8), 100);
}

static void their_number_grows_with_the_length(void **state)
{
	struct symbol_rules rules = {.kind = SYMBOL_BYTE};

	(void)state;
	assert_int_equal(check(200 * 4096 - 1, rules, 1), 100);
	assert_int_equal(check(200 * 4096, rules, 1), 200);
	assert_int_equal(check(400 * 4096 + 123, rules, 1), 400);
	assert_int_equal(check(3200 * 4096 + 123, rules, 1), 3200);
	assert_int_equal(check(7000 * 4096, rules, 1), 3200);
}

static void they_keep_symbols_and_records_whole(void **state)
{
	static const struct {
		enum symbol_kind kind;
		size_t record_bytes, apart; /* in symbols */
	} cases[] = {
		{SYMBOL_BYTE, 17, 17},
		{SYMBOL_BIT, 0, 8},
		{SYMBOL_BIT, 3, 24},
		/* lcm(2, 3) = 6 bytes, lcm(2, 34) = 34, lcm(4, 6) = 12 */
		{SYMBOL_U16LE, 3, 3},
		{SYMBOL_U16BE, 34, 17},
		{SYMBOL_U32LE, 6, 3},
		{SYMBOL_U32LE, 2, 1},
		{SYMBOL_LETTERS27, 0, 1},
		{SYMBOL_CODEPOINT, 0, 1},
		{SYMBOL_WORD, 0, 1},
	};
	/* A multiple of every width above: 4 x 3 x 17 x 500. */
	const size_t length = 102000;

	(void)state;
	for (size_t i = 0; i < sizeof(cases) / sizeof(cases[0]); i++) {
		struct symbol_rules rules = {.kind = cases[i].kind,
					     .record_bytes =
						     cases[i].record_bytes};

		assert_int_equal(check(length, rules, cases[i].apart), 100);
		(void)check(length * 11, rules, cases[i].apart);
	}
}

static void wide_records_limit_them(void **state)
{
	struct symbol_rules rules = {.kind = SYMBOL_BYTE, .record_bytes = 1000};

	(void)state;
	assert_int_equal(check(99000, rules, 1000), 0);
	assert_int_equal(check(100000, rules, 1000), 100);
	rules.record_bytes = 16384;
	assert_int_equal(check((size_t)16384 * 250, rules, 16384), 200);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(short_sequences_have_none),
		cmocka_unit_test(their_number_grows_with_the_length),
		cmocka_unit_test(they_keep_symbols_and_records_whole),
		cmocka_unit_test(wide_records_limit_them),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
