/* Does counting a container's bytes hold for damaged and foreign streams? */
#include "codec/codec.h"

#include "support/bytes.h"
#include "support/near.h"

#include <stdlib.h>
#include <string.h>
#include <zlib.h>
#include <zstd.h>

#define LENGTH 3000

static const char *const levels[][2] = {
	{"store", "0"}, {"zlib", "6"}, {"xz", "1"}, {"zstd", "3"}};

static const struct codec_setting usual = {.text = ""};

/* Through a copy of exactly that size, so that a sanitizer sees overreads. */
static enum status framing_of(const struct codec *codec, const uint8_t *bytes,
			      size_t length, uint64_t *framing)
{
	uint8_t *copy = malloc(length ? length : 1);
	enum status status;

	assert_non_null(copy);
	if (length)
		memcpy(copy, bytes, length);
	status = codec->framing(&usual, (struct slice){copy, length}, framing);
	free(copy);
	return status;
}

static void pack(const char *const row[2], struct buffer *packed)
{
	static uint8_t bytes[LENGTH];
	struct codec_setting setting = {.text = ""};
	struct codec_job job = {.setting = &setting, .input = {bytes, LENGTH}};
	struct reason why;

	bytes_words(bytes, LENGTH, 9);
	assert_int_equal(codec_find(row[0])->parse(row[1], &setting, &why),
			 STATUS_OK);
	buffer_init(packed, 1 << 20);
	assert_int_equal(codec_find(row[0])->encode(&job, packed, &why),
			 STATUS_OK);
}

static void damage_is_refused_or_counted_within(void **state)
{
	(void)state;
	for (size_t i = 0; i < 4; i++) {
		const struct codec *codec = codec_find(levels[i][0]);
		struct buffer packed;

		pack(levels[i], &packed);
		for (size_t at = 0; at < packed.length; at++) {
			for (unsigned bit = 0; bit < 8; bit++) {
				uint64_t framing = 0;

				packed.bytes[at] ^= (uint8_t)(1U << bit);
				if (framing_of(codec, packed.bytes,
					       packed.length,
					       &framing) == STATUS_OK)
					assert_true(framing <= packed.length);
				packed.bytes[at] ^= (uint8_t)(1U << bit);
			}
		}
		buffer_release(&packed);
	}
}

/*
 * .xz ends in a footer (its format, 2.1.2) and a zstd frame in a block marked
 * last (RFC 8878, 3.1.1.2.1), so a prefix is no whole stream; the end of a zlib
 * stream is known only to a decoder, but 2 + 2 + 4 bytes are the least.
 */
static void prefixes_are_refused(void **state)
{
	(void)state;
	for (size_t i = 1; i < 4; i++) {
		const struct codec *codec = codec_find(levels[i][0]);
		struct buffer packed;
		uint64_t framing;

		pack(levels[i], &packed);
		for (size_t end = 0; end < (i == 1 ? 8 : packed.length); end++)
			assert_int_equal(
				framing_of(codec, packed.bytes, end, &framing),
				STATUS_BAD_INPUT);
		buffer_release(&packed);
	}
}

static void streams_of_other_formats_are_refused(void **state)
{
	(void)state;
	for (size_t i = 1; i < 4; i++) {
		struct buffer packed;
		uint64_t framing;

		pack(levels[i], &packed);
		for (size_t j = 1; j < 4; j++)
			assert_int_equal(framing_of(codec_find(levels[j][0]),
						    packed.bytes, packed.length,
						    &framing),
					 i == j ? STATUS_OK : STATUS_BAD_INPUT);
		buffer_release(&packed);
	}
}

/* RFC 1950, section 2.2: with FDICT set, DICTID takes four bytes more. */
static void a_preset_dictionary_is_named(void **state)
{
	uint8_t words[] = "ebb flood slack ebb", packed[200];
	z_stream stream = {.next_in = words,
			   .avail_in = sizeof(words),
			   .next_out = packed,
			   .avail_out = sizeof(packed)};
	uint64_t framing = 0;

	(void)state;
	assert_int_equal(deflateInit(&stream, 6), Z_OK);
	assert_int_equal(deflateSetDictionary(&stream, words, 10), Z_OK);
	assert_int_equal(deflate(&stream, Z_FINISH), Z_STREAM_END);
	assert_int_equal(framing_of(codec_find("zlib"), packed,
				    stream.total_out, &framing),
			 STATUS_OK);
	assert_int_equal(framing, 10);
	assert_int_equal(deflateEnd(&stream), Z_OK);
}

/*
 * RFC 8878: the checksum is the low four bytes of XXH64 with seed 0 (3.1.1);
 * of nothing XXH64 is ef46db3751d8e999 (from memory of its specification). A
 * skippable frame is magic, size and content (3.1.2), none of it payload.
 */
static void checksums_and_skipped_frames_count(void **state)
{
	static const uint8_t low[] = {0x99, 0xe9, 0xd8, 0x51};
	uint8_t packed[100] = {0x50, 0x2a, 0x4d, 0x18, 3,  0,
			       0,    0,    'b',  'a',  'y'};
	ZSTD_CCtx *context = ZSTD_createCCtx();
	uint64_t framing = 0;
	size_t length;

	(void)state;
	assert_non_null(context);
	assert_false(ZSTD_isError(
		ZSTD_CCtx_setParameter(context, ZSTD_c_checksumFlag, 1)));
	length = ZSTD_compress2(context, packed + 11, sizeof(packed) - 11, "",
				0);
	assert_int_equal(length, 4 + 2 + 3 + 4);
	assert_memory_equal(packed + 11 + 9, low, 4);
	assert_int_equal(
		framing_of(codec_find("zstd"), packed + 11, length, &framing),
		STATUS_OK);
	assert_int_equal(framing, 4 + 2 + 4);
	assert_int_equal(
		framing_of(codec_find("zstd"), packed, 11 + length, &framing),
		STATUS_OK);
	assert_int_equal(framing, 11 + 4 + 2 + 4);
	(void)ZSTD_freeCCtx(context);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(damage_is_refused_or_counted_within),
		cmocka_unit_test(prefixes_are_refused),
		cmocka_unit_test(streams_of_other_formats_are_refused),
		cmocka_unit_test(a_preset_dictionary_is_named),
		cmocka_unit_test(checksums_and_skipped_frames_count),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
