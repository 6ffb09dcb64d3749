#include "codec/codec.h"

#include <errno.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#define PAGE_BYTES_MIN 16
#define PAGE_BYTES_MAX (1UL << 30)

enum status layout_parse(const char *text, size_t *page_bytes,
			 struct reason *why)
{
	unsigned long value, scale = 1;
	char *end;

	if (strcmp(text, "whole") == 0) {
		*page_bytes = 0;
		return STATUS_OK;
	}
	errno = 0;
	value = strtoul(text, &end, 10);
	if (end != text && *end && !end[1]) {
		scale = *end == 'K' ? 1024 : (*end == 'M' ? 1024 * 1024 : 0);
		end++;
	}
	if (text[0] < '0' || text[0] > '9' || *end || !scale || errno ||
	    value > PAGE_BYTES_MAX / scale || value * scale < PAGE_BYTES_MIN)
		return reason_give(why, STATUS_BAD_USAGE,
				   "layout '%s': whole, or a page of 16 bytes "
				   "to 1024M, like 4K, is wanted",
				   text);
	*page_bytes = value * scale;
	return STATUS_OK;
}

void layout_format(size_t page_bytes, char text[CELL_NAME_BYTES])
{
	if (page_bytes)
		(void)snprintf(text, CELL_NAME_BYTES, "%zu", page_bytes);
	else
		(void)snprintf(text, CELL_NAME_BYTES, "whole");
}
