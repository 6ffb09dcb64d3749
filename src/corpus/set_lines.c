#include "corpus/set_loader.h"

#include <string.h>

/* The first byte of slice that is one of chars, as an offset; or its length. */
static size_t find_one_of(struct slice slice, const char *chars)
{
	size_t i = 0, count = strlen(chars);

	while (i < slice.length && !memchr(chars, slice.bytes[i], count))
		i++;
	return i;
}

static bool begins_with(struct slice line, const char *chars)
{
	return line.length && find_one_of(line, chars) == 0;
}

static struct slice next_line(struct loader *loader)
{
	struct slice line = {loader->text.bytes + loader->offset, 0};
	size_t left = loader->text.length - loader->offset;
	const uint8_t *end = memchr(line.bytes, '\n', left);

	line.length = end ? (size_t)(end - line.bytes) : left;
	loader->offset += line.length + (end != NULL);
	loader->line++;
	while (begins_with(line, " \t\r\v\f")) {
		line.bytes++;
		line.length--;
	}
	return line;
}

static void check_heading(struct loader *loader, struct slice line)
{
	size_t end = find_one_of(line, "];");

	section_close(loader);
	if (loader->status != STATUS_OK)
		return;
	loader->heading_line = loader->line;
	loader->opened = false;
	if (end == line.length || line.bytes[end] == ';')
		REFUSE(loader, loader->line, "a heading without its ]");
	else if (end > INIH_WORD_BYTES)
		REFUSE(loader, loader->line, "a heading longer than %d bytes",
		       INIH_WORD_BYTES - 1);
}

static void check_pair(struct loader *loader, struct slice line)
{
	size_t key = find_one_of(line, "=:");

	if (key == line.length)
		REFUSE(loader, loader->line,
		       "neither a [section] nor a \"key = value\"");
	else if (key >= INIH_WORD_BYTES)
		REFUSE(loader, loader->line, "a key longer than %d bytes",
		       INIH_WORD_BYTES - 1);
}

/* inih would cut words and split lines without a word. */
static void check_line(struct loader *loader, struct slice line, size_t room)
{
	if (memchr(line.bytes, '\0', line.length))
		REFUSE(loader, loader->line,
		       "a NUL byte: this is no text file");
	else if (line.length > room)
		REFUSE(loader, loader->line,
		       "the line has %zu bytes; %zu is the most", line.length,
		       room);
	else if (begins_with(line, "["))
		check_heading(loader, line);
	else if (line.length)
		check_pair(loader, line);
}

char *loader_read_line(char *out, int size, void *stream)
{
	struct loader *loader = stream;
	struct slice line;

	if (loader->status != STATUS_OK ||
	    loader->offset >= loader->text.length)
		return NULL;
	line = next_line(loader);
	if (begins_with(line, ";#"))
		line.length = 0;
	check_line(loader, line, (size_t)size - 2);
	if (loader->status != STATUS_OK)
		return NULL;
	memcpy(out, line.bytes, line.length);
	out[line.length] = '\n';
	out[line.length + 1] = '\0';
	return out;
}
