/* Are commands of a set file split as they are written, and kept inside? */
#include "corpus/set_command.h"

#include "corpus/set_values.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#include <cmocka.h>

static void splits(const char *text, size_t count, const char *const *words)
{
	struct text_list got = {NULL, 0};
	struct reason why = {""};

	assert_int_equal(command_words(text, "/", true, &got, &why), STATUS_OK);
	assert_int_equal(got.count, count);
	for (size_t i = 0; i < count; i++)
		assert_string_equal(got.texts[i], words[i]);
	text_list_release(&got);
}

#define SPLITS(text, ...)                                                    \
	splits(text, sizeof((const char *[]){__VA_ARGS__}) / sizeof(char *), \
	       (const char *[]){__VA_ARGS__})

/* Quoting as POSIX has it for the shell, XCU 2.2, without its expansions. */
static void test_words(void **state)
{
	(void)state;
	SPLITS("bzip2 -9 -c", "bzip2", "-9", "-c");
	SPLITS("  a \t b  ", "a", "b");
	SPLITS("a 'b c' d", "a", "b c", "d");
	SPLITS("a \"b c\" d", "a", "b c", "d");
	SPLITS("a b\\ c", "a", "b c");
	SPLITS("a 'b\\c' \"b\\\"c\"", "a", "b\\c", "b\"c");
	SPLITS("a x'y z'\"w\"", "a", "xy zw");
	SPLITS("a '' \"\"", "a", "", "");
	SPLITS("a \"it's\"", "a", "it's");
	SPLITS("a b\\", "a", "b\\");
	/* What a shell would run is nothing but words. */
	SPLITS("a | b && $(c) `d` > e; *", "a", "|", "b", "&&", "$(c)", "`d`",
	       ">", "e;", "*");
	SPLITS("a -{level} {folder}x", "a", "-{level}", "/x");
	SPLITS("a '{folder}'", "a", "{folder}");
	SPLITS("./sub/a -c", "//sub/a", "-c");
}

static void refuses(const char *text, const char *folder, const char *words)
{
	struct text_list got = {NULL, 0};
	struct reason why = {""};

	assert_int_equal(command_words(text, folder, false, &got, &why),
			 STATUS_BAD_USAGE);
	assert_non_null(strstr(why.text, words));
	assert_null(got.texts);
}

static void test_refusals(void **state)
{
	(void)state;
	refuses("", ".", "no program");
	refuses("   ", ".", "no program");
	refuses("'' a", ".", "no program");
	refuses("a 'b", ".", "does not end");
	refuses("a \"b", ".", "does not end");
	refuses("/bin/cat", ".", "--outside");
	refuses("../cat", ".", "--outside");
	refuses("./a/../../cat", ".", "--outside");
}

static void test_links_that_leave(void **state)
{
	char folder[] = "/tmp/command-XXXXXX", link[64];

	(void)state;
	assert_non_null(mkdtemp(folder));
	strcpy(link, folder);
	strcat(link, "/cat");
	assert_int_equal(symlink("/bin/cat", link), 0);
	refuses("./cat", folder, "is a link that leaves");
	assert_int_equal(unlink(link), 0);
	assert_int_equal(rmdir(folder), 0);
}

static void test_levels_are_found(void **state)
{
	struct text_list words = {NULL, 0};

	(void)state;
	assert_int_equal(command_words("a -q{level}", "/", true, &words, NULL),
			 STATUS_OK);
	assert_true(command_has_level(&words));
	text_list_release(&words);
	assert_int_equal(command_words("a -q{lev}", "/", true, &words, NULL),
			 STATUS_OK);
	assert_false(command_has_level(&words));
	text_list_release(&words);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(test_words),
		cmocka_unit_test(test_refusals),
		cmocka_unit_test(test_links_that_leave),
		cmocka_unit_test(test_levels_are_found),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
