#include "report/writer.h"

#include <stdarg.h>
#include <string.h>

#include "base/memory.h"
#include "report/clean.h"

#define PARAGRAPH_BYTES 4096
/* Cleaning makes at most five bytes of one. */
#define CLEAN_GROWTH 5

static void repeat(const struct writer *writer, char c, size_t count)
{
	for (size_t i = 0; i < count; i++)
		(void)fputc(c, writer->out);
}

/* A hostile name must not make a line longer than the page. */
static size_t cut(char *text, size_t length, size_t width)
{
	if (length <= width)
		return length;
	memcpy(text + width - 2, "..", 3);
	return width;
}

void write_heading(const struct writer *writer, unsigned level,
		   const char *text)
{
	char clean[CLEAN_GROWTH * 256];
	size_t length;

	if (writer->markdown) {
		(void)clean_markdown(text, clean, sizeof(clean));
		repeat(writer, '#', level);
		(void)fprintf(writer->out, " %s\n\n", clean);
		return;
	}
	length = clean_ascii(text, clean, sizeof(clean));
	length = cut(clean, length, PAGE_COLUMNS);
	(void)fprintf(writer->out, "%s\n", clean);
	repeat(writer, level == 1 ? '=' : level == 2 ? '-' : '.', length);
	(void)fputs(level < 3 ? "\n\n" : "\n", writer->out);
}

/* Breaks at spaces; a word longer than a line is broken where it must. */
static void wrap(const struct writer *writer, const char *text)
{
	while (*text) {
		size_t length = strlen(text);
		size_t end = length;

		if (length > PAGE_COLUMNS) {
			end = PAGE_COLUMNS;
			while (end > 0 && text[end] != ' ')
				end--;
			if (end == 0)
				end = PAGE_COLUMNS;
		}
		(void)fprintf(writer->out, "%.*s\n", (int)end, text);
		text += end;
		while (*text == ' ')
			text++;
	}
	(void)fputc('\n', writer->out);
}

void write_paragraph(const struct writer *writer, const char *format, ...)
{
	char text[PARAGRAPH_BYTES];
	char clean[CLEAN_GROWTH * PARAGRAPH_BYTES];
	va_list arguments;

	va_start(arguments, format);
	(void)vsnprintf(text, sizeof(text), format, arguments);
	va_end(arguments);
	if (writer->markdown) {
		(void)clean_markdown(text, clean, sizeof(clean));
		(void)fprintf(writer->out, "%s\n\n", clean);
		return;
	}
	(void)clean_ascii(text, clean, sizeof(clean));
	wrap(writer, clean);
}

void grid_init(struct grid *grid, const struct column *columns,
	       size_t column_count)
{
	*grid = (struct grid){.columns = columns, .column_count = column_count};
}

void grid_add(struct grid *grid, const char *format, ...)
{
	va_list arguments;

	if (grid->status != STATUS_OK)
		return;
	if (grid->count == grid->room) {
		size_t room = grid->room ? 2 * grid->room : 64;

		grid->status =
			memory_resize(&grid->cells, room, sizeof(*grid->cells));
		if (grid->status != STATUS_OK)
			return;
		grid->room = room;
	}
	va_start(arguments, format);
	(void)vsnprintf(grid->cells[grid->count], GRID_CELL_BYTES, format,
			arguments);
	va_end(arguments);
	grid->count++;
}

static void clean_cell(const char *cell, size_t width, char *clean, size_t room)
{
	size_t length = clean_ascii(cell, clean, room);

	(void)cut(clean, length, width);
}

static size_t column_width(const struct grid *grid, size_t column)
{
	size_t width = strlen(grid->columns[column].title);
	char clean[CLEAN_GROWTH * GRID_CELL_BYTES];

	for (size_t i = column; i < grid->count; i += grid->column_count) {
		clean_cell(grid->cells[i], grid->columns[column].width, clean,
			   sizeof(clean));
		if (strlen(clean) > width)
			width = strlen(clean);
	}
	return width;
}

/* A name that has no room stands on a line of its own, above its row. */
static void plain_name(const struct writer *writer, size_t width,
		       const char *cell)
{
	char clean[CLEAN_GROWTH * GRID_CELL_BYTES];

	clean_cell(cell, PAGE_COLUMNS, clean, sizeof(clean));
	if (strlen(clean) <= width) {
		(void)fputs(clean, writer->out);
		repeat(writer, ' ', width - strlen(clean));
	} else {
		(void)fprintf(writer->out, "%s\n", clean);
		repeat(writer, ' ', width);
	}
	(void)fputs("  ", writer->out);
}

static void plain_cell(const struct writer *writer, const struct grid *grid,
		       size_t column, size_t width, const char *cell)
{
	bool last = column + 1 == grid->column_count;
	char clean[CLEAN_GROWTH * GRID_CELL_BYTES];
	size_t blank;

	clean_cell(cell, width, clean, sizeof(clean));
	blank = width - strlen(clean);
	if (!grid->columns[column].left)
		repeat(writer, ' ', blank);
	(void)fputs(clean, writer->out);
	if (grid->columns[column].left && !last)
		repeat(writer, ' ', blank);
	(void)fputs(last ? "\n" : "  ", writer->out);
}

/* More columns than any table of a report has. */
#define COLUMNS_MAX 16

/* Names get the room that is left; see plain_name for those that need more. */
#define NAME_WIDTH_LEAST 14

static void fit_page(const struct grid *grid, size_t widths[COLUMNS_MAX])
{
	size_t total = 2 * (grid->column_count - 1);

	for (size_t c = 0; c < grid->column_count && c < COLUMNS_MAX; c++)
		total += widths[c];
	while (total > PAGE_COLUMNS && widths[0] > NAME_WIDTH_LEAST) {
		widths[0]--;
		total--;
	}
}

static void plain_grid(const struct writer *writer, const struct grid *grid)
{
	static const char rule[] =
		"------------------------------------------------------------";
	size_t widths[COLUMNS_MAX] = {0};
	size_t columns = grid->column_count;

	for (size_t c = 0; c < columns && c < COLUMNS_MAX; c++)
		widths[c] = column_width(grid, c);
	fit_page(grid, widths);
	for (size_t c = 0; c < columns; c++)
		plain_cell(writer, grid, c, widths[c], grid->columns[c].title);
	for (size_t c = 0; c < columns; c++)
		plain_cell(writer, grid, c, widths[c],
			   rule + sizeof(rule) - 1 -
				   (widths[c] < sizeof(rule)
					    ? widths[c]
					    : sizeof(rule) - 1));
	for (size_t i = 0; i < grid->count; i++) {
		if (i % columns == 0 && grid->columns[0].left && columns > 1)
			plain_name(writer, widths[0], grid->cells[i]);
		else
			plain_cell(writer, grid, i % columns,
				   widths[i % columns], grid->cells[i]);
	}
	(void)fputc('\n', writer->out);
}

static void markdown_cell(const struct writer *writer, const struct grid *grid,
			  size_t column, const char *cell)
{
	char clean[CLEAN_GROWTH * GRID_CELL_BYTES];

	(void)clean_markdown(cell, clean, sizeof(clean));
	(void)fprintf(writer->out, "%s %s%s", column ? " |" : "|", clean,
		      column + 1 == grid->column_count ? " |\n" : "");
}

static void markdown_grid(const struct writer *writer, const struct grid *grid)
{
	size_t columns = grid->column_count;

	for (size_t c = 0; c < columns; c++)
		markdown_cell(writer, grid, c, grid->columns[c].title);
	for (size_t c = 0; c < columns; c++)
		(void)fprintf(writer->out, "|%s%s",
			      grid->columns[c].left ? " :-- " : " --: ",
			      c + 1 == columns ? "|\n" : "");
	for (size_t i = 0; i < grid->count; i++)
		markdown_cell(writer, grid, i % columns, grid->cells[i]);
	(void)fputc('\n', writer->out);
}

enum status grid_finish(struct grid *grid, const struct writer *writer)
{
	enum status status = grid->status;

	if (status == STATUS_OK && writer->markdown)
		markdown_grid(writer, grid);
	else if (status == STATUS_OK)
		plain_grid(writer, grid);
	memory_free(grid->cells);
	*grid = (struct grid){0};
	return status;
}
