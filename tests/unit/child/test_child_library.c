/* Does a shared object answer, and is each of its failures named? */
#include "child/child.h"

#include "support/house_place.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdio.h>
#include <string.h>

#include <cmocka.h>

#define MIB ((uint64_t)1 << 20)
#define RUNS "tests/support/codecs/runs_library.so"
#define BROKEN "tests/support/codecs/broken_library.so"

struct opened {
	char host[PLACE_BYTES], path[PLACE_BYTES];
	char *words[2];
	struct child_plan plan;
	struct child *child;
	struct buffer out;
	struct child_usage usage;
	struct reason why;
};

static void open_object(struct opened *opened, const char *name,
			unsigned seconds)
{
	*opened = (struct opened){.plan = {.library = true}};
	opened->plan.host = house_place("codec-host", opened->host);
	opened->plan.bounds =
		(struct child_bounds){64 * MIB, seconds, 64 * MIB};
	(void)house_place(name, opened->path);
	opened->words[0] = opened->path;
	opened->plan.words = opened->words;
	buffer_init(&opened->out, 4 * MIB);
	assert_int_equal(
		child_open(&opened->plan, &opened->child, &opened->why),
		STATUS_OK);
}

static void close_object(struct opened *opened)
{
	child_close(opened->child);
	buffer_release(&opened->out);
}

static enum status ask(struct opened *opened, enum host_action action,
		       const char *level, struct slice input, uint64_t room)
{
	struct host_request request = {.action = (int32_t)action,
				       .length = input.length,
				       .room = room};

	(void)snprintf(request.level, sizeof(request.level), "%s", level);
	opened->out.length = 0;
	opened->why.text[0] = '\0';
	return child_ask(opened->child, &request, input, &opened->out,
			 &opened->usage, &opened->why);
}

static void test_many_requests_one_process(void **state)
{
	static const uint8_t bytes[] = "aaaaaaab";
	struct opened opened;

	(void)state;
	open_object(&opened, RUNS, 60);
	for (size_t i = 0; i < 200; i++) {
		assert_int_equal(ask(&opened, HOST_COMPRESS, "5",
				     (struct slice){bytes, 8}, 100),
				 STATUS_OK);
		assert_int_equal(opened.out.length, 6);
		assert_memory_equal(opened.out.bytes, "\5a\2a\1b", 6);
	}
	assert_int_equal(ask(&opened, HOST_DECOMPRESS, "",
			     (struct slice){(const uint8_t *)"\3x\1y", 4}, 5),
			 STATUS_OK);
	assert_int_equal(opened.out.length, 4);
	assert_memory_equal(opened.out.bytes, "xxxy", 4);
	assert_int_equal(
		ask(&opened, HOST_COMPRESS, "", (struct slice){bytes, 0}, 0),
		STATUS_OK);
	assert_int_equal(opened.out.length, 0);
	assert_in_range(opened.usage.peak_bytes, MIB / 4, 64 * MIB);
	close_object(&opened);
}

static void test_large_requests(void **state)
{
	uint8_t *bytes;
	struct opened opened;

	(void)state;
	assert_int_equal(memory_new_zeroed(3 * MIB, 1, &bytes), STATUS_OK);
	bytes[MIB] = 1;
	open_object(&opened, BROKEN, 60);
	assert_int_equal(ask(&opened, HOST_COMPRESS, "",
			     (struct slice){bytes, 3 * MIB}, 3 * MIB),
			 STATUS_OK);
	assert_int_equal(opened.out.length, 3 * MIB);
	assert_memory_equal(opened.out.bytes, bytes, 3 * MIB);
	close_object(&opened);
	memory_free(bytes);
}

static void fails(const char *object, const char *level, const char *name)
{
	static const uint8_t bytes[5000] = "what goes in";
	struct opened opened;

	/* Only what hangs is to meet its time, however busy the machine. */
	open_object(&opened, object, strcmp(level, "hang") == 0 ? 1 : 60);
	assert_int_equal(ask(&opened, HOST_COMPRESS, level,
			     (struct slice){bytes, sizeof(bytes)}, 8192),
			 STATUS_CODEC);
	if (strncmp(opened.why.text, name, strlen(name)) != 0)
		fail_msg("%s: '%s' is not '%s'", level, opened.why.text, name);
	close_object(&opened);
}

static void test_failures_have_names(void **state)
{
	(void)state;
	fails(BROKEN, "crash", "crashed: signal 11");
	fails(BROKEN, "flood", "crashed: signal 11");
	fails(BROKEN, "hang", "timed out");
	fails(BROKEN, "more", "wrote too much");
	fails(BROKEN, "hog", "out of memory");
	fails(BROKEN, "error", "failed: error 42");
	fails(BROKEN, "exit", "failed: exit code 5");
	fails(RUNS, "300", "failed: a level is a run's length, 1 to 255");
	fails("tests/support/codecs/no.so", "", "not loaded");
}

static void test_prints_stay_out_of_the_stream(void **state)
{
	struct opened opened;

	(void)state;
	open_object(&opened, BROKEN, 60);
	assert_int_equal(ask(&opened, HOST_COMPRESS, "print",
			     (struct slice){(const uint8_t *)"bay", 3}, 100),
			 STATUS_OK);
	assert_int_equal(opened.out.length, 3);
	assert_memory_equal(opened.out.bytes, "bay", 3);
	close_object(&opened);
}

static void test_what_is_left_running(void **state)
{
	struct opened opened;

	(void)state;
	open_object(&opened, BROKEN, 60);
	assert_int_equal(ask(&opened, HOST_COMPRESS, "leave",
			     (struct slice){(const uint8_t *)"bay", 3}, 100),
			 STATUS_OK);
	assert_int_equal(child_end(opened.child, &opened.why), STATUS_CODEC);
	assert_non_null(strstr(opened.why.text, "left a process running"));
	close_object(&opened);
	open_object(&opened, BROKEN, 60);
	assert_int_equal(ask(&opened, HOST_COMPRESS, "",
			     (struct slice){(const uint8_t *)"bay", 3}, 100),
			 STATUS_OK);
	assert_int_equal(child_end(opened.child, &opened.why), STATUS_OK);
	close_object(&opened);
}

static void test_no_room(void **state)
{
	struct opened opened;

	(void)state;
	open_object(&opened, RUNS, 60);
	assert_int_equal(ask(&opened, HOST_COMPRESS, "1",
			     (struct slice){(const uint8_t *)"bay", 3}, 5),
			 STATUS_CODEC);
	assert_non_null(strstr(opened.why.text, "wrote too much"));
	/* The codec lives on: it said so itself. */
	assert_int_equal(ask(&opened, HOST_COMPRESS, "1",
			     (struct slice){(const uint8_t *)"bay", 3}, 6),
			 STATUS_OK);
	close_object(&opened);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(test_many_requests_one_process),
		cmocka_unit_test(test_large_requests),
		cmocka_unit_test(test_failures_have_names),
		cmocka_unit_test(test_prints_stay_out_of_the_stream),
		cmocka_unit_test(test_what_is_left_running),
		cmocka_unit_test(test_no_room),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
