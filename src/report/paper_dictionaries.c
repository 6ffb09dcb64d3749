#include "report/paper.h"

#include <stdio.h>

#define COUNT(array) (sizeof(array) / sizeof((array)[0]))

static const struct column columns[] = {
	{"codec", CELL_COLUMN, true},
	{"layout", 7, true},
	{"bits", 7, false},
	{"own", 7, false},
	{"won", 8, false},
	{"interval of won", 17, true},
	{"verdict", 12, true},
	{"warm", 7, false},
	{"cold-warm", 9, false},
};

/* Whether it helps data of this kind, or only this file, or hurts. */
static const char *verdict(const struct dictionary_row *row)
{
	const struct interval *interval = &row->won_interval;

	if (!row->known)
		return "-";
	if (!interval->known)
		return row->won > 0 ? "helps here" : "HURTS here";
	if (interval->low > 0)
		return "helps";
	return interval->high < 0 ? "HURTS" : "undecided";
}

static void line(struct grid *grid, struct notes *notes,
		 const struct cell_row *cell)
{
	const struct dictionary_row *row = &cell->dictionary;

	paper_cell_key(grid, cell);
	grid_add(grid, "%s", figure_bits(true, cell->bits_per_symbol).text);
	grid_add(grid, "%s", figure_bits(row->known, row->own).text);
	grid_add(grid, "%s", figure_signed(row->known, row->won).text);
	paper_interval(grid, notes, row->known, &row->won_interval);
	grid_add(grid, "%s", verdict(row));
	grid_add(grid, "%s", figure_bits(row->warm_known, row->warm).text);
	grid_add(grid, "%s",
		 figure_signed(row->warm_known, row->cold - row->warm).text);
}

/* More input than anyone has: a dictionary that saves next to nothing. */
#define EVEN_MOST 1e15

/*
 * Where it hurts, why: what a dictionary saves on pages is won by the byte,
 * what it takes is paid once, so that more data may turn the answer.
 */
static void hurt_words(const struct writer *writer,
		       const struct corpus_view *view,
		       const struct cell_row *cell)
{
	const struct dictionary_row *row = &cell->dictionary;
	double saved = row->won + row->own;
	double even = (double)view->fact->canonical_bytes * row->own / saved;
	char name[4 * CELL_NAME_BYTES];

	if (!row->known || !(row->won <= 0))
		return;
	(void)snprintf(name, sizeof(name), "%s at %s",
		       cell_name(cell->fact).text,
		       figure_layout(cell->fact->page_bytes).text);
	if (saved <= 0) {
		write_paragraph(writer,
				"The dictionary of %s hurts: its pages are no "
				"shorter for it, by %s bits, even before its "
				"own bytes are counted.",
				name, figure_signed(true, saved).text);
		return;
	}
	write_paragraph(
		writer,
		"The dictionary of %s hurts: it saves %s bits a symbol on the "
		"pages and takes %s itself. On data like this it would pay "
		"from about %s bytes of input on.",
		name, figure_bits(true, saved).text,
		figure_bits(true, row->own).text,
		figure_count(even < EVEN_MOST ? (uint64_t)even
					      : (uint64_t)EVEN_MOST)
			.text);
}

static void words(const struct writer *writer, const struct corpus_view *view)
{
	bool warm = false;

	for (size_t i = 0; i < view->cell_count; i++)
		warm |= view->cells[i].known &&
			view->cells[i].dictionary.warm_known;
	write_paragraph(
		writer,
		"Two dictionaries a cell: pages of odd number are coded with "
		"one trained on the pages of even number, and the other way "
		"round, so that no page was seen in training. The bytes of "
		"both are counted in bits, spread evenly over the corpus: own. "
		"won: what the same level without a dictionary takes more; "
		"below zero the dictionary hurts. The interval is of paired "
		"blocks, for data of this kind.");
	if (warm)
		write_paragraph(
			writer,
			"warm: the reference that has read the other half of "
			"the pages before each page; cold-warm: what that won "
			"it. No dictionary of the other half is likely to win "
			"more, but this is no strict bound.");
	else
		write_paragraph(
			writer,
			"warm: the reference on pages after the other half of "
			"them, the bound beside; this survey did not measure "
			"it.");
	for (size_t i = 0; i < view->cell_count; i++) {
		if (view->cells[i].known && view->cells[i].dictionary.has)
			hurt_words(writer, view, &view->cells[i]);
	}
}

enum status paper_dictionaries(const struct writer *writer,
			       const struct corpus_view *view,
			       struct notes *notes)
{
	struct grid grid;
	bool any = false;

	for (size_t i = 0; i < view->cell_count; i++)
		any |= view->cells[i].known && view->cells[i].dictionary.has;
	if (!any)
		return STATUS_OK;
	write_heading(writer, 3, "What trained dictionaries win");
	grid_init(&grid, columns, COUNT(columns));
	for (size_t i = 0; i < view->cell_count; i++) {
		if (view->cells[i].known && view->cells[i].dictionary.has)
			line(&grid, notes, &view->cells[i]);
	}
	TRY(grid_finish(&grid, writer));
	words(writer, view);
	return STATUS_OK;
}
