#include "report/paper.h"

#include <stdio.h>

#define COUNT(array) (sizeof(array) / sizeof((array)[0]))

static const struct column gap_columns[] = {
	{"codec", CELL_COLUMN, true},
	{"layout", 7, true},
	{"bits", 7, false},
	{"interval", 17, true},
	{"gap", 7, false},
	{"gap interval", 17, true},
	{"gap %", 7, false},
	{"status", 10, true},
};

static void status_cell(struct grid *grid, struct notes *notes,
			const struct cell_row *row)
{
	const struct cell_fact *cell = row->fact;

	if (cell_failed(cell))
		grid_add(grid, "FAILED %s",
			 notes_mark(notes, cell->reason && cell->reason[0]
						   ? cell->reason
						   : "the decoded bytes differ "
						     "from the input")
				 .text);
	else if (row->known)
		grid_add(grid, "ok");
	else
		grid_add(grid, "none %s",
			 notes_mark(notes, cell->outcome == OUTCOME_DONE
						   ? row->interval.reason
						   : cell->reason)
				 .text);
}

static enum status gap_table(const struct writer *writer,
			     const struct corpus_view *view,
			     struct notes *notes)
{
	struct grid grid;

	grid_init(&grid, gap_columns, COUNT(gap_columns));
	for (size_t i = 0; i < view->cell_count; i++) {
		const struct cell_row *row = &view->cells[i];

		paper_cell_key(&grid, row);
		grid_add(&grid, "%s",
			 figure_bits(row->known, row->bits_per_symbol).text);
		paper_interval(&grid, notes, row->known, &row->interval);
		grid_add(&grid, "%s", figure_bits(row->known, row->gap).text);
		paper_interval(&grid, notes, row->known, &row->gap_interval);
		grid_add(&grid, "%s",
			 figure_percent(row->known && row->has_percent,
					row->gap_percent)
				 .text);
		status_cell(&grid, notes, row);
	}
	TRY(grid_finish(&grid, writer));
	write_paragraph(
		writer,
		"Bits and gap are per symbol (%s). This file: bits and gap are "
		"exact. Data of this kind: the intervals, from resampled "
		"blocks; that of the gap is of the paired difference to the "
		"floor, which mostly makes it the narrower one. Layout: one "
		"stream (whole) or pages of so many bytes, each on its own. "
		"Two codecs whose intervals overlap may still differ.",
		symbol_kind_name(view->fact->kind));
	return STATUS_OK;
}

static const struct column cost_columns[] = {
	{"codec", CELL_COLUMN, true}, {"layout", 7, true},
	{"bytes", 15, false},         {"bits/record", 11, false},
	{"floor %", 7, false},        {"order", 5, false},
	{"enc/dec MB/s", 17, false},  {"enc/dec mem", 11, false},
};

static void order_cell(struct grid *grid, const struct corpus_view *view,
		       const struct cell_row *row)
{
	if (!row->known || view->trusted_order == 0)
		grid_add(grid, "-");
	else if (row->effective_order)
		grid_add(grid, "%u", row->effective_order);
	else
		grid_add(grid, ">%u", view->trusted_order);
}

static void cost_line(struct grid *grid, const struct corpus_view *view,
		      const struct cell_row *row)
{
	const struct cell_facts *facts = &row->fact->facts;

	paper_cell_key(grid, row);
	grid_add(grid, "%s", figure_count(facts->bytes).text);
	grid_add(grid, "%s",
		 figure_percent(row->has_record, row->bits_per_record).text);
	grid_add(grid, "%s", figure_percent(true, 100 * row->efficiency).text);
	order_cell(grid, view, row);
	if (row->fact->timed)
		grid_add(grid, "%s%s/%s", row->timing_noisy ? NOISY_MARK : "",
			 figure_speed(row->encode_mb_per_s).text,
			 figure_speed(row->decode_mb_per_s).text);
	else
		grid_add(grid, "-");
	grid_add(grid, "%s/%s",
		 figure_memory(cell_encode_memory(row->fact)).text,
		 figure_memory(cell_decode_memory(row->fact)).text);
}

static enum status cost_table(const struct writer *writer,
			      const struct corpus_view *view)
{
	struct grid grid;

	write_heading(writer, 3, "What each codec costs");
	grid_init(&grid, cost_columns, COUNT(cost_columns));
	for (size_t i = 0; i < view->cell_count; i++) {
		if (view->cells[i].known)
			cost_line(&grid, view, &view->cells[i]);
	}
	TRY(grid_finish(&grid, writer));
	write_paragraph(
		writer,
		"bytes: compressed, container included. floor %%: floor "
		"divided "
		"by achieved bits; 100 is the floor itself. order: the lowest "
		"trusted gram order at which a model of that order does as "
		"well as the codec. MB/s: million input bytes a second of CPU "
		"time, median of the rounds, on the machine that ran the "
		"survey; " NOISY_MARK " before it: noisy, rounds differ by "
		"more than 10%% of the median, so time it again alone. mem: "
		"the most that the codec asked of the heap, in "
		"bytes (K, M, G: powers of 1024).");
	return STATUS_OK;
}

static bool any_known(const struct corpus_view *view)
{
	for (size_t i = 0; i < view->cell_count; i++) {
		if (view->cells[i].known)
			return true;
	}
	return false;
}

enum status paper_cells(const struct writer *writer,
			const struct corpus_view *view, struct notes *notes)
{
	if (view->cell_count == 0)
		return STATUS_OK;
	write_heading(writer, 3, "How far each codec is above the floor");
	TRY(gap_table(writer, view, notes));
	if (!any_known(view))
		return STATUS_OK;
	TRY(paper_stack(writer, view, notes));
	TRY(paper_dictionaries(writer, view, notes));
	return cost_table(writer, view);
}
