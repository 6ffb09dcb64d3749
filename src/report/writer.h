/* Headings, paragraphs and tables on paper: plain text or Markdown. */
#ifndef REPORT_WRITER_H
#define REPORT_WRITER_H

#include "base/status.h"

#include <stdbool.h>
#include <stddef.h>
#include <stdio.h>

/* Plain text is at most this wide, whatever the names in it. */
#define PAGE_COLUMNS 100

struct writer {
	FILE *out; /* borrowed */
	bool markdown;
};

/* Everything is cleaned on its way out: texts are passed as they are. */

/* level 1 is the title. */
void write_heading(const struct writer *writer, unsigned level,
		   const char *text);
/* Wrapped in plain text; one line in Markdown. Cut at 4 KiB. */
void write_paragraph(const struct writer *writer, const char *format, ...)
	__attribute__((format(printf, 2, 3)));

/* A column of a table; in plain text longer cells are cut to width. */
struct column {
	const char *title;
	unsigned width;
	bool left; /* words; numbers stand to the right */
};

#define GRID_CELL_BYTES 128

/* Cells in rows, filled from left to right; memory failures stick. */
struct grid {
	const struct column *columns; /* borrowed */
	size_t column_count;
	char (*cells)[GRID_CELL_BYTES]; /* owned */
	size_t count, room;
	enum status status;
};

void grid_init(struct grid *grid, const struct column *columns,
	       size_t column_count);
void grid_add(struct grid *grid, const char *format, ...)
	__attribute__((format(printf, 2, 3)));
/* Writes and releases. STATUS_NO_MEMORY: nothing was written. */
MUST_USE enum status grid_finish(struct grid *grid,
				 const struct writer *writer);

#endif
