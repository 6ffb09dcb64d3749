/*
 * Do containers take the bytes that their specifications give them? For inputs
 * of none, one and 4096 bytes; the sums stand beside their sections.
 */
#include "codec/codec.h"

#include "support/bytes.h"
#include "support/near.h"

#include <lzma.h>
#include <string.h>
#include <zlib.h>

#define PAGE 4096

struct sizes {
	size_t bytes;
	uint64_t framing;
};

static struct sizes sizes_of(const char *name, const char *level,
			     const char *container, size_t length)
{
	static uint8_t input[PAGE];
	const struct codec *codec = codec_find(name);
	const struct setting_words words = {level, container, NULL, NULL};
	struct codec_setting setting;
	struct codec_job job = {.setting = &setting, .input = {input, length}};
	struct sizes sizes = {0, 0};
	struct buffer packed;
	struct reason why;

	bytes_words(input, PAGE, 12);
	assert_int_equal(setting_parse(codec, &words, &setting, &why),
			 STATUS_OK);
	buffer_init(&packed, 1 << 20);
	assert_int_equal(codec->encode(&job, &packed, &why), STATUS_OK);
	sizes.bytes = packed.length;
	assert_int_equal(
		codec->framing(&setting,
			       (struct slice){packed.bytes, packed.length},
			       &sizes.framing),
		STATUS_OK);
	buffer_release(&packed);
	return sizes;
}

/*
 * Deflate of nothing is 03 00 (RFC 1951, 3.2.6), of one byte 3 bytes: 3 bits of
 * block header, 8 or 9 of a literal, 7 of the end. Around it: RFC 1950, 2.2:
 * CMF, FLG, ADLER32, 2 + 4; RFC 1952, 2.3: 10 without name, CRC32, ISIZE 8.
 */
static void deflate_in_its_three_containers(void **state)
{
	static const struct {
		const char *container;
		uint64_t framing;
	} rows[] = {{"raw", 0}, {"zlib", 6}, {"gzip", 18}};
	size_t payload = sizes_of("zlib", "6", "raw", PAGE).bytes;

	(void)state;
	for (size_t i = 0; i < 3; i++) {
		const char *container = rows[i].container;
		struct sizes empty = sizes_of("zlib", "6", container, 0);
		struct sizes one = sizes_of("zlib", "6", container, 1);
		struct sizes page = sizes_of("zlib", "6", container, PAGE);

		assert_int_equal(empty.bytes, 2 + rows[i].framing);
		assert_int_equal(one.bytes, 3 + rows[i].framing);
		assert_int_equal(page.bytes, payload + rows[i].framing);
		assert_int_equal(empty.framing, rows[i].framing);
		assert_int_equal(one.framing, rows[i].framing);
		assert_int_equal(page.framing, rows[i].framing);
	}
}

/*
 * The .xz file format 1.2: stream header 12 (2.1.1) and footer 12 (2.1.2); the
 * index of no block 8, of one small block 8 too: indicator, count, two sizes of
 * one to two bytes each, padding to 4, CRC32 (4); a block of a header of 12
 * (3.1: size, flags, LZMA2 with its properties, padding, CRC32), padding to 4
 * (3.3) and a check of 0, 4, 8 or 32 (3.4). LZMA2 itself takes 5 for one byte:
 * an uncompressed chunk of 3 + 1 and the end.
 */
static void xz_with_each_of_its_checks(void **state)
{
	static const struct {
		const char *container;
		uint64_t check;
	} rows[] = {{"none", 0}, {"crc32", 4}, {"crc64", 8}, {"sha256", 32}};
	size_t payload = sizes_of("xz", "6", "raw", PAGE).bytes;
	/* Unpadded size of 128 to 16383 and 4096: two bytes each. */
	uint64_t index = (1 + 1 + 2 + 2 + 3) / 4 * 4 + 4;

	(void)state;
	assert_in_range(payload, 128, 16000);
	for (size_t i = 0; i < 4; i++) {
		const char *container = rows[i].container;
		struct sizes empty = sizes_of("xz", "6", container, 0);
		struct sizes one = sizes_of("xz", "6", container, 1);
		struct sizes page = sizes_of("xz", "6", container, PAGE);
		uint64_t wanted = 12 + 12 + index + 12 + (4 - payload % 4) % 4 +
				  rows[i].check;

		assert_int_equal(empty.bytes, 32);
		assert_int_equal(empty.framing, 32);
		assert_int_equal(one.bytes, 52 + rows[i].check);
		assert_int_equal(one.framing, 52 + rows[i].check - 5);
		assert_int_equal(page.bytes, payload + wanted);
		assert_int_equal(page.framing, wanted);
	}
	assert_int_equal(sizes_of("xz", "6", "raw", 0).bytes, 1);
	assert_int_equal(sizes_of("xz", "6", "raw", 1).bytes, 5);
	assert_int_equal(sizes_of("xz", "6", "raw", PAGE).framing, 0);
}

/*
 * RFC 8878, 3.1.1: magic 4, checksum 4; 3.1.1.1: descriptor 1, window 1 unless
 * the content is one segment (its size known), content size 1 to 255 bytes and
 * 2 to 65,791. A block header takes 3, an empty frame has one block.
 */
static void zstd_with_each_part_left_out(void **state)
{
	static const struct {
		const char *container;
		uint64_t small, page;
	} rows[] = {{"sized", 4 + 1 + 1, 4 + 1 + 2},
		    {"checksum", 4 + 1 + 1 + 4, 4 + 1 + 2 + 4},
		    {"unsized", 4 + 1 + 1, 4 + 1 + 1},
		    {"magicless", 1 + 1, 1 + 2},
		    {"bare", 1 + 1, 1 + 1}};
	struct sizes usual = sizes_of("zstd", "3", "sized", PAGE);

	(void)state;
	for (size_t i = 0; i < 5; i++) {
		const char *container = rows[i].container;
		struct sizes empty = sizes_of("zstd", "3", container, 0);
		struct sizes one = sizes_of("zstd", "3", container, 1);
		struct sizes page = sizes_of("zstd", "3", container, PAGE);

		assert_int_equal(empty.bytes, rows[i].small + 3);
		assert_int_equal(empty.framing, rows[i].small);
		assert_int_equal(one.bytes, rows[i].small + 3 + 1);
		assert_int_equal(one.framing, rows[i].small);
		assert_int_equal(page.framing, rows[i].page);
		assert_int_equal(page.bytes - page.framing,
				 usual.bytes - usual.framing);
	}
	/* 28 b5 2f fd 20 00 01 00 00, and one byte more for one byte. */
	assert_int_equal(sizes_of("zstd", "3", "sized", 0).bytes, 9);
	assert_int_equal(sizes_of("zstd", "3", "sized", 1).bytes, 10);
}

/*
 * RFC 1952, 2.3.1: extra field with two bytes of length, name and comment with
 * a zero each, CRC16.
 */
static void what_gzip_may_carry_is_counted(void **state)
{
	static uint8_t extra[] = "tide", name[] = "gauge.bin",
		       comment[] = "flood", text[] = "ebb ebb ebb";
	uint8_t packed[200];
	gz_header header = {.extra = extra,
			    .extra_len = 4,
			    .name = name,
			    .comment = comment,
			    .hcrc = 1};
	const struct setting_words words = {"6", "gzip", NULL, NULL};
	struct codec_setting setting;
	z_stream stream = {.next_in = text,
			   .avail_in = sizeof(text),
			   .next_out = packed,
			   .avail_out = sizeof(packed)};
	uint64_t framing = 0;
	struct reason why;

	(void)state;
	assert_int_equal(
		setting_parse(codec_find("zlib"), &words, &setting, &why),
		STATUS_OK);
	assert_int_equal(deflateInit2(&stream, 6, Z_DEFLATED, MAX_WBITS + 16, 8,
				      Z_DEFAULT_STRATEGY),
			 Z_OK);
	assert_int_equal(deflateSetHeader(&stream, &header), Z_OK);
	assert_int_equal(deflate(&stream, Z_FINISH), Z_STREAM_END);
	assert_int_equal(codec_find("zlib")->framing(
				 &setting,
				 (struct slice){packed, stream.total_out},
				 &framing),
			 STATUS_OK);
	assert_int_equal(framing, 10 + 2 + 4 + 10 + 6 + 2 + 8);
	for (size_t end = 0; end < framing + 2; end++)
		assert_int_equal(codec_find("zlib")->framing(
					 &setting, (struct slice){packed, end},
					 &framing),
				 STATUS_BAD_INPUT);
	assert_int_equal(deflateEnd(&stream), Z_OK);
}

static enum status decode(const char *name, const char *level,
			  struct slice input, struct reason *why)
{
	const struct setting_words words = {level, NULL, NULL, NULL};
	struct codec_setting setting;
	struct codec_job job = {.setting = &setting, .input = input};
	struct buffer plain;
	enum status status;

	assert_int_equal(setting_parse(codec_find(name), &words, &setting, why),
			 STATUS_OK);
	buffer_init(&plain, 1000);
	status = codec_find(name)->decode(&job, &plain, why);
	buffer_release(&plain);
	return status;
}

/* A block that asks for a dictionary of a gibibyte (.xz format, 5.3.1). */
static void xz_windows_have_a_limit(void **state)
{
	uint8_t packed[100] = {0};
	lzma_stream_flags flags = {.version = 0, .check = LZMA_CHECK_CRC32};
	lzma_options_lzma options = {.dict_size = 1U << 30};
	lzma_filter filters[] = {{LZMA_FILTER_LZMA2, &options},
				 {LZMA_VLI_UNKNOWN, NULL}};
	lzma_block block = {.version = 0,
			    .check = LZMA_CHECK_CRC32,
			    .compressed_size = LZMA_VLI_UNKNOWN,
			    .uncompressed_size = LZMA_VLI_UNKNOWN,
			    .filters = filters};
	struct reason why = {""};

	(void)state;
	assert_int_equal(lzma_stream_header_encode(&flags, packed), LZMA_OK);
	assert_int_equal(lzma_block_header_size(&block), LZMA_OK);
	assert_int_equal(lzma_block_header_encode(&block, packed + 12),
			 LZMA_OK);
	assert_int_equal(decode("xz", "9e", (struct slice){packed, 100}, &why),
			 STATUS_CODEC);
	assert_non_null(strstr(why.text, "over the memory limit"));
}

/*
 * RFC 8878, 3.1.1.1.2: a window of 2^(10 + exponent), the upper five bits; the
 * RFC recommends decoders to take 8 MiB at least, libzstd's usual limit is
 * 2^27.
 */
static void zstd_windows_have_a_limit(void **state)
{
	/* Magic, descriptor, window, a last raw block of one byte. */
	uint8_t packed[] = {0x28,    0xb5, 0x2f, 0xfd, 0x00,
			    17 << 3, 0x09, 0x00, 0x00, 'e'};
	struct reason why = {""};

	(void)state;
	assert_int_equal(decode("zstd", "19", (struct slice){packed, 10}, &why),
			 STATUS_OK);
	packed[5] = 18 << 3;
	assert_int_equal(decode("zstd", "19", (struct slice){packed, 10}, &why),
			 STATUS_CODEC);
	assert_non_null(strstr(why.text, "too much memory"));
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(deflate_in_its_three_containers),
		cmocka_unit_test(xz_with_each_of_its_checks),
		cmocka_unit_test(zstd_with_each_part_left_out),
		cmocka_unit_test(what_gzip_may_carry_is_counted),
		cmocka_unit_test(xz_windows_have_a_limit),
		cmocka_unit_test(zstd_windows_have_a_limit),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
