#include "report/paper.h"

#include <stdio.h>

#include "ledger/outcome.h"

struct cell_name cell_name(const struct cell_fact *cell)
{
	struct cell_name name;

	(void)snprintf(name.text, sizeof(name.text), "%s%s%s", cell->key.codec,
		       cell->key.level[0] ? " " : "", cell->key.level);
	return name;
}

void paper_cell_key(struct grid *grid, const struct cell_row *row)
{
	grid_add(grid, "%s", cell_name(row->fact).text);
	grid_add(grid, "%s", figure_layout(row->fact->page_bytes).text);
}

void paper_interval(struct grid *grid, struct notes *notes, bool known,
		    const struct interval *interval)
{
	if (!known)
		grid_add(grid, "-");
	else if (interval->known)
		grid_add(grid, "%s",
			 figure_interval(interval->low, interval->high).text);
	else
		grid_add(grid, "none %s",
			 notes_mark(notes, interval->reason).text);
}

bool cell_failed(const struct cell_fact *cell)
{
	return cell->outcome == OUTCOME_FAILED ||
	       (cell->outcome == OUTCOME_DONE && !cell->facts.lossless);
}

static unsigned failures(const struct corpus_view *view)
{
	unsigned count = view->fact->outcome == OUTCOME_FAILED;

	for (size_t i = 0; i < view->estimate_count; i++)
		count += view->estimates[i].fact->outcome == OUTCOME_FAILED;
	for (size_t i = 0; i < view->cell_count; i++)
		count += cell_failed(view->cells[i].fact);
	return count;
}

/* The smallest result over all codecs, levels and layouts. */
static const struct cell_row *best_cell(const struct corpus_view *view)
{
	const struct cell_row *best = NULL;

	for (size_t i = 0; i < view->cell_count; i++) {
		const struct cell_row *cell = &view->cells[i];

		if (!cell->known)
			continue;
		if (!best || cell->bits_per_symbol < best->bits_per_symbol)
			best = cell;
	}
	return best;
}

static const struct column columns[] = {
	{"corpus", 20, true},  {"symbols", 10, true},    {"floor", 7, false},
	{"held by", 14, true}, {"best codec", 14, true}, {"gap", 7, false},
	{"gap %", 7, false},   {"failed", 6, false},
};

static void corpus_line(struct grid *grid, struct notes *notes,
			const struct corpus_view *view)
{
	const struct corpus_fact *fact = view->fact;
	const struct cell_row *best = best_cell(view);
	struct cell_name name = {"-"};

	if (best)
		name = cell_name(best->fact);
	grid_add(grid, "%s", fact->name);
	grid_add(grid, "%s", symbol_kind_name(fact->kind));
	grid_add(grid, "%s",
		 figure_bits(view->floor.known, view->floor.bits_per_symbol)
			 .text);
	if (fact->outcome == OUTCOME_DONE)
		grid_add(grid, "%s",
			 view->floor.known ? view->floor.held_by : "-");
	else
		grid_add(grid, "%s %s", outcome_name(fact->outcome),
			 notes_mark(notes, fact->reason).text);
	grid_add(grid, "%s", name.text);
	grid_add(grid, "%s", figure_bits(best, best ? best->gap : 0).text);
	grid_add(grid, "%s",
		 figure_percent(best && best->has_percent,
				best ? best->gap_percent : 0)
			 .text);
	grid_add(grid, "%u", failures(view));
}

enum status paper_overview(const struct writer *writer,
			   const struct analysis *analysis)
{
	struct notes notes = {0};
	struct grid grid;
	enum status status;

	write_heading(writer, 2, "All corpora at a glance");
	grid_init(&grid, columns, sizeof(columns) / sizeof(columns[0]));
	for (size_t i = 0; i < analysis->corpus_count; i++)
		corpus_line(&grid, &notes, &analysis->corpora[i]);
	status = grid_finish(&grid, writer);
	if (status == STATUS_OK)
		write_paragraph(
			writer,
			"Floor and gap are in bits per symbol of the kind "
			"named. The floor is the shortest code length that "
			"anything reached on this very file, so the gap is "
			"what is at least left to win; the best codec is the "
			"smallest result over all levels and layouts. 'failed' "
			"counts methods and codecs that broke or lost data.");
	if (notes_finish(&notes, writer) != STATUS_OK)
		status = STATUS_NO_MEMORY;
	return status;
}
