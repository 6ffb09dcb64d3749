/* Is the memory that codecs ask for what their libraries say it is? */
#include "codec/codec.h"

#include "support/bytes.h"
#include "support/near.h"

#include <lzma.h>
#include <stdio.h>
#include <string.h>
#define ZSTD_STATIC_LINKING_ONLY
#include <zstd.h>

/* Larger than any block, smaller than most windows. */
#define LENGTH 1500000

static uint8_t bytes[LENGTH];

static void peaks(const char *name, const char *level, const char *options,
		  uint64_t *encode, uint64_t *decode)
{
	const struct codec *codec = codec_find(name);
	const struct setting_words words = {level, NULL, options, NULL};
	struct codec_memory encoding = {0, 0}, decoding = {0, 0};
	struct codec_setting setting;
	struct codec_job job = {.setting = &setting,
				.input = {bytes, LENGTH},
				.memory = &encoding};
	struct buffer packed, plain;
	struct reason why;

	bytes_words(bytes, LENGTH, 8);
	assert_int_equal(setting_parse(codec, &words, &setting, &why),
			 STATUS_OK);
	buffer_init(&packed, 1 << 24);
	buffer_init(&plain, LENGTH + 1);
	assert_int_equal(codec->encode(&job, &packed, &why), STATUS_OK);
	job.input = (struct slice){packed.bytes, packed.length};
	job.memory = &decoding;
	assert_int_equal(codec->decode(&job, &plain, &why), STATUS_OK);
	*encode = encoding.peak_bytes;
	*decode = decoding.peak_bytes;
	buffer_release(&packed);
	buffer_release(&plain);
}

/*
 * zconf.h: deflate takes (1 << (windowBits + 2)) + (1 << (memLevel + 9)) bytes,
 * inflate 1 << windowBits and about 7 kilobytes, "plus a few kilobytes for
 * small objects" each.
 */
static void zlib_by_the_formula_of_its_header(void **state)
{
	static const unsigned levels[] = {1, 8, 9};
	static const char *const options[] = {"memory:1", "plain", "memory:9"};
	uint64_t encode, decode;

	(void)state;
	for (size_t i = 0; i < 3; i++) {
		uint64_t formula = (1U << 17) + (1U << (levels[i] + 9));

		peaks("zlib", "6", options[i], &encode, &decode);
		assert_in_range(encode, formula, formula + 10000);
		assert_in_range(decode, 1U << 15, (1U << 15) + 7168 + 4096);
	}
}

/*
 * lzma_easy_encoder_memusage and its decoder: bounds that the library keeps; it
 * rounds up by 32 KiB for small objects (LZMA_MEMUSAGE_BASE).
 */
static void xz_by_its_own_estimate(void **state)
{
	static const char *const levels[] = {"0", "1", "3", "6"};
	static const uint32_t presets[] = {0, 1, 3, 6};
	uint64_t encode, decode;

	(void)state;
	for (size_t i = 0; i < 4; i++) {
		uint64_t encoder = lzma_easy_encoder_memusage(presets[i]);
		uint64_t decoder = lzma_easy_decoder_memusage(presets[i]);

		peaks("xz", levels[i], NULL, &encode, &decode);
		printf("xz %s: %.3f and %.3f of the estimates\n", levels[i],
		       (double)encode / (double)encoder,
		       (double)decode / (double)decoder);
		assert_in_range(encode, encoder * 9 / 10, encoder);
		assert_in_range(decode, decoder * 9 / 10, decoder);
	}
}

/*
 * ZSTD_estimateCCtxSize is for one-shot use at any length; streaming adds a
 * window and a block (ZSTD_estimateCStreamSize_usingCParams, told the length).
 */
static void zstd_by_its_own_estimate(void **state)
{
	static const char *const levels[] = {"-5", "1", "3", "9", "19"};
	static const int numbers[] = {-5, 1, 3, 9, 19};
	uint64_t encode, decode;

	(void)state;
	for (size_t i = 0; i < 5; i++) {
		ZSTD_compressionParameters parameters =
			ZSTD_getCParams(numbers[i], LENGTH, 0);
		uint64_t stream =
			ZSTD_estimateCStreamSize_usingCParams(parameters);
		size_t window = (size_t)1 << parameters.windowLog;

		peaks("zstd", levels[i], NULL, &encode, &decode);
		printf("zstd %s: %.3f of the estimate, decoder %.3f\n",
		       levels[i], (double)encode / (double)stream,
		       (double)decode /
			       (double)ZSTD_estimateDStreamSize(window));
		assert_in_range(encode, stream * 8 / 10, stream);
		assert_in_range(decode, ZSTD_estimateDCtxSize(),
				ZSTD_estimateDStreamSize(window));
	}
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(zlib_by_the_formula_of_its_header),
		cmocka_unit_test(xz_by_its_own_estimate),
		cmocka_unit_test(zstd_by_its_own_estimate),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
