#include "report/clean.h"

#include <stdint.h>
#include <stdio.h>
#include <string.h>

struct out {
	char *text;
	size_t room, length;
};

/* Adds a piece whole or, once one did not fit, nothing any more. */
static void add(struct out *out, const char *piece, size_t length)
{
	if (out->length + length >= out->room) {
		out->room = 0;
		return;
	}
	memcpy(out->text + out->length, piece, length);
	out->length += length;
	out->text[out->length] = '\0';
}

static bool is_plain(char c)
{
	return c >= ' ' && c <= '~';
}

size_t clean_ascii(const char *text, char *out, size_t room)
{
	struct out made = {out, room, 0};

	out[0] = '\0';
	for (; *text; text++) {
		char escaped[8];

		if (is_plain(*text)) {
			add(&made, text, 1);
			continue;
		}
		(void)snprintf(escaped, sizeof(escaped), "\\x%02x",
			       (unsigned)(unsigned char)*text);
		add(&made, escaped, 4);
	}
	return made.length;
}

/* Bare addresses become links without any brackets. */
static bool starts_link(const char *text, size_t at)
{
	if (text[at] == ':')
		return text[at + 1] == '/';
	return text[at] == '.' && at >= 3 && strchr("wW", text[at - 1]) &&
	       strchr("wW", text[at - 2]) && strchr("wW", text[at - 3]);
}

static void add_markdown(struct out *out, const char *text, size_t at)
{
	const char escaped[2] = {'\\', text[at]};

	if (text[at] == '@')
		/* A backslash does not stop a mention. */
		add(out, "&#64;", 5);
	else if (!is_plain(text[at])) {
		char hex[8];

		(void)snprintf(hex, sizeof(hex), "\\\\x%02x",
			       (unsigned)(unsigned char)text[at]);
		add(out, hex, 5);
	} else if (strchr("\\`*_{}[]<>#|&~$", text[at]) ||
		   starts_link(text, at))
		add(out, escaped, 2);
	else
		add(out, text + at, 1);
}

size_t clean_markdown(const char *text, char *out, size_t room)
{
	struct out made = {out, room, 0};

	out[0] = '\0';
	for (size_t i = 0; text[i]; i++)
		add_markdown(&made, text, i);
	return made.length;
}

static bool is_formula(const char *text)
{
	if (!text[0] || !strchr("=+-@", text[0]))
		return false;
	/* A level such as -5 is a number and must stay one. */
	return text[strspn(text + 1, "0123456789.") + 1] != '\0';
}

size_t clean_csv(const char *text, char *out, size_t room)
{
	struct out made = {out, room, 0};
	bool quote = strpbrk(text, ",\"") != NULL;

	out[0] = '\0';
	if (quote)
		add(&made, "\"", 1);
	if (is_formula(text))
		add(&made, "'", 1);
	for (; *text; text++) {
		char escaped[8] = {*text};

		if (*text == '"')
			(void)strcpy(escaped, "\"\"");
		else if (!is_plain(*text))
			(void)snprintf(escaped, sizeof(escaped), "\\x%02x",
				       (unsigned)(unsigned char)*text);
		add(&made, escaped, strlen(escaped));
	}
	if (quote)
		add(&made, "\"", 1);
	return made.length;
}

/* Bytes of the well-formed sequence at text (RFC 3629, section 4), or 0. */
static size_t utf8_length(const unsigned char *text)
{
	unsigned char low = 0x80;
	unsigned char high = 0xbf;
	size_t length;

	if (text[0] < 0x80)
		return 1;
	if (text[0] < 0xc2 || text[0] > 0xf4)
		return 0;
	length = text[0] < 0xe0 ? 2 : text[0] < 0xf0 ? 3 : 4;
	if (text[0] == 0xe0)
		low = 0xa0;
	else if (text[0] == 0xed)
		high = 0x9f;
	else if (text[0] == 0xf0)
		low = 0x90;
	else if (text[0] == 0xf4)
		high = 0x8f;
	if (text[1] < low || text[1] > high)
		return 0;
	/* The NUL at the end is no continuation, so nothing is overrun. */
	for (size_t i = 2; i < length; i++) {
		if (text[i] < 0x80 || text[i] > 0xbf)
			return 0;
	}
	return length;
}

size_t clean_utf8(const char *text, char *out, size_t room)
{
	struct out made = {out, room, 0};

	out[0] = '\0';
	while (*text) {
		size_t length = utf8_length((const unsigned char *)text);

		if (length)
			add(&made, text, length);
		else
			add(&made, "\xef\xbf\xbd", 3);
		text += length ? length : 1;
	}
	return made.length;
}
