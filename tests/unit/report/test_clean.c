/* Can a name from a file do harm in the format that it is printed in? */
#include "report/clean.h"

#include "support/near.h"

#include <string.h>

#define TEXT_BYTES 200

static void control_bytes_are_shown(void **state)
{
	char out[TEXT_BYTES];

	(void)state;
	assert_int_equal(clean_ascii("a\x1b[31m\n\x7f~ ", out, sizeof(out)),
			 strlen("a\\x1b[31m\\x0a\\x7f~ "));
	assert_string_equal(out, "a\\x1b[31m\\x0a\\x7f~ ");
	(void)clean_ascii("\xe2\x80\xae", out, sizeof(out));
	assert_string_equal(out, "\\xe2\\x80\\xae");
}

static void nothing_is_written_past_the_room(void **state)
{
	char out[8];

	(void)state;
	memset(out, '#', sizeof(out));
	assert_int_equal(clean_ascii("abc\n", out, 6), 3);
	assert_string_equal(out, "abc");
	assert_int_equal(out[6], '#');
	assert_int_equal(clean_ascii("abcdef", out, 6), 5);
	assert_string_equal(out, "abcde");
	/* What comes after a piece that did not fit is dropped too. */
	assert_int_equal(clean_ascii("abc\nd", out, 6), 3);
	assert_int_equal(clean_markdown("ab@c", out, 6), 2);
	assert_int_equal(clean_csv("a\"b,", out, 6), 5);
	assert_int_equal(clean_utf8("ab\xff", out, 5), 2);
}

/* CommonMark 0.30, section 2.4: a backslash before ASCII punctuation. */
static void markdown_sees_no_markup(void **state)
{
	char out[TEXT_BYTES];

	(void)state;
	(void)clean_markdown("<img src=x> [a](b) `c` *d* _e_ |", out,
			     sizeof(out));
	assert_string_equal(out, "\\<img src=x\\> \\[a\\](b) \\`c\\` \\*d\\* "
				 "\\_e\\_ \\|");
	(void)clean_markdown("https://x www.x a.b a:b @tern", out, sizeof(out));
	assert_string_equal(out, "https\\://x www\\.x a.b a:b &#64;tern");
	(void)clean_markdown("a\nb", out, sizeof(out));
	assert_string_equal(out, "a\\\\x0ab");
}

/* RFC 4180, section 2: rules 5 to 7. */
static void csv_fields_are_quoted(void **state)
{
	char out[TEXT_BYTES];

	(void)state;
	(void)clean_csv("plain text", out, sizeof(out));
	assert_string_equal(out, "plain text");
	(void)clean_csv("a,b", out, sizeof(out));
	assert_string_equal(out, "\"a,b\"");
	(void)clean_csv("say \"aye\"", out, sizeof(out));
	assert_string_equal(out, "\"say \"\"aye\"\"\"");
	(void)clean_csv("a\r\nb", out, sizeof(out));
	assert_string_equal(out, "a\\x0d\\x0ab");
}

/* Common practice against formulas in spreadsheets, no source. */
static void formulas_are_text(void **state)
{
	char out[TEXT_BYTES];

	(void)state;
	(void)clean_csv("=1+1", out, sizeof(out));
	assert_string_equal(out, "'=1+1");
	(void)clean_csv("@SUM(A1,2)", out, sizeof(out));
	assert_string_equal(out, "\"'@SUM(A1,2)\"");
	(void)clean_csv("-1|x", out, sizeof(out));
	assert_string_equal(out, "'-1|x");
	(void)clean_csv("-5", out, sizeof(out));
	assert_string_equal(out, "-5");
	(void)clean_csv("-0.25", out, sizeof(out));
	assert_string_equal(out, "-0.25");
}

/* RFC 3629, sections 3 and 4: what is no UTF-8. */
static void bad_utf8_is_replaced(void **state)
{
	static const struct {
		const char *in, *out;
	} cases[] = {
		{"\xc3\xa9\xe2\x82\xac\xf0\x9f\x90\x9f", NULL},
		{"\xed\x9f\xbf\xee\x80\x80\xf4\x8f\xbf\xbf", NULL},
		{"\xc0\x80", "\xef\xbf\xbd\xef\xbf\xbd"},
		{"\xed\xa0\x80", "\xef\xbf\xbd\xef\xbf\xbd\xef\xbf\xbd"},
		{"\xf4\x90\x80\x80",
		 "\xef\xbf\xbd\xef\xbf\xbd\xef\xbf\xbd\xef\xbf\xbd"},
		{"\xe0\x9f\xbf", "\xef\xbf\xbd\xef\xbf\xbd\xef\xbf\xbd"},
		{"\xf0\x8f\xbf\xbf",
		 "\xef\xbf\xbd\xef\xbf\xbd\xef\xbf\xbd\xef\xbf\xbd"},
		{"a\xe2\x82", "a\xef\xbf\xbd\xef\xbf\xbd"},
		{"\xff!", "\xef\xbf\xbd!"},
	};
	char out[TEXT_BYTES];

	(void)state;
	for (size_t i = 0; i < sizeof(cases) / sizeof(cases[0]); i++) {
		(void)clean_utf8(cases[i].in, out, sizeof(out));
		assert_string_equal(out,
				    cases[i].out ? cases[i].out : cases[i].in);
	}
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(control_bytes_are_shown),
		cmocka_unit_test(nothing_is_written_past_the_room),
		cmocka_unit_test(markdown_sees_no_markup),
		cmocka_unit_test(csv_fields_are_quoted),
		cmocka_unit_test(formulas_are_text),
		cmocka_unit_test(bad_utf8_is_replaced),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
