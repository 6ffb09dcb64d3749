/* Does every row give back what it was given, and count what it sends? */
#include "codec/codec.h"

#include "support/bytes.h"
#include "support/near.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define LENGTH 50000

static const char *const levels[][8] = {
	{"store", "0"},
	{"zlib", "1", "6", "9"},
	{"xz", "0", "6", "9e", "3e"},
	{"zstd", "1", "3", "19", "-5", "3l", "22"},
};

/* Calls check for every row and level above. */
static void each_level(void (*check)(const struct codec *codec,
				     const struct codec_setting *setting))
{
	for (size_t i = 0; i < sizeof(levels) / sizeof(*levels); i++) {
		const struct codec *codec = codec_find(levels[i][0]);

		assert_non_null(codec);
		for (size_t j = 1; j < 8 && levels[i][j]; j++) {
			struct codec_setting setting = {.text = ""};
			struct reason why;

			assert_int_equal(
				codec->parse(levels[i][j], &setting, &why),
				STATUS_OK);
			assert_string_equal(setting.text, levels[i][j]);
			check(codec, &setting);
		}
	}
}

static void round_trip(const struct codec *codec,
		       const struct codec_setting *setting,
		       const uint8_t *bytes, size_t length)
{
	struct codec_memory memory = {0, 0};
	struct codec_job job = {.setting = setting,
				.input = {bytes, length},
				.memory = &memory};
	struct buffer packed, plain;
	struct reason why = {""};
	uint64_t framing;

	buffer_init(&packed, 1 << 24);
	buffer_init(&plain, length + 1);
	assert_int_equal(codec->encode(&job, &packed, &why), STATUS_OK);
	assert_int_equal(memory.current_bytes, 0);
	job.input = (struct slice){packed.bytes, packed.length};
	assert_int_equal(codec->decode(&job, &plain, &why), STATUS_OK);
	assert_int_equal(memory.current_bytes, 0);
	assert_int_equal(plain.length, length);
	assert_true(length == 0 || memcmp(plain.bytes, bytes, length) == 0);
	assert_int_equal(codec->framing(setting, job.input, &framing),
			 STATUS_OK);
	assert_true(framing <= packed.length);
	buffer_release(&packed);
	buffer_release(&plain);
}

static void trip_all(const struct codec *codec,
		     const struct codec_setting *setting)
{
	static uint8_t bytes[LENGTH];

	round_trip(codec, setting, bytes, 0);
	round_trip(codec, setting, bytes, 1);
	round_trip(codec, setting, bytes, LENGTH);
	bytes_random(bytes, LENGTH, 1);
	round_trip(codec, setting, bytes, LENGTH);
	bytes_words(bytes, LENGTH, 1);
	round_trip(codec, setting, bytes, LENGTH);
}

static void every_level_is_lossless(void **state)
{
	(void)state;
	each_level(trip_all);
}

/* After a flush, all before the cut can be decoded from what was sent. */
static void flush_one(const struct codec *codec,
		      const struct codec_setting *setting)
{
	static uint8_t bytes[LENGTH];
	const size_t cuts[] = {1, 4096, 20000, 20001, LENGTH};
	uint64_t pieces[5], sum = 0;
	struct codec_job job = {.setting = setting,
				.input = {bytes, LENGTH},
				.cuts = cuts,
				.cut_count = 5,
				.piece_bytes = pieces};
	struct buffer packed, plain;
	struct reason why = {""};

	bytes_words(bytes, LENGTH, 2);
	buffer_init(&packed, 1 << 24);
	buffer_init(&plain, LENGTH + 1);
	assert_int_equal(codec->encode(&job, &packed, &why), STATUS_OK);
	for (size_t i = 0; i < 5; i++) {
		struct codec_job prefix = {.setting = setting};

		sum += pieces[i];
		prefix.input = (struct slice){packed.bytes, (size_t)sum};
		plain.length = 0;
		/* A cut stream is refused at its end, after its bytes. */
		assert_int_equal(codec->decode(&prefix, &plain, &why),
				 i == 4 || strcmp(codec->name, "store") == 0
					 ? STATUS_OK
					 : STATUS_CODEC);
		assert_int_equal(plain.length, cuts[i]);
		assert_memory_equal(plain.bytes, bytes, cuts[i]);
	}
	assert_int_equal(sum, packed.length);
	buffer_release(&packed);
	buffer_release(&plain);
}

static void a_flush_makes_all_before_it_decodable(void **state)
{
	(void)state;
	each_level(flush_one);
}

/* Damage gives an error or some bytes, never more than the limit. */
static void damage_one(const struct codec *codec,
		       const struct codec_setting *setting)
{
	static uint8_t bytes[5000];
	struct codec_job job = {.setting = setting, .input = {bytes, 5000}};
	struct buffer packed, plain;
	struct reason why = {""};

	bytes_words(bytes, 5000, 3);
	buffer_init(&packed, 1 << 20);
	buffer_init(&plain, 5001);
	assert_int_equal(codec->encode(&job, &packed, &why), STATUS_OK);
	for (size_t i = 0; i < packed.length; i += 1 + packed.length / 97) {
		struct codec_job hostile = {
			.setting = setting,
			.input = {packed.bytes, packed.length}};
		enum status status;

		packed.bytes[i] ^= 0x55;
		plain.length = 0;
		status = codec->decode(&hostile, &plain, &why);
		assert_true(status == STATUS_OK || status == STATUS_CODEC ||
			    status == STATUS_NO_MEMORY);
		assert_true(plain.length <= 5001);
		(void)codec->framing(setting, hostile.input, &(uint64_t){0});
		hostile.input.length = i;
		(void)codec->framing(setting, hostile.input, &(uint64_t){0});
		packed.bytes[i] ^= 0x55;
	}
	assert_int_equal(buffer_add(&packed, "x", 1), STATUS_OK);
	job.input = (struct slice){packed.bytes, packed.length};
	plain.length = 0;
	if (strcmp(codec->name, "store") != 0)
		assert_int_equal(codec->decode(&job, &plain, &why),
				 STATUS_CODEC);
	buffer_release(&packed);
	buffer_release(&plain);
}

static void damage_never_overruns(void **state)
{
	(void)state;
	each_level(damage_one);
}

static void levels_out_of_range_are_refused(void **state)
{
	static const char *const wrong[][2] = {
		{"store", "1"}, {"zlib", "0"},         {"zlib", "10"},
		{"zlib", "9e"}, {"zlib", ""},          {"xz", "10"},
		{"xz", "e"},    {"xz", "9x"},          {"xz", ""},
		{"zstd", "23"}, {"zstd", "l"},         {"zstd", "0"},
		{"zstd", "3x"}, {"zstd", "-999999999"}};

	(void)state;
	for (size_t i = 0; i < sizeof(wrong) / sizeof(*wrong); i++) {
		struct codec_setting setting;
		struct reason why = {""};

		assert_int_equal(codec_find(wrong[i][0])
					 ->parse(wrong[i][1], &setting, &why),
				 STATUS_BAD_USAGE);
		assert_non_null(strstr(why.text, wrong[i][1]));
	}
	assert_null(codec_find("zip"));
}

static void layouts_are_read(void **state)
{
	static const struct {
		const char *text;
		size_t bytes;
	} good[] = {{"whole", 0},      {"4K", 4096},        {"64K", 65536},
		    {"1M", 1048576},   {"1000", 1000},      {"128", 128},
		    {"16M", 16777216}, {"16384K", 16777216}};
	static const char *const bad[] = {"",    "4k",       "127", "-4K",
					  "K",   "4KB",      "1G",  "9999999M",
					  "17M", "16777217", "0"};
	size_t bytes = 7;
	struct reason why;

	(void)state;
	for (size_t i = 0; i < sizeof(good) / sizeof(*good); i++) {
		assert_int_equal(layout_parse(good[i].text, &bytes, &why),
				 STATUS_OK);
		assert_int_equal(bytes, good[i].bytes);
	}
	for (size_t i = 0; i < sizeof(bad) / sizeof(*bad); i++)
		assert_int_equal(layout_parse(bad[i], &bytes, &why),
				 STATUS_BAD_USAGE);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(every_level_is_lossless),
		cmocka_unit_test(a_flush_makes_all_before_it_decodable),
		cmocka_unit_test(damage_never_overruns),
		cmocka_unit_test(levels_out_of_range_are_refused),
		cmocka_unit_test(layouts_are_read),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
