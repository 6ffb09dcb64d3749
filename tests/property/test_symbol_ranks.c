/*
 * Does every kind round trip: do codes, read as ranks among the symbols that
 * occur, give back the file?
 */
#include "base/random.h"
#include "symbols/sequence.h"

#include "support/near.h"
#include "support/symbols_of.h"

#include <stdlib.h>
#include <string.h>

#define LENGTH 12000

/* Symbol i as bytes of the canonical string. */
static struct slice symbol_at(const struct sequence *sequence, size_t i)
{
	size_t from = sequence_byte_of(sequence, i);
	size_t to = sequence_byte_of(sequence, i + 1);

	return (struct slice){sequence->canonical + from, to - from};
}

static struct slice trimmed(struct slice symbol)
{
	while (symbol.length &&
	       strchr(" \t\n\v\f\r", symbol.bytes[symbol.length - 1]))
		symbol.length--;
	return symbol;
}

static int compare_slices(const void *left, const void *right)
{
	const struct slice *a = left, *b = right;
	size_t common = a->length < b->length ? a->length : b->length;
	int order = memcmp(a->bytes, b->bytes, common);

	return order ? order
		     : (a->length > b->length) - (a->length < b->length);
}

/* Little-endian numbers order by their last byte first. */
static int compare_little(const void *left, const void *right)
{
	const struct slice *a = left, *b = right;

	for (size_t i = a->length; i--;) {
		if (a->bytes[i] != b->bytes[i])
			return a->bytes[i] < b->bytes[i] ? -1 : 1;
	}
	return 0;
}

/*
 * Sorts all symbols, so that those equal lie together, and walks them: the
 * symbol at each code must be the one met as its rank.
 */
static void check(struct slice bytes, enum symbol_kind kind,
		  int (*compare)(const void *, const void *))
{
	struct sequence sequence = sequence_of(bytes, kind);
	size_t n = sequence.n, count = 0;
	struct slice *sorted;

	assert_int_equal(memory_new(n, sizeof(*sorted), &sorted), STATUS_OK);
	for (size_t i = 0; i < n; i++)
		sorted[i] = trimmed(symbol_at(&sequence, i));
	if (kind != SYMBOL_WORD) {
		for (size_t i = 0; i < n; i++)
			sorted[i] = symbol_at(&sequence, i);
	}
	qsort(sorted, n, sizeof(*sorted), compare);
	for (size_t i = 0; i < n; i++) {
		if (!count || compare(&sorted[count - 1], &sorted[i]))
			sorted[count++] = sorted[i];
	}
	assert_int_equal(sequence.distinct, count);
	assert_int_equal(sequence.code_count, count);
	for (size_t i = 0; i < n; i++) {
		struct slice symbol = symbol_at(&sequence, i);
		uint32_t code = code_of(&sequence, i);

		if (kind == SYMBOL_WORD)
			symbol = trimmed(symbol);
		assert_true(code < count);
		assert_int_equal(compare(&sorted[code], &symbol), 0);
	}
	assert_ptr_equal(sequence.canonical, bytes.bytes);
	assert_int_equal(sequence.canonical_bytes, bytes.length);
	memory_free(sorted);
	sequence_release(&sequence);
}

static void numbers_round_trip(void **state)
{
	static uint8_t bytes[LENGTH];
	struct random_stream random;

	(void)state;
	/* From few distinct numbers to nearly all different. */
	for (uint32_t spread = 1; spread <= 256; spread *= 4) {
		random_init(&random, spread, 1);
		for (size_t i = 0; i < LENGTH; i++)
			bytes[i] = (uint8_t)random_below(&random, spread);
		check((struct slice){bytes, LENGTH}, SYMBOL_U16LE,
		      compare_little);
		check((struct slice){bytes, LENGTH}, SYMBOL_U16BE,
		      compare_slices);
		check((struct slice){bytes, LENGTH}, SYMBOL_U32LE,
		      compare_little);
	}
}

static size_t put_utf8(uint8_t *at, uint32_t point)
{
	if (point < 0x80) {
		at[0] = (uint8_t)point;
		return 1;
	}
	if (point < 0x800) {
		at[0] = (uint8_t)(0xC0 | point >> 6);
		at[1] = (uint8_t)(0x80 | (point & 0x3F));
		return 2;
	}
	if (point < 0x10000) {
		at[0] = (uint8_t)(0xE0 | point >> 12);
		at[1] = (uint8_t)(0x80 | (point >> 6 & 0x3F));
		at[2] = (uint8_t)(0x80 | (point & 0x3F));
		return 3;
	}
	at[0] = (uint8_t)(0xF0 | point >> 18);
	at[1] = (uint8_t)(0x80 | (point >> 12 & 0x3F));
	at[2] = (uint8_t)(0x80 | (point >> 6 & 0x3F));
	at[3] = (uint8_t)(0x80 | (point & 0x3F));
	return 4;
}

static void code_points_round_trip(void **state)
{
	static const uint32_t ranges[] = {0x80, 0x900, 0xD800, 0x110000};
	static uint8_t bytes[4 * LENGTH];

	(void)state;
	for (size_t r = 0; r < 4; r++) {
		struct random_stream random;
		size_t length = 0;

		random_init(&random, 7, r);
		for (size_t i = 0; i < LENGTH; i++) {
			uint32_t point = random_below(&random, ranges[r]);

			if (point >= 0xD800 && point < 0xE000)
				point -= 0x800;
			length += put_utf8(bytes + length, point);
		}
		/* UTF-8 orders bytewise as its code points do. */
		check((struct slice){bytes, length}, SYMBOL_CODEPOINT,
		      compare_slices);
	}
}

static void words_round_trip(void **state)
{
	static uint8_t bytes[LENGTH];
	struct random_stream random;

	(void)state;
	for (uint32_t letters = 1; letters <= 64; letters *= 4) {
		random_init(&random, 8, letters);
		for (size_t i = 0; i < LENGTH; i++) {
			uint32_t draw = random_below(&random, letters + 2);

			bytes[i] = draw < 2 ? (uint8_t) " \n"[draw]
					    : (uint8_t)(0xBF + draw);
		}
		check((struct slice){bytes, LENGTH}, SYMBOL_WORD,
		      compare_slices);
	}
}

static void bits_round_trip(void **state)
{
	static uint8_t bytes[LENGTH];
	struct random_stream random;
	struct sequence sequence;

	(void)state;
	random_init(&random, 9, 0);
	for (size_t i = 0; i < LENGTH; i++)
		bytes[i] = (uint8_t)random_u32(&random);
	sequence = sequence_of((struct slice){bytes, LENGTH}, SYMBOL_BIT);
	assert_int_equal(sequence.n, 8 * LENGTH);
	for (size_t i = 0; i < LENGTH; i++) {
		unsigned byte = 0;

		for (size_t j = 0; j < 8; j++)
			byte = 2 * byte + code_of(&sequence, 8 * i + j);
		assert_int_equal(byte, bytes[i]);
	}
	sequence_release(&sequence);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(numbers_round_trip),
		cmocka_unit_test(code_points_round_trip),
		cmocka_unit_test(words_round_trip),
		cmocka_unit_test(bits_round_trip),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
