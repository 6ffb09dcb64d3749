#include "report/paper.h"

#include <stdio.h>

#define COUNT(array) (sizeof(array) / sizeof((array)[0]))

/* The terms after the floor, each with what would win it back. */
enum { RESTART, FAMILY, EFFORT, FRAMING, STORAGE, TERMS };
static const struct {
	const char *name, *lever, *words;
} levers[TERMS] = {
	[RESTART] = {"restart", "larger pages",
		     "larger pages, or a trained dictionary"},
	[FAMILY] = {"family", "other codec", "another codec"},
	[EFFORT] = {"effort", "other level", "another level or option"},
	[FRAMING] = {"framing", "container", "another container"},
	[STORAGE] = {"storage", "packing",
		     "several pages in one unit of storage"},
};

static double term_of(const struct gap_stack *stack, unsigned term)
{
	const double terms[TERMS] = {stack->restart, stack->family,
				     stack->effort, stack->framing,
				     stack->has_storage ? stack->storage : 0};

	return terms[term];
}

/* The term that would win back most; TERMS where none is above zero. */
static unsigned largest_term(const struct gap_stack *stack)
{
	unsigned largest = TERMS;
	double most = 0;

	for (unsigned i = 0; i < TERMS; i++) {
		if (term_of(stack, i) > most) {
			largest = i;
			most = term_of(stack, i);
		}
	}
	return largest;
}

static bool is_stacked(const struct cell_row *row)
{
	return row->known && row->stack.known;
}

static const struct column term_columns[] = {
	{"codec", CELL_COLUMN, true}, {"layout", 7, true},
	{"achieved", 8, false},       {"floor", 8, false},
	{"restart", 8, false},        {"family", 8, false},
	{"effort", 8, false},         {"framing", 8, false},
	{"best level", 10, true},     {"storage", 8, false},
};

static void term_line(struct grid *grid, const struct cell_row *row,
		      bool storage)
{
	const struct gap_stack *stack = &row->stack;

	paper_cell_key(grid, row);
	grid_add(grid, "%s", figure_bits(true, row->bits_per_symbol).text);
	grid_add(grid, "%s", figure_bits(true, stack->floor).text);
	for (unsigned i = RESTART; i <= FRAMING; i++)
		grid_add(grid, "%s",
			 figure_signed(true, term_of(stack, i)).text);
	grid_add(grid, "%s", stack->best_level[0] ? stack->best_level : "-");
	if (storage)
		grid_add(
			grid, "%s",
			figure_signed(stack->has_storage, stack->storage).text);
}

static enum status term_table(const struct writer *writer,
			      const struct corpus_view *view, bool storage)
{
	struct grid grid;

	grid_init(&grid, term_columns, COUNT(term_columns) - !storage);
	for (size_t i = 0; i < view->cell_count; i++) {
		if (is_stacked(&view->cells[i]))
			term_line(&grid, &view->cells[i], storage);
	}
	TRY(grid_finish(&grid, writer));
	write_paragraph(
		writer,
		"Bits per symbol; the terms from floor to framing add up to "
		"what was achieved. restart: what the best model loses by "
		"starting anew on every page; lever: %s. family: what this "
		"codec's best level is behind the best model; lever: %s. "
		"effort: this level against that one; lever: %s, and a "
		"dictionary shows here, below zero where it helps. framing: "
		"headers, checks and padding; lever: %s.",
		levers[RESTART].words, levers[FAMILY].words,
		levers[EFFORT].words, levers[FRAMING].words);
	if (storage)
		write_paragraph(writer,
				"storage: what rounding up to whole units of "
				"storage adds beyond what was achieved; "
				"lever: %s.",
				levers[STORAGE].words);
	return STATUS_OK;
}

static const struct column interval_columns[] = {
	{"codec", CELL_COLUMN, true}, {"layout", 7, true},
	{"restart", 17, true},        {"family", 17, true},
	{"effort", 17, true},         {"largest lever", 21, true},
};

static void lever_cell(struct grid *grid, const struct gap_stack *stack)
{
	unsigned largest = largest_term(stack);

	if (largest == TERMS)
		grid_add(grid, "none");
	else
		grid_add(grid, "%s %s", levers[largest].lever,
			 figure_bits(true, term_of(stack, largest)).text);
}

static enum status interval_table(const struct writer *writer,
				  const struct corpus_view *view,
				  struct notes *notes)
{
	struct grid grid;

	grid_init(&grid, interval_columns, COUNT(interval_columns));
	for (size_t i = 0; i < view->cell_count; i++) {
		const struct cell_row *row = &view->cells[i];
		const struct gap_stack *stack = &row->stack;

		if (!is_stacked(row))
			continue;
		paper_cell_key(&grid, row);
		paper_interval(&grid, notes, true, &stack->restart_interval);
		paper_interval(&grid, notes, true, &stack->family_interval);
		paper_interval(&grid, notes, true, &stack->effort_interval);
		lever_cell(&grid, stack);
	}
	TRY(grid_finish(&grid, writer));
	write_paragraph(
		writer,
		"The same terms for data of this kind, each from the paired "
		"blocks of its two runs; framing is counted and so exact. "
		"[0.0000,0.0000]: a run against itself. largest lever: the "
		"term that would win back most, and how much it is in this "
		"file.");
	return STATUS_OK;
}

/* Sum over the cells: which term stands for most of what is lost. */
static void verdict_words(const struct writer *writer,
			  const struct corpus_view *view)
{
	const struct cell_row *worst = NULL;
	size_t counts[TERMS] = {0}, cells = 0;
	unsigned common = 0;

	for (size_t i = 0; i < view->cell_count; i++) {
		const struct cell_row *row = &view->cells[i];
		unsigned largest;

		if (!is_stacked(row))
			continue;
		largest = largest_term(&row->stack);
		if (largest == TERMS)
			continue;
		cells++;
		counts[largest]++;
		if (!worst ||
		    term_of(&row->stack, largest) >
			    term_of(&worst->stack, largest_term(&worst->stack)))
			worst = row;
	}
	if (!worst)
		return;
	for (unsigned i = 1; i < TERMS; i++) {
		if (counts[i] > counts[common])
			common = i;
	}
	write_paragraph(
		writer,
		"Which lever recovers most: for %zu of %zu cells it is %s "
		"(%s). The largest single term is %s bits of %s, layout %s, to "
		"be won by %s.",
		counts[common], cells, levers[common].words,
		levers[common].name,
		figure_bits(true,
			    term_of(&worst->stack, largest_term(&worst->stack)))
			.text,
		cell_name(worst->fact).text,
		figure_layout(worst->fact->page_bytes).text,
		levers[largest_term(&worst->stack)].words);
}

enum status paper_stack(const struct writer *writer,
			const struct corpus_view *view, struct notes *notes)
{
	bool any = false, storage = false;

	for (size_t i = 0; i < view->cell_count; i++) {
		any |= is_stacked(&view->cells[i]);
		storage |= is_stacked(&view->cells[i]) &&
			   view->cells[i].stack.has_storage;
	}
	if (!any)
		return STATUS_OK;
	write_heading(writer, 3, "Where the gap comes from");
	TRY(term_table(writer, view, storage));
	TRY(interval_table(writer, view, notes));
	verdict_words(writer, view);
	return STATUS_OK;
}
