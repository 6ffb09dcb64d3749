/* Is everything a set file says understood as it was meant? */
#include "corpus/set_file.h"

#include "support/near.h"
#include "support/symbols_of.h"

#include <string.h>

static struct set set_of(const char *text, bool outside)
{
	struct slice bytes = {(const uint8_t *)text, strlen(text)};
	struct reason why = {""};
	struct set set = {0};

	if (set_parse(bytes, "bay/all.set", outside, &set, &why) != STATUS_OK)
		fail_msg("%s", why.text);
	return set;
}

static const char whole[] =
	"; the sets of the estuary\r\n"
	"[set]\r\n"
	"name = marrow-bay\n"
	"gap-limit = 40%\n"
	"tolerance = 0.5 %\n"
	"speed-tolerance = 20%\n"
	"yardstick = zstd 3\n"
	"storage-unit = 4096\n"
	"\n"
	"[corpus gauge-frames]\n"
	"file = marrow/gauge-frames.bin   ; packed\n"
	"symbols = u16le\n"
	"records = 17 bytes\n"
	"sha256 = "
	"BA7816BF8F01CFEA414140DE5DAE2223B00361A396177A9CB410FF61F20015AD\n"
	"licence = CC0-1.0\n"
	"origin = ratefloor synth gauge-frames --symbols 4194304 --seed 7\n"
	"known-rate = 1.5145\n"
	"[corpus duty-log]\n"
	"\tfile: logs/../logs/duty.txt\n"
	"    records = lines\n"
	"feed = rolling\n"
	"# codecs\n"
	"[codec zstd]\n"
	"levels = 1 3\t9  19\n"
	"layouts = whole 4K 64K\n"
	"feed = rolling ; or fixed\n"
	"dictionary = 64K\n"
	"[codec house]\n"
	"compress = ./house-codec -c\n"
	"decompress = ./house-codec -d\n"
	"options = x=1;2\n"
	"containers = gzip raw\n"
	"[codec other]\n"
	"library = ./other.so";

static void sets_are_read(void **state)
{
	struct set set = set_of(whole, false);

	(void)state;
	assert_string_equal(set.name, "marrow-bay");
	assert_near(set.gap_limit, 0.40, 1e-12);
	assert_near(set.tolerance, 0.005, 1e-12);
	assert_near(set.speed_tolerance, 0.20, 1e-12);
	assert_string_equal(set.yardstick, "zstd 3");
	assert_int_equal(set.storage_unit, 4096);
	assert_string_equal(set.folder, "bay");
	assert_int_equal(set.corpus_count, 2);
	assert_int_equal(set.codec_count, 3);
	set_release(&set);
	set_release(&set);
}

static void corpora_are_read(void **state)
{
	struct set set = set_of(whole, false);
	const struct set_corpus *gauge = &set.corpora[0];
	const struct set_corpus *log = &set.corpora[1];

	(void)state;
	assert_string_equal(gauge->name, "gauge-frames");
	assert_int_equal(gauge->line, 10);
	assert_string_equal(gauge->file, "bay/marrow/gauge-frames.bin");
	assert_string_equal(gauge->within, "bay");
	assert_int_equal(gauge->rules.kind, SYMBOL_U16LE);
	assert_int_equal(gauge->rules.record_bytes, 17);
	assert_false(gauge->rules.record_lines);
	assert_string_equal(gauge->sha256, "ba7816bf8f01cfea414140de5dae2223"
					   "b00361a396177a9cb410ff61f20015ad");
	assert_string_equal(gauge->licence, "CC0-1.0");
	assert_string_equal(gauge->origin, "ratefloor synth gauge-frames "
					   "--symbols 4194304 --seed 7");
	assert_true(gauge->rate_known);
	assert_near(gauge->known_rate, 1.5145, 1e-12);
	assert_false(gauge->rolling);
	assert_string_equal(log->file, "bay/logs/../logs/duty.txt");
	assert_int_equal(log->rules.kind, SYMBOL_BYTE);
	assert_int_equal(log->rules.record_bytes, 0);
	assert_true(log->rules.record_lines);
	assert_string_equal(log->sha256, "");
	assert_string_equal(log->licence, "");
	assert_string_equal(log->origin, "");
	assert_false(log->rate_known);
	assert_true(log->rolling);
	set_release(&set);
}

static void codecs_are_read(void **state)
{
	struct set set = set_of(whole, false);
	const struct set_codec *zstd = &set.codecs[0], *house = &set.codecs[1];

	(void)state;
	assert_string_equal(zstd->name, "zstd");
	assert_int_equal(zstd->levels.count, 4);
	assert_string_equal(zstd->levels.texts[0], "1");
	assert_string_equal(zstd->levels.texts[3], "19");
	assert_int_equal(zstd->layouts.count, 3);
	assert_string_equal(zstd->layouts.texts[1], "4K");
	assert_true(zstd->rolling);
	assert_string_equal(zstd->dictionary, "64K");
	assert_string_equal(zstd->compress, "");
	assert_string_equal(house->compress, "./house-codec -c");
	assert_string_equal(house->decompress, "./house-codec -d");
	/* A ; begins a comment only after white space. */
	assert_string_equal(house->options, "x=1;2");
	assert_string_equal(house->containers, "gzip raw");
	assert_int_equal(house->levels.count, 0);
	assert_int_equal(house->layouts.count, 1);
	assert_string_equal(house->layouts.texts[0], "whole");
	assert_string_equal(set.codecs[2].library, "./other.so");
	set_release(&set);
}

static void defaults_are_the_stated_ones(void **state)
{
	struct set set = set_of("\xEF\xBB\xBF[set]\nname = a\n"
				"[corpus b]\nfile = b\n",
				false);

	(void)state;
	assert_near(set.gap_limit, -1, 0);
	assert_near(set.tolerance, 0.003, 1e-15);
	assert_near(set.speed_tolerance, 0.15, 1e-15);
	assert_string_equal(set.yardstick, "");
	assert_int_equal(set.storage_unit, 0);
	assert_int_equal(set.codec_count, 0);
	set_release(&set);
}

static void outside_lets_paths_leave(void **state)
{
	struct set set = set_of("[set]\nname = a\n"
				"[corpus b]\nfile = /srv/b\n"
				"[corpus c]\nfile = ../c\n",
				true);

	(void)state;
	assert_string_equal(set.corpora[0].file, "/srv/b");
	assert_string_equal(set.corpora[1].file, "bay/../c");
	assert_null(set.corpora[0].within);
	set_release(&set);
}

static void folders_come_from_the_path(void **state)
{
	static const char *const cases[][2] = {
		{"here.set", "./b"}, {"/top.set", "//b"}, {"/a/c.set", "/a/b"}};
	const struct slice text = LITERAL("[set]\nname=a\n[corpus b]\nfile=b");
	struct set set;

	(void)state;
	for (size_t i = 0; i < 3; i++) {
		assert_int_equal(
			set_parse(text, cases[i][0], false, &set, NULL),
			STATUS_OK);
		assert_string_equal(set.corpora[0].file, cases[i][1]);
		set_release(&set);
	}
}

/* The longest heading and line that inih takes whole: 49 and 198 bytes. */
static void longest_words_are_kept_whole(void **state)
{
	struct set set = set_of(
		"[set]\nname=a\n"
		"[corpus abcdefghijklmnopqrstuvwxyz-0123456789-abcd]\n"
		"file=b\norigin="
		"0123456789012345678901234567890123456789012345678901234567890"
		"1234567890123456789012345678901234567890123456789012345678901"
		"234567890123456789012345678901234567890123456789012345678901"
		"234567890\n",
		false);

	(void)state;
	assert_string_equal(set.corpora[0].name,
			    "abcdefghijklmnopqrstuvwxyz-0123456789-abcd");
	assert_int_equal(strlen(set.corpora[0].origin), 191);
	set_release(&set);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(sets_are_read),
		cmocka_unit_test(corpora_are_read),
		cmocka_unit_test(codecs_are_read),
		cmocka_unit_test(defaults_are_the_stated_ones),
		cmocka_unit_test(outside_lets_paths_leave),
		cmocka_unit_test(folders_come_from_the_path),
		cmocka_unit_test(longest_words_are_kept_whole),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
