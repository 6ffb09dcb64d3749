/* Does each kind map small inputs to what its definition says? */
#include "symbols/sequence.h"

#include "support/near.h"
#include "support/symbols_of.h"

#include <string.h>

#define COUNT_OF(array) (sizeof(array) / sizeof((array)[0]))

static void names_are_parsed_back(void **state)
{
	struct reason why = {""};
	enum symbol_kind kind = SYMBOL_WORD;

	(void)state;
	for (unsigned i = 0; i < SYMBOL_KIND_COUNT; i++) {
		const char *name = symbol_kind_name((enum symbol_kind)i);

		assert_int_equal(symbol_kind_parse(name, &kind, &why),
				 STATUS_OK);
		assert_int_equal(kind, i);
	}
	assert_int_equal(symbol_kind_parse("u24", &kind, &why),
			 STATUS_BAD_USAGE);
	assert_int_equal(kind, SYMBOL_WORD);
	assert_non_null(strstr(why.text, "u24"));
	assert_non_null(strstr(why.text,
			       "byte bit u16le u16be u32le "
			       "nucleotide letters27 codepoint word"));
	assert_string_equal(symbol_kind_name((enum symbol_kind)99), "unknown");
}

static void bytes_are_their_own_codes(void **state)
{
	struct slice bytes = LITERAL("\xFF\0a\xFF");
	struct sequence sequence = sequence_of(bytes, SYMBOL_BYTE);

	(void)state;
	assert_ptr_equal(sequence.canonical, bytes.bytes);
	assert_ptr_equal(sequence.codes, bytes.bytes);
	assert_int_equal(sequence.n, 4);
	assert_int_equal(sequence.code_width, 1);
	assert_int_equal(sequence.code_count, 256);
	assert_int_equal(sequence.distinct, 3);
	assert_int_equal(sequence.alphabet, 256);
	assert_null(sequence.starts);
	assert_int_equal(sequence_byte_of(&sequence, 3), 3);
	sequence_release(&sequence);
	sequence_release(&sequence);
}

static void bits_come_highest_first(void **state)
{
	/* 0xA5 = 1010 0101, 0x01 = 0000 0001 */
	const uint32_t wanted[] = {1, 0, 1, 0, 0, 1, 0, 1,
				   0, 0, 0, 0, 0, 0, 0, 1};
	struct sequence sequence = sequence_of(LITERAL("\xA5\x01"), SYMBOL_BIT);
	struct sequence ones = sequence_of(LITERAL("\xFF\xFF"), SYMBOL_BIT);

	(void)state;
	assert_codes(&sequence, wanted, COUNT_OF(wanted));
	assert_int_equal(sequence.code_count, 2);
	assert_int_equal(sequence.distinct, 2);
	assert_int_equal(sequence.alphabet, 2);
	assert_int_equal(sequence.canonical_bytes, 2);
	assert_int_equal(sequence_byte_of(&sequence, 9), 1);
	assert_int_equal(sequence_byte_of(&sequence, 16), 2);
	assert_int_equal(ones.distinct, 1);
	sequence_release(&sequence);
	sequence_release(&ones);
}

static void wide_codes_are_ranks_of_values(void **state)
{
	/* As u16le 0x0100 0x0002 0x0100 0xFF00; u16be 0x0001 0x0200 … 0x00FF */
	struct slice bytes = LITERAL("\x00\x01\x02\x00\x00\x01\x00\xFF");
	const uint32_t little[] = {1, 0, 1, 2}, big[] = {0, 2, 0, 1};
	/* As u32le 0x00020100, 0xFF000100 */
	const uint32_t four[] = {0, 1};
	struct sequence le = sequence_of(bytes, SYMBOL_U16LE);
	struct sequence be = sequence_of(bytes, SYMBOL_U16BE);
	struct sequence u32 = sequence_of(bytes, SYMBOL_U32LE);

	(void)state;
	assert_codes(&le, little, COUNT_OF(little));
	assert_codes(&be, big, COUNT_OF(big));
	assert_codes(&u32, four, COUNT_OF(four));
	assert_int_equal(le.code_width, 1);
	assert_int_equal(le.code_count, 3);
	assert_int_equal(le.distinct, 3);
	assert_int_equal(le.alphabet, 65536);
	assert_true(u32.alphabet == UINT64_C(4294967296));
	assert_int_equal(sequence_byte_of(&le, 3), 6);
	assert_int_equal(sequence_byte_of(&u32, 2), 8);
	sequence_release(&le);
	sequence_release(&be);
	sequence_release(&u32);
}

static void codes_are_as_narrow_as_they_can_be(void **state)
{
	static uint8_t bytes[2 * 65536];
	struct sequence sequence;

	(void)state;
	for (size_t i = 0; i < 65536; i++) {
		bytes[2 * i] = (uint8_t)i;
		bytes[2 * i + 1] = (uint8_t)(i >> 8);
	}
	sequence = sequence_of((struct slice){bytes, 512}, SYMBOL_U16LE);
	assert_int_equal(sequence.code_width, 1);
	assert_int_equal(sequence.code_count, 256);
	sequence_release(&sequence);
	sequence = sequence_of((struct slice){bytes, 514}, SYMBOL_U16LE);
	assert_int_equal(sequence.code_width, 2);
	assert_int_equal(code_of(&sequence, 256), 256);
	/* Big-endian: codes order as bytes do. */
	assert_int_equal(sequence.codes[512], 1);
	assert_int_equal(sequence.codes[513], 0);
	sequence_release(&sequence);
	sequence = sequence_of((struct slice){bytes, 131072}, SYMBOL_U16LE);
	assert_int_equal(sequence.code_width, 2);
	assert_int_equal(code_of(&sequence, 65535), 65535);
	sequence_release(&sequence);
}

static void nucleotide_takes_bases_only(void **state)
{
	struct symbol_rules rules = {.kind = SYMBOL_NUCLEOTIDE};
	struct sequence sequence =
		sequence_of(LITERAL("GATTACA"), SYMBOL_NUCLEOTIDE);

	(void)state;
	assert_int_equal(sequence.alphabet, 4);
	assert_int_equal(sequence.distinct, 4);
	assert_int_equal(sequence.code_count, 256);
	assert_memory_equal(sequence.codes, "GATTACA", 7);
	sequence_release(&sequence);
	assert_refused(LITERAL("ACGT\n"), rules, STATUS_BAD_INPUT,
		       "byte 4 (line 1) is 0x0A");
	assert_refused(LITERAL("ACgT"), rules, STATUS_BAD_INPUT, "byte 2");
	assert_refused(LITERAL("ACNT"), rules, STATUS_BAD_INPUT, "A C G T");
}

static void letters_are_folded(void **state)
{
	struct symbol_rules rules = {.kind = SYMBOL_LETTERS27};
	struct sequence sequence = sequence_of(
		LITERAL("--Call me\r\n  ISHMAEL\xE2\x80\x94z9@[`{.\n"),
		SYMBOL_LETTERS27);

	(void)state;
	assert_int_equal(sequence.canonical_bytes, 19);
	assert_memory_equal(sequence.canonical, " call me ishmael z ", 19);
	assert_ptr_equal(sequence.codes, sequence.canonical);
	assert_int_equal(sequence.n, 19);
	assert_int_equal(sequence.alphabet, 27);
	assert_int_equal(sequence.distinct, 10);
	assert_int_equal(sequence_byte_of(&sequence, 19), 19);
	sequence_release(&sequence);
	assert_refused(LITERAL("12 34\n"), rules, STATUS_BAD_INPUT,
		       "no letter");
}

static void words_are_runs_of_non_space(void **state)
{
	struct symbol_rules rules = {.kind = SYMBOL_WORD};
	/* be < not < or < to, "to," after "to" */
	const uint32_t wanted[] = {3, 0, 2, 1, 4, 0};
	struct sequence sequence = sequence_of(
		LITERAL(" \tto be\vor\fnot\r\nto, be "), SYMBOL_WORD);
	/* A byte above 0x7F is no space and sorts after ASCII. */
	const uint32_t high[] = {1, 0};
	struct sequence bytes = sequence_of(LITERAL("\xC2\xA0 z"), SYMBOL_WORD);

	(void)state;
	assert_codes(&sequence, wanted, COUNT_OF(wanted));
	assert_int_equal(sequence.alphabet, 5);
	assert_int_equal(sequence.distinct, 5);
	assert_int_equal(sequence.canonical_bytes, 23);
	assert_int_equal(sequence.starts[0], 2);
	assert_int_equal(sequence.starts[5], 20);
	assert_int_equal(sequence.starts[6], 23);
	assert_int_equal(sequence_byte_of(&sequence, 1), 5);
	assert_codes(&bytes, high, COUNT_OF(high));
	sequence_release(&sequence);
	sequence_release(&bytes);
	assert_refused(LITERAL(" \n\t"), rules, STATUS_BAD_INPUT,
		       "white space");
}

static void lengths_must_fit_the_width(void **state)
{
	struct symbol_rules rules = {.kind = SYMBOL_U32LE};

	(void)state;
	assert_refused(LITERAL("abcdefg"), rules, STATUS_BAD_INPUT,
		       "7 bytes are no multiple of the 4 bytes of a u32le: 3");
	rules = (struct symbol_rules){.kind = SYMBOL_BYTE, .record_bytes = 3};
	assert_refused(LITERAL("abcdefgh"), rules, STATUS_BAD_INPUT,
		       "the 3 bytes of a record: 2 are left over");
	rules.record_bytes = 0;
	assert_refused(LITERAL(""), rules, STATUS_BAD_INPUT, "empty");
}

static size_t records_in(struct slice bytes, struct symbol_rules rules)
{
	struct sequence sequence;
	size_t records;

	assert_int_equal(sequence_init(&sequence, bytes, &rules, NULL),
			 STATUS_OK);
	records = sequence.records;
	sequence_release(&sequence);
	return records;
}

static void records_are_counted(void **state)
{
	struct symbol_rules lines = {.kind = SYMBOL_LETTERS27,
				     .record_lines = true};
	struct symbol_rules fixed = {.kind = SYMBOL_U16LE, .record_bytes = 3};
	struct symbol_rules none = {.kind = SYMBOL_BYTE};

	(void)state;
	/* Folding removes the line ends, but they are the file's. */
	assert_int_equal(records_in(LITERAL("a\nb\n\nc\n"), lines), 4);
	assert_int_equal(records_in(LITERAL("a\nb"), lines), 2);
	assert_int_equal(records_in(LITERAL("ab"), lines), 1);
	assert_int_equal(records_in(LITERAL("abcdef"), fixed), 2);
	assert_int_equal(records_in(LITERAL("a\nb\n"), none), 0);
	none.record_count = 3;
	assert_int_equal(records_in(LITERAL("a\nb\n"), none), 3);
	fixed.kind = SYMBOL_WORD;
	assert_refused(LITERAL("abcdef"), fixed, STATUS_BAD_USAGE,
		       "records = lines");
	fixed = (struct symbol_rules){SYMBOL_BYTE, 2, true, 0};
	assert_refused(LITERAL("abcdef"), fixed, STATUS_BAD_USAGE, "not both");
	fixed = (struct symbol_rules){SYMBOL_BYTE, 2, false, 3};
	assert_refused(LITERAL("abcdef"), fixed, STATUS_BAD_USAGE, "not both");
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(names_are_parsed_back),
		cmocka_unit_test(bytes_are_their_own_codes),
		cmocka_unit_test(bits_come_highest_first),
		cmocka_unit_test(wide_codes_are_ranks_of_values),
		cmocka_unit_test(codes_are_as_narrow_as_they_can_be),
		cmocka_unit_test(nucleotide_takes_bases_only),
		cmocka_unit_test(letters_are_folded),
		cmocka_unit_test(words_are_runs_of_non_space),
		cmocka_unit_test(lengths_must_fit_the_width),
		cmocka_unit_test(records_are_counted),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
