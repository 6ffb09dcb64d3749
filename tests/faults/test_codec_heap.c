/* Codecs one call at a time: does each allocation that fails come back so? */
#include "faults/inject.h"

#include "codec/codec.h"

#include "support/bytes.h"
#include "support/near.h"

#include <string.h>

#define LENGTH 9000
#define MOST 100

static const char *const levels[][2] = {
	{"store", "0"}, {"zlib", "1"},  {"zlib", "9"}, {"xz", "0"},
	{"xz", "3e"},   {"zstd", "-5"}, {"zstd", "3"}, {"zstd", "19"}};
#define LEVELS (sizeof(levels) / sizeof(*levels))

static uint8_t bytes[LENGTH];

struct fixture {
	const struct codec *codec;
	struct codec_setting setting;
	struct buffer packed;
};

static enum status encode_flushed(void *context)
{
	const struct fixture *fixture = context;
	const size_t cuts[] = {1, 4000, LENGTH};
	struct codec_memory memory = {0, 0};
	const struct codec_job job = {.setting = &fixture->setting,
				      .input = {bytes, LENGTH},
				      .cuts = cuts,
				      .cut_count = 3,
				      .memory = &memory};
	struct buffer packed;
	struct reason why = {""};
	enum status status;

	buffer_init(&packed, 1 << 20);
	status = fixture->codec->encode(&job, &packed, &why);
	if (status != STATUS_OK)
		assert_non_null(strstr(why.text, "out of memory"));
	assert_int_equal(memory.current_bytes, 0);
	buffer_release(&packed);
	return status;
}

static enum status decode_one(void *context)
{
	const struct fixture *fixture = context;
	struct codec_memory memory = {0, 0};
	const struct codec_job job = {
		.setting = &fixture->setting,
		.input = {fixture->packed.bytes, fixture->packed.length},
		.memory = &memory};
	struct buffer plain;
	struct reason why = {""};
	enum status status;

	buffer_init(&plain, LENGTH + 1);
	status = fixture->codec->decode(&job, &plain, &why);
	if (status != STATUS_OK)
		assert_non_null(strstr(why.text, "out of memory"));
	assert_int_equal(memory.current_bytes, 0);
	buffer_release(&plain);
	return status;
}

static enum status count_framing(void *context)
{
	const struct fixture *fixture = context;
	uint64_t framing = 7;
	enum status status = fixture->codec->framing(
		&fixture->setting,
		(struct slice){fixture->packed.bytes, fixture->packed.length},
		&framing);

	/* A result is unchanged on failure. */
	if (status != STATUS_OK)
		assert_int_equal(framing, 7);
	return status;
}

static double no_time(void)
{
	return 0;
}

static enum status time_pages(void *context)
{
	const struct fixture *fixture = context;
	const struct cell_clock clock = {no_time, no_time};
	struct cell_round round;
	struct reason why = {""};
	enum status status =
		cell_time(fixture->codec, &fixture->setting, 4096,
			  (struct slice){bytes, LENGTH}, &clock, &round, &why);

	if (status != STATUS_OK)
		assert_non_null(strstr(why.text, "out of memory"));
	return status;
}

/* A whole cell: dictionaries, pages, flushes and what is spread. */
static enum status measure_dictionary_cell(void *context)
{
	static uint8_t text[120000];
	const struct setting_words words = {"1", NULL, NULL, "1K"};
	const struct symbol_rules rules = {.kind = SYMBOL_BYTE};
	struct codec_setting setting;
	struct sequence sequence = {.n = 0};
	struct cuts cuts = {0};
	struct cell_facts facts = {0};
	struct reason why = {""};
	enum status status;

	(void)context;
	bytes_words(text, sizeof(text), 3);
	assert_int_equal(
		setting_parse(codec_find("zstd"), &words, &setting, &why),
		STATUS_OK);
	status = sequence_init(&sequence, (struct slice){text, sizeof(text)},
			       &rules, &why);
	if (status == STATUS_OK)
		status = cuts_init(&cuts, &sequence);
	if (status == STATUS_OK)
		status = cell_measure(codec_find("zstd"), &setting, 512,
				      &sequence, &cuts, &facts, &why);
	cell_facts_release(&facts);
	cuts_release(&cuts);
	sequence_release(&sequence);
	return status;
}

static void dictionary_cells(void **state)
{
	(void)state;
	inject_each(measure_dictionary_cell, NULL, MOST);
}

static void each_level(enum status (*action)(void *context))
{
	bytes_words(bytes, LENGTH, 11);
	for (size_t i = 0; i < LEVELS; i++) {
		struct fixture fixture = {.codec = codec_find(levels[i][0])};
		struct codec_job job = {.setting = &fixture.setting,
					.input = {bytes, LENGTH}};
		struct reason why;

		assert_int_equal(fixture.codec->parse(levels[i][1],
						      &fixture.setting, &why),
				 STATUS_OK);
		buffer_init(&fixture.packed, 1 << 20);
		assert_int_equal(
			fixture.codec->encode(&job, &fixture.packed, &why),
			STATUS_OK);
		inject_each(action, &fixture, MOST);
		buffer_release(&fixture.packed);
	}
}

static void flushed_encoding(void **state)
{
	(void)state;
	each_level(encode_flushed);
}

static void decoding(void **state)
{
	(void)state;
	each_level(decode_one);
}

static void counting_of_framing(void **state)
{
	(void)state;
	each_level(count_framing);
}

static void timing(void **state)
{
	(void)state;
	each_level(time_pages);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(flushed_encoding),
		cmocka_unit_test(decoding),
		cmocka_unit_test(counting_of_framing),
		cmocka_unit_test(timing),
		cmocka_unit_test(dictionary_cells),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
