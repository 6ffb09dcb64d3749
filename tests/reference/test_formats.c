/* Are containers and checks what their published formats say? */
#include "codec/codec.h"

#include "support/bytes.h"
#include "support/near.h"

#include <lzma.h>
#include <math.h>
#include <string.h>
#include <zlib.h>

static size_t packed_bytes(const char *name, const char *level,
			   const uint8_t *bytes, size_t length,
			   struct buffer *packed)
{
	const struct codec *codec = codec_find(name);
	struct codec_setting setting = {.text = ""};
	struct codec_job job = {.setting = &setting, .input = {bytes, length}};
	struct reason why;

	assert_int_equal(codec->parse(level, &setting, &why), STATUS_OK);
	packed->length = 0;
	assert_int_equal(codec->encode(&job, packed, &why), STATUS_OK);
	return packed->length;
}

static uint64_t framing_of(const char *name, const struct buffer *packed)
{
	const struct codec_setting usual = {.text = ""};
	uint64_t framing = 0;

	assert_int_equal(codec_find(name)->framing(
				 &usual,
				 (struct slice){packed->bytes, packed->length},
				 &framing),
			 STATUS_OK);
	return framing;
}

/*
 * RFC 1950 2.2: 2 + 4 bytes around Deflate, whose empty stream is 03 00 (RFC
 * 1951 3.2.6: a fixed-code block of only the end symbol); one byte takes 3.
 */
static void zlib_streams_are_as_rfc_1950(void **state)
{
	static const uint8_t empty[] = {0x03, 0x00, 0x00, 0x00, 0x00, 0x01};
	struct buffer packed;

	(void)state;
	buffer_init(&packed, 1000);
	assert_int_equal(packed_bytes("zlib", "6", empty, 0, &packed), 8);
	assert_int_equal(packed.bytes[0], 0x78);
	assert_int_equal((packed.bytes[0] * 256 + packed.bytes[1]) % 31, 0);
	assert_memory_equal(packed.bytes + 2, empty, 6);
	assert_int_equal(framing_of("zlib", &packed), 6);
	assert_int_equal(packed_bytes("zlib", "6", empty, 1, &packed), 9);
	buffer_release(&packed);
}

/*
 * The .xz file format 1.2: an empty file is header 12, index 8, footer 12; a
 * byte takes a block header of 12, an LZMA2 chunk of 3 + 1 + 1 with its end,
 * padding to 8, a check of 8, and an index of 8 in all.
 */
static void xz_streams_are_as_their_format(void **state)
{
	static const uint8_t magic[] = {0xfd, '7', 'z', 'X', 'Z', 0x00};
	struct buffer packed;

	(void)state;
	buffer_init(&packed, 1000);
	assert_int_equal(packed_bytes("xz", "6", magic, 0, &packed), 32);
	assert_memory_equal(packed.bytes, magic, 6);
	assert_memory_equal(packed.bytes + 30, "YZ", 2);
	assert_int_equal(framing_of("xz", &packed), 32);
	assert_int_equal(packed_bytes("xz", "6", magic, 1, &packed), 60);
	assert_int_equal(framing_of("xz", &packed), 60 - 5);
	buffer_release(&packed);
}

/*
 * RFC 8878 3.1.1: magic 4, descriptor 1, content size 1 below 256 bytes, block
 * header 3; section 3.1.1.1.1.1: with a single segment no window byte.
 */
static void zstd_frames_are_as_rfc_8878(void **state)
{
	static const uint8_t empty[] = {0x28, 0xb5, 0x2f, 0xfd, 0x20,
					0x00, 0x01, 0x00, 0x00};
	static uint8_t large[70000];
	struct buffer packed;

	(void)state;
	buffer_init(&packed, 1 << 18);
	assert_int_equal(packed_bytes("zstd", "3", empty, 0, &packed), 9);
	assert_memory_equal(packed.bytes, empty, 9);
	assert_int_equal(packed_bytes("zstd", "3", empty, 1, &packed), 10);
	assert_int_equal(framing_of("zstd", &packed), 6);
	/* Content sizes: 1 byte to 255, 2 to 65,791, 4 beyond (3.1.1.1.4). */
	(void)packed_bytes("zstd", "3", large, 256, &packed);
	assert_int_equal(framing_of("zstd", &packed), 7);
	(void)packed_bytes("zstd", "3", large, 65791, &packed);
	assert_int_equal(framing_of("zstd", &packed), 7);
	(void)packed_bytes("zstd", "3", large, 65792, &packed);
	assert_int_equal(framing_of("zstd", &packed), 9);
	buffer_release(&packed);
}

/* CRC-32 and Adler-32 of RFC 1952 and 1950; CRC-64 of the .xz format. */
static void check_values_are_the_published_ones(void **state)
{
	const uint8_t *digits = (const uint8_t *)"123456789";

	(void)state;
	assert_true(crc32(0, digits, 9) == 0xcbf43926);
	assert_true(adler32(1, digits, 9) == 0x091e01de);
	/* From memory of the Adler-32 article's worked example. */
	assert_true(adler32(1, (const uint8_t *)"Wikipedia", 9) == 0x11e60398);
	assert_true(lzma_crc64(digits, 9, 0) == UINT64_C(0x995dc9bbdf1939fa));
}

/*
 * Incompressible input grows by headers only: 5 bytes a stored Deflate block
 * (RFC 1951 3.2.4), 3 a zstd block of at most 128 KiB (RFC 8878 3.1.1.2.3), 3
 * an uncompressed LZMA2 chunk of at most 64 KiB.
 */
static void random_bytes_grow_by_headers(void **state)
{
	static uint8_t bytes[1000000];
	struct buffer packed;

	(void)state;
	buffer_init(&packed, 1 << 21);
	bytes_random(bytes, sizeof(bytes), 6);
	assert_in_range(packed_bytes("zlib", "6", bytes, 1000000, &packed),
			1000000 + 6 + 16 * 5, 1000000 + 6 + 64 * 5 + 5);
	assert_in_range(packed_bytes("xz", "6", bytes, 1000000, &packed),
			1000000 + 60 - 5 + 16 * 3, 1000000 + 140);
	assert_int_equal(packed_bytes("zstd", "3", bytes, 1000000, &packed),
			 1000000 + 9 + 8 * 3);
	memset(bytes, 0, sizeof(bytes));
	assert_in_range(packed_bytes("zlib", "9", bytes, 1000000, &packed), 900,
			1100);
	assert_in_range(packed_bytes("xz", "6", bytes, 1000000, &packed), 150,
			400);
	assert_in_range(packed_bytes("zstd", "3", bytes, 1000000, &packed), 20,
			100);
	buffer_release(&packed);
}

/* Canonical codes from lengths, by the steps of RFC 1951, section 3.2.2. */
static void canonical(const unsigned *lengths, size_t count, unsigned *codes)
{
	unsigned of_length[16] = {0}, next[16] = {0}, code = 0;

	for (size_t i = 0; i < count; i++)
		of_length[lengths[i]]++;
	of_length[0] = 0;
	for (unsigned bits = 1; bits < 16; bits++)
		next[bits] = code = (code + of_length[bits - 1]) << 1;
	for (size_t i = 0; i < count; i++)
		codes[i] = lengths[i] ? next[lengths[i]]++ : 0;
}

/* RFC 1951 3.2.2: (3,3,3,3,3,2,4,4) -> 010 011 100 101 110 00 1110 1111. */
static void the_worked_code_of_rfc_1951(void **state)
{
	const unsigned lengths[] = {3, 3, 3, 3, 3, 2, 4, 4};
	const unsigned wanted[] = {2, 3, 4, 5, 6, 0, 14, 15};
	unsigned codes[8];

	(void)state;
	canonical(lengths, 8, codes);
	for (size_t i = 0; i < 8; i++)
		assert_int_equal(codes[i], wanted[i]);
}

/*
 * Mean length of a Huffman code in units of the weights' sum: every merger of
 * the two lightest puts one more bit before all that is below it.
 */
static unsigned huffman_bits(unsigned *weights, size_t count)
{
	unsigned bits = 0;

	for (; count > 1; count--) {
		for (size_t last = count - 1; last + 2 >= count; last--) {
			size_t least = last;
			unsigned moved;

			for (size_t i = 0; i < last; i++) {
				if (weights[i] < weights[least])
					least = i;
			}
			moved = weights[least];
			weights[least] = weights[last];
			weights[last] = moved;
			if (!last)
				break;
		}
		weights[count - 2] += weights[count - 1];
		bits += weights[count - 2];
	}
	return bits;
}

/*
 * Cover and Thomas, Elements of Information Theory, section 5.6: mean lengths
 * 2.3 and 2 bits, from memory of the book; an entropy never lies above.
 */
static void huffman_codes_of_the_textbook(void **state)
{
	unsigned five[] = {25, 25, 20, 15, 15}, four[] = {4, 4, 3, 1};
	double entropy_five = 0, entropy_four = 0;

	(void)state;
	for (size_t i = 0; i < 5; i++)
		entropy_five -= five[i] / 100.0 * log2(five[i] / 100.0);
	for (size_t i = 0; i < 4; i++)
		entropy_four -= four[i] / 12.0 * log2(four[i] / 12.0);
	assert_near(entropy_five, 2.285475, 5e-7);
	assert_near(entropy_four, 1.855389, 5e-7);
	assert_int_equal(huffman_bits(five, 5), 230);
	assert_int_equal(huffman_bits(four, 4), 24);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(zlib_streams_are_as_rfc_1950),
		cmocka_unit_test(xz_streams_are_as_their_format),
		cmocka_unit_test(zstd_frames_are_as_rfc_8878),
		cmocka_unit_test(check_values_are_the_published_ones),
		cmocka_unit_test(random_bytes_grow_by_headers),
		cmocka_unit_test(the_worked_code_of_rfc_1951),
		cmocka_unit_test(huffman_codes_of_the_textbook),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
