/* Is UTF-8 read as RFC 3629 says, and nothing else taken for it? */
#include "symbols/sequence.h"

#include "support/near.h"
#include "support/symbols_of.h"

#include <string.h>

#define COUNT_OF(array) (sizeof(array) / sizeof((array)[0]))

static void reads_the_examples_of_the_rfc(void **state)
{
	/* RFC 3629 section 7: U+0041 2262 0391 002E */
	const uint32_t alpha[] = {1, 3, 2, 0};
	/* U+D55C AD6D C5B4 */
	const uint32_t hangugeo[] = {2, 0, 1};
	/* U+65E5 672C 8A9E */
	const uint32_t nihongo[] = {0, 1, 2};
	/* U+FEFF 233B4 */
	const uint32_t stump[] = {0, 1};
	struct sequence sequence;

	(void)state;
	sequence = sequence_of(LITERAL("\x41\xE2\x89\xA2\xCE\x91\x2E"),
			       SYMBOL_CODEPOINT);
	assert_codes(&sequence, alpha, COUNT_OF(alpha));
	assert_int_equal(sequence.starts[1], 1);
	assert_int_equal(sequence.starts[2], 4);
	assert_int_equal(sequence.starts[3], 6);
	assert_int_equal(sequence_byte_of(&sequence, 4), 7);
	assert_int_equal(sequence.canonical_bytes, 7);
	/* Unicode: 1,114,112 code points, 2,048 of them surrogates. */
	assert_int_equal(sequence.alphabet, 1112064);
	assert_int_equal(sequence.distinct, 4);
	sequence_release(&sequence);
	sequence = sequence_of(LITERAL("\xED\x95\x9C\xEA\xB5\xAD\xEC\x96\xB4"),
			       SYMBOL_CODEPOINT);
	assert_codes(&sequence, hangugeo, COUNT_OF(hangugeo));
	sequence_release(&sequence);
	sequence = sequence_of(LITERAL("\xE6\x97\xA5\xE6\x9C\xAC\xE8\xAA\x9E"),
			       SYMBOL_CODEPOINT);
	assert_codes(&sequence, nihongo, COUNT_OF(nihongo));
	sequence_release(&sequence);
	sequence = sequence_of(LITERAL("\xEF\xBB\xBF\xF0\xA3\x8E\xB4"),
			       SYMBOL_CODEPOINT);
	assert_codes(&sequence, stump, COUNT_OF(stump));
	sequence_release(&sequence);
}

/* The first and last code points of every length: RFC 3629 section 3. */
static void takes_the_ends_of_every_length(void **state)
{
	const uint32_t wanted[] = {0, 1, 2, 3, 4, 5, 6, 7, 8, 9};
	struct sequence sequence = sequence_of(
		LITERAL("\x00\x7F\xC2\x80\xDF\xBF\xE0\xA0\x80\xED\x9F\xBF"
			"\xEE\x80\x80\xEF\xBF\xBF\xF0\x90\x80\x80"
			"\xF4\x8F\xBF\xBF"),
		SYMBOL_CODEPOINT);

	(void)state;
	assert_codes(&sequence, wanted, COUNT_OF(wanted));
	sequence_release(&sequence);
}

/* What the grammar of RFC 3629 section 4 leaves out. */
static void refuses_what_is_not_utf8(void **state)
{
	const struct {
		struct slice bytes;
		const char *words;
	} cases[] = {
		/* Overlong forms; the first is the RFC's own (section 3). */
		{LITERAL("\xC0\x80"), "longer form"},
		{LITERAL("\x2F\xC0\xAE\x2E\x2F"), "at byte 1"},
		{LITERAL("\xC1\xBF"), "longer form"},
		{LITERAL("\xE0\x9F\xBF"), "longer form"},
		{LITERAL("\xF0\x8F\xBF\xBF"), "longer form"},
		/* Surrogates, alone and as the pair of section 3. */
		{LITERAL("\xED\xA0\x80"), "surrogate"},
		{LITERAL("\xED\xBF\xBF"), "surrogate"},
		{LITERAL("\xED\xA1\x8C\xED\xBE\xB4"), "surrogate"},
		/* Beyond the last code point, and lead bytes of no use. */
		{LITERAL("\xF4\x90\x80\x80"), "beyond U+10FFFF"},
		{LITERAL("\xF7\xBF\xBF\xBF"), "beyond U+10FFFF"},
		{LITERAL("\xF8\x88\x80\x80\x80"), "never uses"},
		{LITERAL("\xFE"), "never uses"},
		{LITERAL("\xFF"), "never uses"},
		/* Strays and stumps. */
		{LITERAL("\x80"), "without a lead"},
		{LITERAL("\xBF"), "without a lead"},
		{LITERAL("\xC3"), "cut short"},
		{LITERAL("\xE2\x82"), "cut short"},
		{LITERAL("\xF0\x9F\x98"), "cut short"},
		{LITERAL("\xE2\x28\xA1"), "cut short"},
		{LITERAL("\xC3\xC3\xA9"), "cut short"},
	};
	struct symbol_rules rules = {.kind = SYMBOL_CODEPOINT};

	(void)state;
	for (size_t i = 0; i < COUNT_OF(cases); i++)
		assert_refused(cases[i].bytes, rules, STATUS_BAD_INPUT,
			       cases[i].words);
}

static void says_byte_and_line(void **state)
{
	struct symbol_rules rules = {.kind = SYMBOL_CODEPOINT};

	(void)state;
	assert_refused(LITERAL("tide\nebb\nfl\xFFod\n"), rules,
		       STATUS_BAD_INPUT, "byte 11 (line 3): 0xFF");
}

/* The grammar of section 4 on pairs of bytes. */
static void agrees_with_the_grammar_on_pairs(void **state)
{
	struct symbol_rules rules = {.kind = SYMBOL_CODEPOINT};
	struct sequence sequence;
	unsigned taken = 0;

	(void)state;
	for (unsigned pair = 0; pair < 65536; pair += 1) {
		uint8_t bytes[2] = {(uint8_t)(pair >> 8), (uint8_t)pair};
		struct slice slice = {bytes, 2};
		int ascii = bytes[0] < 0x80 && bytes[1] < 0x80;
		int two = bytes[0] >= 0xC2 && bytes[0] <= 0xDF &&
			  bytes[1] >= 0x80 && bytes[1] <= 0xBF;

		/* Mapping is slow on a table of all code points: thin out. */
		if (pair % 13 && bytes[0] != 0xC1 && bytes[0] != 0xC2)
			continue;
		assert_int_equal(sequence_init(&sequence, slice, &rules, NULL),
				 ascii || two ? STATUS_OK : STATUS_BAD_INPUT);
		if (ascii || two) {
			taken++;
			sequence_release(&sequence);
		}
	}
	assert_true(taken > 1000);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(reads_the_examples_of_the_rfc),
		cmocka_unit_test(takes_the_ends_of_every_length),
		cmocka_unit_test(refuses_what_is_not_utf8),
		cmocka_unit_test(says_byte_and_line),
		cmocka_unit_test(agrees_with_the_grammar_on_pairs),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
