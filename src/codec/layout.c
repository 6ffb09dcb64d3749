#include "codec/codec_rows.h"

#include <errno.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/*
 * "4K", "1M" or plain bytes from low to high, nothing around it; 0 where it is
 * none of them.
 */
size_t size_read(const char *text, size_t low, size_t high)
{
	unsigned long value, scale = 1;
	char *end;

	errno = 0;
	value = strtoul(text, &end, 10);
	if (end != text && *end && !end[1]) {
		scale = *end == 'K' ? 1024 : (*end == 'M' ? 1024 * 1024 : 0);
		end++;
	}
	if (text[0] < '0' || text[0] > '9' || *end || !scale || errno ||
	    value > high / scale || value * scale < low)
		return 0;
	return value * scale;
}

void size_format(size_t bytes, char text[CELL_NAME_BYTES])
{
	const size_t mega = 1024 * 1024;

	if (bytes % mega == 0)
		(void)snprintf(text, CELL_NAME_BYTES, "%zuM", bytes / mega);
	else if (bytes % 1024 == 0)
		(void)snprintf(text, CELL_NAME_BYTES, "%zuK", bytes / 1024);
	else
		(void)snprintf(text, CELL_NAME_BYTES, "%zu", bytes);
}

enum status layout_parse(const char *text, size_t *page_bytes,
			 struct reason *why)
{
	size_t bytes;

	if (strcmp(text, "whole") == 0) {
		*page_bytes = 0;
		return STATUS_OK;
	}
	bytes = size_read(text, LAYOUT_PAGE_MIN, LAYOUT_PAGE_MAX);
	if (!bytes)
		return reason_give(why, STATUS_BAD_USAGE,
				   "layout '%s': whole, or a page of 128 bytes "
				   "to 16M, like 4K, is wanted",
				   text);
	*page_bytes = bytes;
	return STATUS_OK;
}

void layout_format(size_t page_bytes, char text[CELL_NAME_BYTES])
{
	if (page_bytes)
		(void)snprintf(text, CELL_NAME_BYTES, "%zu", page_bytes);
	else
		(void)snprintf(text, CELL_NAME_BYTES, "whole");
}
