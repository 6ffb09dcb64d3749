#include "corpus/set_values.h"

#include <stdlib.h>
#include <string.h>

#define BLANKS " \t\r\n"

/* An unsigned decimal number at the head of text; NULL: none is there. */
static const char *read_number(const char *text, double *value)
{
	size_t length = strspn(text, "0123456789.");
	char *end;

	/* strtod alone would also take signs, hex, inf and nan. */
	*value = strtod(text, &end);
	if (!length || end != text + length)
		return NULL;
	return end;
}

enum status value_percent(const char *text, double *share, struct reason *why)
{
	double value = 0;
	const char *end = read_number(text, &value);

	if (end)
		end += strspn(end, BLANKS);
	if (!end || strcmp(end, "%") != 0 || value > 10000)
		return reason_give(why, STATUS_BAD_USAGE,
				   "\"%s\" is no percentage from 0%% to "
				   "10000%%; write 40%%",
				   text);
	*share = value / 100;
	return STATUS_OK;
}

enum status value_bits(const char *text, double *bits, struct reason *why)
{
	double value = 0;
	const char *end = read_number(text, &value);

	if (!end || *end || value > 64)
		return reason_give(why, STATUS_BAD_USAGE,
				   "\"%s\" is no number of bits per symbol "
				   "from 0 to 64; write 1.5145",
				   text);
	*bits = value;
	return STATUS_OK;
}

enum status value_seconds(const char *text, unsigned *seconds,
			  struct reason *why)
{
	size_t digits = strspn(text, "0123456789");
	unsigned long value = digits < 6 ? strtoul(text, NULL, 10) : 0;

	if (!digits || text[digits] || value < 1 || value > 86400)
		return reason_give(why, STATUS_BAD_USAGE,
				   "\"%s\" is no number of seconds from 1 to "
				   "86400; write 60",
				   text);
	*seconds = (unsigned)value;
	return STATUS_OK;
}

enum status value_memory(const char *text, size_t *bytes, struct reason *why)
{
	size_t digits = strspn(text, "0123456789");
	size_t value = digits < 8 ? strtoul(text, NULL, 10) : 0;
	size_t mebibytes = 0;

	if (digits && strcmp(text + digits, "M") == 0)
		mebibytes = value;
	else if (digits && strcmp(text + digits, "G") == 0)
		mebibytes = value * 1024;
	if (mebibytes < 16 || mebibytes > (size_t)1 << 20)
		return reason_give(why, STATUS_BAD_USAGE,
				   "\"%s\" is no amount of memory from 16M to "
				   "1024G; write 512M",
				   text);
	*bytes = mebibytes << 20;
	return STATUS_OK;
}

enum status value_digest(const char *text, char sha256[65], struct reason *why)
{
	size_t length = strspn(text, "0123456789abcdefABCDEF");

	if (length != 64 || text[length])
		return reason_give(why, STATUS_BAD_USAGE,
				   "\"%s\" is no SHA-256: 64 hex digits are "
				   "wanted; without this key nothing is "
				   "checked",
				   text);
	for (size_t i = 0; i < 64; i++) {
		int upper = text[i] >= 'A' && text[i] <= 'F';

		sha256[i] = (char)(upper ? text[i] - 'A' + 'a' : text[i]);
	}
	sha256[64] = '\0';
	return STATUS_OK;
}

enum status value_records(const char *text, struct symbol_rules *rules,
			  struct reason *why)
{
	size_t digits = strspn(text, "0123456789");
	unsigned long long bytes = 0;
	const char *unit = text + digits;

	if (strcmp(text, "lines") == 0) {
		rules->record_lines = true;
		return STATUS_OK;
	}
	unit += strspn(unit, BLANKS);
	if (digits && digits < 10)
		bytes = strtoull(text, NULL, 10);
	if (bytes && strcmp(unit, "in all") == 0) {
		rules->record_count = (size_t)bytes;
		return STATUS_OK;
	}
	if (!bytes || (strcmp(unit, "bytes") != 0 && strcmp(unit, "byte") != 0))
		return reason_give(
			why, STATUS_BAD_USAGE,
			"\"%s\" are no records; write lines, a width "
			"like 17 bytes, or a number like 2000 in all",
			text);
	rules->record_bytes = (size_t)bytes;
	return STATUS_OK;
}

enum status value_feed(const char *text, bool *rolling, struct reason *why)
{
	if (strcmp(text, "fixed") != 0 && strcmp(text, "rolling") != 0)
		return reason_give(why, STATUS_BAD_USAGE,
				   "\"%s\" is no feed; write fixed (the same "
				   "bytes every time) or rolling",
				   text);
	*rolling = text[0] == 'r';
	return STATUS_OK;
}

enum status value_unit(const char *text, size_t *bytes, struct reason *why)
{
	if (strcmp(text, "512") != 0 && strcmp(text, "4096") != 0)
		return reason_give(why, STATUS_BAD_USAGE,
				   "\"%s\" is no unit of storage; write 512 or "
				   "4096, in bytes",
				   text);
	*bytes = text[0] == '5' ? 512 : 4096;
	return STATUS_OK;
}

enum status value_name(const char *text, char name[SET_NAME_BYTES],
		       struct reason *why)
{
	size_t good = strspn(text, "abcdefghijklmnopqrstuvwxyz"
				   "ABCDEFGHIJKLMNOPQRSTUVWXYZ"
				   "0123456789-_.");

	if (!good || text[good])
		return reason_give(why, STATUS_BAD_USAGE,
				   "\"%s\" is no name: letters, digits, - _ "
				   "and . are wanted",
				   text);
	return value_short(text, name, why);
}

enum status value_short(const char *text, char out[SET_NAME_BYTES],
			struct reason *why)
{
	if (strlen(text) >= SET_NAME_BYTES)
		return reason_give(why, STATUS_BAD_USAGE,
				   "\"%s\" is too long: %d bytes at most", text,
				   SET_NAME_BYTES - 1);
	strcpy(out, text);
	return STATUS_OK;
}

enum status value_text(const char *text, char **out)
{
	size_t length = strlen(text) + 1;
	char *copy;

	TRY(memory_new(length, 1, &copy));
	memcpy(copy, text, length);
	memory_free(*out);
	*out = copy;
	return STATUS_OK;
}

static enum status add_word(struct text_list *list, const char *word,
			    size_t length, struct reason *why)
{
	char *copy;

	for (size_t i = 0; i < list->count; i++) {
		if (strlen(list->texts[i]) == length &&
		    memcmp(list->texts[i], word, length) == 0)
			return reason_give(why, STATUS_BAD_USAGE,
					   "\"%s\" is there twice",
					   list->texts[i]);
	}
	TRY(memory_resize(&list->texts, list->count + 1, sizeof(char *)));
	TRY(memory_new(length + 1, 1, &copy));
	memcpy(copy, word, length);
	copy[length] = '\0';
	list->texts[list->count++] = copy;
	return STATUS_OK;
}

enum status value_list(const char *text, struct text_list *list,
		       struct reason *why)
{
	struct text_list made = {0};

	for (text += strspn(text, BLANKS); *text;
	     text += strspn(text, BLANKS)) {
		size_t length = strcspn(text, BLANKS);
		enum status status = add_word(&made, text, length, why);

		if (status != STATUS_OK) {
			text_list_release(&made);
			return status;
		}
		text += length;
	}
	*list = made;
	return STATUS_OK;
}

void text_list_release(struct text_list *list)
{
	for (size_t i = 0; i < list->count; i++)
		memory_free(list->texts[i]);
	memory_free(list->texts);
	*list = (struct text_list){0};
}
