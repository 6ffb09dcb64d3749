/* Is a program of somebody else's kept in bounds, and each failure named? */
#include "child/child.h"

#include "support/house_place.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdio.h>
#include <string.h>
#include <sys/stat.h>

#include <cmocka.h>

#define MIB ((uint64_t)1 << 20)

struct ran {
	enum status status;
	struct reason why;
	struct buffer out;
	struct child_usage usage;
};

/* Runs a program of the example codecs with one word. */
static void run(struct ran *ran, const char *program, const char *word,
		struct slice input, struct child_bounds bounds)
{
	char host[PLACE_BYTES], path[PLACE_BYTES], copy[64];
	char *words[] = {path, copy, NULL};
	const struct child_plan plan = {.host = house_place("codec-host", host),
					.words = words,
					.bounds = bounds};

	if (strchr(program, '/'))
		(void)house_place(program, path);
	else
		(void)snprintf(path, sizeof(path), "%s", program);
	(void)snprintf(copy, sizeof(copy), "%s", word);
	ran->why.text[0] = '\0';
	ran->usage = (struct child_usage){0, 0, 0};
	buffer_init(&ran->out, 4 * MIB);
	ran->status =
		child_run(&plan, input, &ran->out, &ran->usage, &ran->why);
}

#define BROKEN "tests/support/codecs/broken_command"
#define RUNS "tests/support/codecs/runs_command"
static const struct child_bounds wide = {64 * MIB, 60, 64 * MIB};
static const struct child_bounds brief = {64 * MIB, 1, 64 * MIB};
static const struct child_bounds narrow = {64 * MIB, 60, 1 * MIB};

static void fails(const char *word, struct child_bounds bounds,
		  const char *name)
{
	static const uint8_t bytes[5000] = "what goes in";
	struct ran ran;

	run(&ran, BROKEN, word, (struct slice){bytes, sizeof(bytes)}, bounds);
	assert_int_equal(ran.status, STATUS_CODEC);
	if (strncmp(ran.why.text, name, strlen(name)) != 0)
		fail_msg("%s: '%s' is not '%s'", word, ran.why.text, name);
	buffer_release(&ran.out);
}

static void test_copies_what_no_pipe_holds(void **state)
{
	uint8_t *bytes;
	struct ran ran;

	(void)state;
	assert_int_equal(memory_new(3 * MIB, 1, &bytes), STATUS_OK);
	for (size_t i = 0; i < 3 * MIB; i++)
		bytes[i] = (uint8_t)(i * 2654435761u >> 13);
	run(&ran, BROKEN, "copy", (struct slice){bytes, 3 * MIB}, wide);
	assert_int_equal(ran.status, STATUS_OK);
	assert_int_equal(ran.out.length, 3 * MIB);
	assert_memory_equal(ran.out.bytes, bytes, 3 * MIB);
	/* A process of C takes half a mebibyte at least, common practice. */
	assert_in_range(ran.usage.peak_bytes, MIB / 4, 64 * MIB);
	assert_true(ran.usage.wall_seconds > 0 && ran.usage.wall_seconds < 60);
	buffer_release(&ran.out);
	memory_free(bytes);
}

static void test_codec_of_the_example(void **state)
{
	static const uint8_t bytes[] = "aaaaaaab";
	struct ran ran;

	(void)state;
	run(&ran, RUNS, "-c", (struct slice){bytes, 8}, wide);
	assert_int_equal(ran.status, STATUS_OK);
	assert_int_equal(ran.out.length, 4);
	assert_memory_equal(ran.out.bytes, "\7a\1b", 4);
	buffer_release(&ran.out);
}

static void test_empty_input_and_output(void **state)
{
	struct ran ran;

	(void)state;
	run(&ran, RUNS, "-c", (struct slice){NULL, 0}, wide);
	assert_int_equal(ran.status, STATUS_OK);
	assert_int_equal(ran.out.length, 0);
	buffer_release(&ran.out);
}

static void test_input_nobody_reads(void **state)
{
	uint8_t *bytes;
	struct ran ran;

	(void)state;
	assert_int_equal(memory_new_zeroed(MIB, 1, &bytes), STATUS_OK);
	run(&ran, BROKEN, "nothing", (struct slice){bytes, MIB}, wide);
	assert_int_equal(ran.status, STATUS_OK);
	assert_int_equal(ran.out.length, 0);
	buffer_release(&ran.out);
	memory_free(bytes);
}

static void test_failures_have_names(void **state)
{
	(void)state;
	fails("crash", wide, "crashed: signal 11");
	fails("hang", brief, "timed out");
	fails("spin", brief, "timed out");
	fails("flood", wide, "wrote too much");
	fails("hog", wide, "out of memory");
	fails("leave", wide, "left a process running");
	fails("file", narrow, "wrote too much: a file");
	fails("talk", wide,
	      "failed: exit code 3; it said: [31mno such table "
	      "bye");
}

static void test_missing_program(void **state)
{
	struct ran ran;

	(void)state;
	run(&ran, "no-such-program-here", "", (struct slice){NULL, 0}, wide);
	assert_int_equal(ran.status, STATUS_CODEC);
	assert_non_null(strstr(ran.why.text, "missing program"));
	buffer_release(&ran.out);
}

static void test_program_of_the_path(void **state)
{
	struct ran ran;

	(void)state;
	run(&ran, "cat", "-", (struct slice){(const uint8_t *)"bay", 3}, wide);
	assert_int_equal(ran.status, STATUS_OK);
	assert_int_equal(ran.out.length, 3);
	buffer_release(&ran.out);
}

static void test_folder_is_private_and_goes(void **state)
{
	char folder[256];
	struct stat found;
	struct ran ran;

	(void)state;
	run(&ran, BROKEN, "litter", (struct slice){NULL, 0}, wide);
	assert_int_equal(ran.status, STATUS_OK);
	assert_in_range(ran.out.length, 5, 200);
	memcpy(folder, ran.out.bytes, ran.out.length);
	folder[ran.out.length] = '\0';
	assert_non_null(strstr(folder, "/ratefloor-"));
	assert_int_not_equal(stat(folder, &found), 0);
	buffer_release(&ran.out);
}

static void test_no_descriptor_is_inherited(void **state)
{
	FILE *held = fopen("/dev/null", "r");
	struct ran ran;

	(void)state;
	assert_non_null(held);
	run(&ran, BROKEN, "count-open", (struct slice){NULL, 0}, wide);
	assert_int_equal(ran.status, STATUS_OK);
	assert_int_equal(ran.out.length, 1);
	assert_int_equal(ran.out.bytes[0], '0');
	buffer_release(&ran.out);
	assert_int_equal(fclose(held), 0);
}

static void test_host_that_is_not_there(void **state)
{
	static char program[] = "cat";
	char *words[] = {program, NULL};
	const struct child_plan plan = {
		.host = "/nowhere/codec-host", .words = words, .bounds = wide};
	struct buffer out;
	struct reason why;

	(void)state;
	buffer_init(&out, 100);
	assert_int_equal(
		child_run(&plan, (struct slice){NULL, 0}, &out, NULL, &why),
		STATUS_IO);
	assert_non_null(strstr(why.text, "/nowhere/codec-host"));
	buffer_release(&out);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(test_copies_what_no_pipe_holds),
		cmocka_unit_test(test_codec_of_the_example),
		cmocka_unit_test(test_empty_input_and_output),
		cmocka_unit_test(test_input_nobody_reads),
		cmocka_unit_test(test_failures_have_names),
		cmocka_unit_test(test_missing_program),
		cmocka_unit_test(test_program_of_the_path),
		cmocka_unit_test(test_folder_is_private_and_goes),
		cmocka_unit_test(test_no_descriptor_is_inherited),
		cmocka_unit_test(test_host_that_is_not_there),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
