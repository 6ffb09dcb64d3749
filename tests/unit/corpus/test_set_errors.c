/* Does every mistake in a set file get a message that says where and what? */
#include "corpus/set_file.h"

#include "support/near.h"

#include <string.h>

#define COUNT_OF(array) (sizeof(array) / sizeof((array)[0]))

#define SET "[set]\nname = bay\n"
#define CORPUS SET "[corpus log]\nfile = log\n"
#define CODEC CORPUS "[codec zlib]\nlevels = 1\n"

#define TEN "0123456789"
#define FIFTY TEN TEN TEN TEN TEN

struct mistake {
	const char *text;
	const char *wanted; /* the head of the message */
	const char *remedy; /* also in it */
};

static void check(const struct mistake *mistakes, size_t count)
{
	for (size_t i = 0; i < count; i++) {
		const char *text = mistakes[i].text;
		struct slice bytes = {(const uint8_t *)text, strlen(text)};
		struct set set = {.corpus_count = 77};
		struct reason why = {""};

		assert_int_equal(set_parse(bytes, "b.set", false, &set, &why),
				 STATUS_BAD_USAGE);
		if (strncmp(why.text, mistakes[i].wanted,
			    strlen(mistakes[i].wanted)) != 0 ||
		    !strstr(why.text, mistakes[i].remedy))
			fail_msg("got \"%s\" for \"%s\"", why.text,
				 mistakes[i].wanted);
		assert_int_equal(set.corpus_count, 77);
		assert_int_equal(set_parse(bytes, "b.set", false, &set, NULL),
				 STATUS_BAD_USAGE);
	}
}

static void of_sections(void **state)
{
	static const struct mistake mistakes[] = {
		{"name = bay\n", "b.set:1: a key before", "[set]"},
		{"# no\n[sett]\nname = a\n", "b.set:2: [sett]: unknown section",
		 "did you mean set?"},
		{SET "[frame x]\na = b\n", "b.set:3: [frame x]: unknown",
		 "[corpus NAME]"},
		{SET "[corpus]\nfile = a\n", "b.set:3: [corpus]: a name",
		 "[corpus duty-log]"},
		{"[set x]\nname = a\n", "b.set:1: [set x]: takes no name",
		 "name"},
		{SET "[corpus a b]\nfile = a\n",
		 "b.set:3: [corpus a b]: ", "letters, digits"},
		{CORPUS "[corpus log]\nfile = b\n",
		 "b.set:5: [corpus log]: there is one", "line 3"},
		{CODEC "[codec zlib]\nlevels = 2\n",
		 "b.set:7: [codec zlib]: there is one", "line 5"},
		{CORPUS SET, "b.set:5: [set]: there is one", "line 1"},
		{SET "[corpus log]\n\n[codec zlib]\nlevels = 1\n",
		 "b.set:3: a section without", "key"},
		{CORPUS "[codec zlib]\n; levels = 1\n",
		 "b.set:5: a section without", "key"},
		{SET "[corpus log\nfile = log\n", "b.set:3: a heading", "]"},
		{SET "[corpus " FIFTY "]\nfile = log\n", "b.set:3: a heading",
		 "49"},
		{SET, "b.set:2: no corpus", "[corpus NAME]"},
		{"[corpus log]\nfile = log\n",
		 "b.set:1: [set] name: ", "missing"},
		{"[set]\ngap-limit = 4%\n", "b.set:1: [set] name: ", "missing"},
	};

	(void)state;
	check(mistakes, COUNT_OF(mistakes));
}

static void of_lines(void **state)
{
	static const struct mistake mistakes[] = {
		{SET "gap-limit\n", "b.set:3: neither", "key = value"},
		{SET "yardstick ; = zlib\n", "b.set:3: neither", "key = value"},
		{CORPUS FIFTY " = a\n", "b.set:5: a key longer", "49"},
		{CORPUS "origin = " FIFTY FIFTY FIFTY TEN TEN TEN TEN "\n",
		 "b.set:5: the line has 199 bytes", "198"},
		{CORPUS "[corpus a " FIFTY FIFTY FIFTY FIFTY "]\n",
		 "b.set:5: the line has 211 bytes", "198"},
		{CORPUS "licence = " FIFTY TEN "0123\n",
		 "b.set:5: [corpus log] licence: ", "63 bytes"},
	};
	static const char binary[] = "[set]\nname = a\0b\n";
	struct slice bytes = {(const uint8_t *)binary, sizeof(binary) - 1};
	struct reason why = {""};
	struct set set;

	(void)state;
	check(mistakes, COUNT_OF(mistakes));
	assert_int_equal(set_parse(bytes, "b.set", false, &set, &why),
			 STATUS_BAD_USAGE);
	assert_non_null(strstr(why.text, "b.set:2: a NUL byte"));
}

static void of_keys(void **state)
{
	static const struct mistake mistakes[] = {
		{SET "gap-limits = 4%\n", "b.set:3: [set] gap-limits: unknown",
		 "did you mean gap-limit?"},
		{SET "colour = red\n",
		 "b.set:3: [set] colour: unknown key; "
		 "there are: name gap-limit tolerance "
		 "speed-tolerance yardstick",
		 ""},
		{CORPUS "symbol = bit\n",
		 "b.set:5: [corpus log] symbol: ", "did you mean symbols?"},
		{CORPUS "levels = 1\n", "b.set:5: [corpus log] levels: unknown",
		 "file symbols records sha256 licence origin known-rate feed"},
		{CODEC "level = 2\n", "b.set:7: [codec zlib] level: unknown",
		 "did you mean levels?"},
		{CODEC "layouts = whole\n\nlayouts = 4K\n",
		 "b.set:9: [codec zlib] layouts: is in line 7", "already"},
		{CORPUS "origin =\n", "b.set:5: [corpus log] origin: has no",
		 "value"},
		{CORPUS "origin = ; none\n",
		 "b.set:5: [corpus log] origin: has no", "value"},
		{SET "[corpus log]\nsymbols = bit\n",
		 "b.set:3: [corpus log]: no key file", "file = PATH"},
		{CORPUS "[codec zlib]\nlayouts = 4K\n",
		 "b.set:5: [codec zlib]: no key levels", "levels = 1 6 9"},
		{CORPUS "[codec own]\ncompress = a\n",
		 "b.set:5: [codec own]: compress without decompress", ""},
		{CORPUS "[codec own]\ndecompress = a\n",
		 "b.set:5: [codec own]: decompress without compress", ""},
	};

	(void)state;
	check(mistakes, COUNT_OF(mistakes));
}

static void of_values(void **state)
{
	static const struct mistake mistakes[] = {
		{SET "gap-limit = 0.4\n", "b.set:3: [set] gap-limit: \"0.4\"",
		 "write 40%"},
		{SET "gap-limit = -4%\n", "b.set:3: [set] gap-limit: ", "40%"},
		{SET "gap-limit = 4%%\n", "b.set:3: [set] gap-limit: ", "40%"},
		{SET "gap-limit = 1.2.3%\n",
		 "b.set:3: [set] gap-limit: ", "40%"},
		{SET "tolerance = nan%\n", "b.set:3: [set] tolerance: ", "40%"},
		{SET "tolerance = 10001%\n",
		 "b.set:3: [set] tolerance: ", "10000%"},
		{SET "tolerance = %\n", "b.set:3: [set] tolerance: ", "40%"},
		{SET "storage-unit = 1024\n",
		 "b.set:3: [set] storage-unit: \"1024\"", "512 or 4096"},
		{CORPUS "records = 0 in all\n",
		 "b.set:5: [corpus log] records: ", "2000 in all"},
		{"[set]\nname = Marrow Bay\n",
		 "b.set:2: [set] name: ", "letters, digits"},
		{CORPUS "symbols = bytes\n",
		 "b.set:5: [corpus log] symbols: ", "byte bit u16le"},
		{CORPUS "records = 0 bytes\n",
		 "b.set:5: [corpus log] records: ", "17 bytes"},
		{CORPUS "records = 17\n",
		 "b.set:5: [corpus log] records: ", "17 bytes"},
		{CORPUS "records = 99999999999 bytes\n",
		 "b.set:5: [corpus log] records: ", "17 bytes"},
		{CORPUS "sha256 = \xE2\x80\xA6\n",
		 "b.set:5: [corpus log] sha256: ", "64 hex digits"},
		{CORPUS "sha256 = " FIFTY TEN "0123x\n",
		 "b.set:5: [corpus log] sha256: ", "64 hex digits"},
		{CORPUS "sha256 = " FIFTY TEN "01234\n",
		 "b.set:5: [corpus log] sha256: ", "64 hex digits"},
		{CORPUS "sha256 = " FIFTY TEN "012\n",
		 "b.set:5: [corpus log] sha256: ", "64 hex digits"},
		{CORPUS "feed = moving\n",
		 "b.set:5: [corpus log] feed: ", "rolling"},
		{CORPUS "known-rate = inf\n",
		 "b.set:5: [corpus log] known-rate: ", "1.5145"},
		{CORPUS "known-rate = 65\n",
		 "b.set:5: [corpus log] known-rate: ", "64"},
		{CORPUS "known-rate = 1,5\n",
		 "b.set:5: [corpus log] known-rate: ", "1.5145"},
		{CODEC "layouts = 4K 8K 4K\n",
		 "b.set:7: [codec zlib] layouts: \"4K\" is there twice", ""},
		{CORPUS "feed = rolling\nsha256 = " FIFTY TEN "0123\n",
		 "b.set:3: [corpus log]: feed = rolling", "leave sha256 out"},
	};

	(void)state;
	check(mistakes, COUNT_OF(mistakes));
}

static void of_paths(void **state)
{
	static const struct mistake mistakes[] = {
		{SET "[corpus a]\nfile = /etc/services\n",
		 "b.set:3: [corpus a]: \"/etc/services\" leaves", "--outside"},
		{SET "[corpus a]\nfile = ../a\n",
		 "b.set:3: [corpus a]: ", "leaves the folder"},
		{SET "[corpus a]\nfile = x/./..//../a\n", "b.set:3: [corpus a]",
		 "leaves the folder"},
		{SET "[corpus a]\nfile = ../b/a\n",
		 "b.set:3: [corpus a]: ", "leaves the folder"},
		{SET "[corpus a]\nfile = x/../..\n",
		 "b.set:3: [corpus a]: ", "leaves the folder"},
	};

	(void)state;
	check(mistakes, COUNT_OF(mistakes));
}

static void of_the_file_itself(void **state)
{
	struct reason why = {""};
	struct set set;

	(void)state;
	assert_int_equal(set_load("/nonexistent/a.set", false, &set, &why),
			 STATUS_NOT_FOUND);
	assert_non_null(strstr(why.text, "/nonexistent/a.set"));
	assert_int_equal(set_load("/", false, &set, &why), STATUS_IO);
	assert_non_null(strstr(why.text, "folder"));
	assert_int_equal(set_load("/dev/null", false, &set, &why), STATUS_IO);
	assert_non_null(strstr(why.text, "regular"));
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(of_sections),
		cmocka_unit_test(of_lines),
		cmocka_unit_test(of_keys),
		cmocka_unit_test(of_values),
		cmocka_unit_test(of_paths),
		cmocka_unit_test(of_the_file_itself),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
