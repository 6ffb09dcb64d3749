/* Do containers, options and dictionaries do what their names say? */
#include "codec/codec.h"

#include "support/bytes.h"
#include "support/near.h"

#include <stdlib.h>
#include <string.h>

#define LENGTH 60000

static uint8_t bytes[LENGTH];

static struct codec_setting setting_of(const char *codec,
				       const struct setting_words *words)
{
	struct codec_setting setting;
	struct reason why = {""};

	if (setting_parse(codec_find(codec), words, &setting, &why) !=
	    STATUS_OK)
		fail_msg("%s", why.text);
	return setting;
}

/* Each is encoded, decoded and counted; cut streams flush as whole ones do. */
static size_t round_trip(const char *name, const struct codec_setting *setting,
			 size_t length, bool flushed)
{
	const struct codec *codec = codec_find(name);
	const size_t cuts[] = {length / 3, length};
	uint64_t pieces[2], framing = 0;
	struct codec_memory memory = {0, 0};
	struct codec_job job = {.setting = setting,
				.input = {bytes, length},
				.memory = &memory};
	struct buffer packed, plain;
	struct reason why = {""};
	size_t size;

	if (flushed) {
		job.cuts = cuts;
		job.cut_count = 2;
		job.piece_bytes = pieces;
	}
	buffer_init(&packed, 1 << 24);
	buffer_init(&plain, length + 1);
	assert_int_equal(codec->encode(&job, &packed, &why), STATUS_OK);
	if (flushed)
		assert_int_equal(pieces[0] + pieces[1], packed.length);
	job.input = (struct slice){packed.bytes, packed.length};
	if (codec->decode(&job, &plain, &why) != STATUS_OK)
		fail_msg("%s %s: %s", name, setting->text, why.text);
	assert_int_equal(memory.current_bytes, 0);
	assert_int_equal(plain.length, length);
	assert_true(!length || memcmp(plain.bytes, bytes, length) == 0);
	assert_int_equal(codec->framing(setting, job.input, &framing),
			 STATUS_OK);
	assert_true(framing <= packed.length);
	size = packed.length;
	buffer_release(&packed);
	buffer_release(&plain);
	return size;
}

static const struct {
	const char *codec, *level, *options[8];
} table[] = {
	{"zlib",
	 "6",
	 {"plain", "memory:1", "memory:9", "filtered", "huffman", "rle",
	  "fixed", "huffman,memory:9"}},
	{"xz",
	 "1",
	 {"plain", "x86", "arm64", "delta:1", "delta:256", "x86,delta:4"}},
	{"zstd", "3", {"plain", "window:10", "window:27", "threads:2"}},
};

static void every_combination_is_lossless(void **state)
{
	(void)state;
	bytes_words(bytes, LENGTH, 21);
	for (size_t i = 0; i < 3; i++) {
		const char *const *containers =
			codec_find(table[i].codec)->containers;

		for (size_t c = 0; containers[c]; c++) {
			for (size_t o = 0; o < 8 && table[i].options[o]; o++) {
				const struct setting_words words = {
					table[i].level, containers[c],
					table[i].options[o], NULL};
				struct codec_setting setting =
					setting_of(table[i].codec, &words);

				(void)round_trip(table[i].codec, &setting, 0,
						 false);
				(void)round_trip(table[i].codec, &setting, 1,
						 false);
				(void)round_trip(table[i].codec, &setting,
						 LENGTH, false);
				/* A branch filter cannot flush (liblzma). */
				if (!setting.branch_filter)
					(void)round_trip(table[i].codec,
							 &setting, LENGTH,
							 true);
			}
		}
	}
}

static void names_say_what_is_not_usual(void **state)
{
	static const struct {
		const char *codec;
		struct setting_words words;
		const char *text;
	} cases[] = {
		{"zlib", {"6", "zlib", "plain", NULL}, "6"},
		{"zlib", {"6", "gzip", NULL, NULL}, "6 gzip"},
		{"zlib", {"9", "raw", "memory:9", ""}, "9 raw memory:9"},
		{"xz", {"6e", "crc64", "delta:4", NULL}, "6e delta:4"},
		{"zstd", {"-5", NULL, NULL, "65536"}, "-5 dict:64K"},
		{"zstd", {"19l", "bare", "", "1000"}, "19l bare dict:1000"},
		{"store", {"0", NULL, NULL, NULL}, "0"},
	};

	(void)state;
	for (size_t i = 0; i < sizeof(cases) / sizeof(*cases); i++) {
		struct codec_setting setting =
			setting_of(cases[i].codec, &cases[i].words);

		assert_string_equal(setting.text, cases[i].text);
	}
}

static void what_there_is_not_is_refused_with_what_there_is(void **state)
{
	static const struct {
		const char *codec;
		struct setting_words words;
		const char *wanted;
	} cases[] = {
		{"zlib", {"6", "zip", NULL, NULL}, "zlib gzip raw"},
		{"store", {"0", "raw", NULL, NULL}, "one container only"},
		{"store", {"0", NULL, "fast", NULL}, "no options"},
		{"zlib", {"6", NULL, "memory:0", NULL}, "memory:1 to memory:9"},
		{"zlib", {"6", NULL, "memory:10", NULL}, "memory:9"},
		{"zlib", {"6", NULL, "rle,", NULL}, "zlib has"},
		{"zlib", {"6", NULL, "quick", NULL}, "huffman"},
		{"zlib", {"6", NULL, NULL, "4K"}, "no dictionaries"},
		{"xz", {"6", NULL, "delta:257", NULL}, "delta:256"},
		{"xz", {"6", NULL, "delta:", NULL}, "delta:1"},
		{"xz", {"6", NULL, "mips", NULL}, "x86, arm64"},
		{"zstd", {"3", NULL, "threads:0", NULL}, "threads:1"},
		{"zstd", {"3", NULL, "window:9", NULL}, "window:10"},
		{"zstd", {"3", NULL, NULL, "255"}, "256 bytes to 16M"},
		{"zstd", {"3", NULL, NULL, "17M"}, "256 bytes to 16M"},
		{"zstd",
		 {"19l", "checksum", "window:20,threads:2", "64K"},
		 "longer than the 31"},
	};

	(void)state;
	for (size_t i = 0; i < sizeof(cases) / sizeof(*cases); i++) {
		struct codec_setting setting = {.level = 77};
		struct reason why = {""};

		assert_int_equal(setting_parse(codec_find(cases[i].codec),
					       &cases[i].words, &setting, &why),
				 STATUS_BAD_USAGE);
		assert_int_equal(setting.level, 77);
		if (!strstr(why.text, cases[i].wanted))
			fail_msg("\"%s\" lacks \"%s\"", why.text,
				 cases[i].wanted);
	}
}

/* Differences of 7 everywhere: with delta one symbol, without 256 of them. */
static void options_reach_the_library(void **state)
{
	struct setting_words words = {.level = "1"};
	struct codec_setting plain, delta, rle, small, large;

	(void)state;
	for (size_t i = 0; i < LENGTH; i++)
		bytes[i] = (uint8_t)(i % 3 == 0 ? 7 * (i / 3)
						: bytes[i ? i - 1 : 0] * 5 + i);
	plain = setting_of("xz", &words);
	words.options = "delta:3";
	delta = setting_of("xz", &words);
	assert_true(round_trip("xz", &delta, LENGTH, false) !=
		    round_trip("xz", &plain, LENGTH, false));
	/* Counters in three columns: differences are constant. */
	for (size_t i = 0; i < LENGTH; i++)
		bytes[i] = (uint8_t)((i / 3) * (1 + i % 3) + (i / 768) * 31);
	assert_true(round_trip("xz", &delta, LENGTH, false) * 2 <
		    round_trip("xz", &plain, LENGTH, false));
	bytes_words(bytes, LENGTH, 5);
	words.options = "rle";
	rle = setting_of("zlib", &words);
	words.options = NULL;
	plain = setting_of("zlib", &words);
	/* Words repeat, bytes in a row do not. */
	assert_true(round_trip("zlib", &rle, LENGTH, false) >
		    2 * round_trip("zlib", &plain, LENGTH, false));
	/* Half random, then itself: found only by a window that reaches. */
	bytes_random(bytes, LENGTH / 2, 3);
	memcpy(bytes + LENGTH / 2, bytes, LENGTH / 2);
	words = (struct setting_words){"19", NULL, "window:10", NULL};
	small = setting_of("zstd", &words);
	words.options = "window:17";
	large = setting_of("zstd", &words);
	assert_true(round_trip("zstd", &small, LENGTH, false) > LENGTH);
	assert_true(round_trip("zstd", &large, LENGTH, false) <
		    LENGTH / 2 + 200);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(every_combination_is_lossless),
		cmocka_unit_test(names_say_what_is_not_usual),
		cmocka_unit_test(
			what_there_is_not_is_refused_with_what_there_is),
		cmocka_unit_test(options_reach_the_library),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
