/* Is a user's codec a row like the others, and are its bounds kept? */
#include "codec/house.h"

#include "support/house_place.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include <cmocka.h>

#define MIB ((size_t)1 << 20)

struct fixture {
	char host[PLACE_BYTES], program[PLACE_BYTES];
	uint8_t *bytes;
	struct sequence sequence;
	struct cuts cuts;
	struct house *house;
	struct reason why;
};

static int set_up(void **state)
{
	static struct fixture made;
	const struct symbol_rules rules = {.kind = SYMBOL_BYTE};

	if (memory_new(MIB, 1, &made.bytes) != STATUS_OK)
		return -1;
	for (size_t i = 0; i < MIB; i++)
		made.bytes[i] =
			(uint8_t)((size_t) "marrow bay"[i * i % 10] + i / 9999);
	*state = &made;
	return sequence_init(&made.sequence, (struct slice){made.bytes, MIB},
			     &rules, &made.why) != STATUS_OK ||
	       cuts_init(&made.cuts, &made.sequence) != STATUS_OK;
}

static int tear_down(void **state)
{
	struct fixture *fixture = *state;

	cuts_release(&fixture->cuts);
	sequence_release(&fixture->sequence);
	memory_free(fixture->bytes);
	return 0;
}

static const struct codec *codec_of(struct fixture *fixture, char *const *pack,
				    size_t pack_count, char *const *unpack,
				    size_t unpack_count)
{
	const struct house_words words = {
		.name = "house",
		.compress = pack,
		.compress_count = pack_count,
		.decompress = unpack,
		.decompress_count = unpack_count,
		.host = house_place("codec-host", fixture->host),
	};

	assert_int_equal(house_new(&words, &fixture->house, &fixture->why),
			 STATUS_OK);
	return house_codec(fixture->house);
}

static enum status measure(struct fixture *fixture, const struct codec *codec,
			   const char *level, size_t page_bytes,
			   struct cell_facts *facts)
{
	struct codec_setting setting;
	const struct setting_words words = {.level = level};

	fixture->why.text[0] = '\0';
	assert_int_equal(setting_parse(codec, &words, &setting, &fixture->why),
			 STATUS_OK);
	return cell_measure(codec, &setting, page_bytes, &fixture->sequence,
			    &fixture->cuts, facts, &fixture->why);
}

/* Bytes that a program of the shell gives on its standard output. */
static size_t shell_bytes(const struct fixture *fixture, const char *command)
{
	char name[] = "/tmp/house-XXXXXX", line[256];
	int file = mkstemp(name);
	unsigned long count = 0;
	FILE *output;

	assert_true(file >= 0);
	assert_int_equal(write(file, fixture->bytes, MIB), MIB);
	(void)snprintf(line, sizeof(line), "%s <%s | wc -c", command, name);
	output = popen(line, "r");
	assert_non_null(output);
	assert_int_equal(fscanf(output, "%lu", &count), 1);
	assert_int_equal(pclose(output), 0);
	assert_int_equal(unlink(name), 0);
	assert_int_equal(close(file), 0);
	return count;
}

/* The reference is Debian's own program, run by a shell on the same bytes. */
static void test_programs_of_the_machine(void **state)
{
	static const struct {
		const char *compress, *level, *decompress, *shell;
	} programs[] = {
		{"bzip2", "9", "-d", "bzip2 -9"},
		{"lz4", "1", "-d", "lz4 -q -1"},
		{"brotli", "5", "-d", "brotli -5"},
	};
	struct fixture *fixture = *state;
	unsigned found = 0;

	for (size_t i = 0; i < sizeof(programs) / sizeof(*programs); i++) {
		char program[8], level[] = "-{level}", back[] = "-d",
				 c[] = "-c";
		char *pack[] = {program, level, c},
		     *unpack[] = {program, back, c};
		char path[CHILD_PATH_BYTES];
		struct cell_facts facts;

		(void)snprintf(program, sizeof(program), "%s",
			       programs[i].compress);
		if (!child_find(program, path)) {
			print_message("%s is not installed\n", program);
			continue;
		}
		found++;
		assert_int_equal(measure(fixture,
					 codec_of(fixture, pack, 3, unpack, 3),
					 programs[i].level, 0, &facts),
				 STATUS_OK);
		assert_true(facts.lossless);
		assert_int_equal(facts.bytes,
				 shell_bytes(fixture, programs[i].shell));
		assert_false(facts.framing_known);
		assert_int_equal(facts.framing_bytes, 0);
		assert_int_equal(facts.flushed.blocks, 0);
		assert_true(facts.encode_memory_bytes == CELL_MEMORY_UNKNOWN);
		cell_facts_release(&facts);
		house_free(fixture->house);
	}
	if (!found)
		skip();
}

static void test_pages_are_processes_and_few(void **state)
{
	struct fixture *fixture = *state;
	char program[] = "cat", *words[] = {program};
	const struct codec *codec = codec_of(fixture, words, 1, words, 1);
	struct cell_facts facts;

	assert_int_equal(measure(fixture, codec, "default", 1023, &facts),
			 STATUS_TOO_SHORT);
	assert_non_null(strstr(fixture->why.text, "1026 pages"));
	assert_int_equal(measure(fixture, codec, "default", 65536, &facts),
			 STATUS_OK);
	assert_int_equal(facts.pages, 16);
	assert_int_equal(facts.bytes, MIB);
	cell_facts_release(&facts);
	house_free(fixture->house);
}

static double no_clock(void)
{
	return 0;
}

/* What a process took is its own to say, not the clock of this one. */
static void test_times(void **state)
{
	struct fixture *fixture = *state;
	char program[] = "cat", *words[] = {program};
	const struct codec *codec = codec_of(fixture, words, 1, words, 1);
	const struct cell_clock clock = {no_clock, no_clock};
	struct codec_setting setting = {.text = "default"};
	struct cell_round round;

	assert_int_equal(cell_time(codec, &setting, 0,
				   (struct slice){fixture->bytes, MIB}, &clock,
				   &round, &fixture->why),
			 STATUS_OK);
	assert_true(round.encode_wall > 0 && round.encode_wall < 60);
	assert_true(round.decode_cpu >= 0 && round.decode_cpu < 60);
	assert_in_range(round.encode_peak_bytes, MIB / 4, 64 * MIB);
	house_free(fixture->house);
}

static void test_names_that_are_taken(void **state)
{
	struct fixture *fixture = *state;
	struct house_words words = {.name = "xz"};
	struct house *house;

	assert_int_equal(house_new(&words, &house, &fixture->why),
			 STATUS_BAD_USAGE);
	assert_non_null(strstr(fixture->why.text, "built in"));
	words.name = "a-name-of-more-than-thirty-one-letters";
	assert_int_equal(house_new(&words, &house, &fixture->why),
			 STATUS_BAD_USAGE);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(test_programs_of_the_machine),
		cmocka_unit_test(test_pages_are_processes_and_few),
		cmocka_unit_test(test_times),
		cmocka_unit_test(test_names_that_are_taken),
	};

	return cmocka_run_group_tests(tests, set_up, tear_down);
}
