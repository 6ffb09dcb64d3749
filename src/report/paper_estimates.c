#include "report/paper.h"

#include <stdio.h>

#define COUNT(array) (sizeof(array) / sizeof((array)[0]))

static const struct column estimate_columns[] = {
	{"method", 16, true},   {"layout", 7, true},  {"bits", 7, false},
	{"interval", 17, true}, {"leans", 7, true},   {"code", 4, true},
	{"order", 5, false},    {"status", 14, true},
};

static void estimate_status(struct grid *grid, struct notes *notes,
			    const struct estimate_row *row)
{
	static const char *const words[] = {
		[OUTCOME_DONE] = "none ",
		[OUTCOME_FAILED] = "FAILED ",
		[OUTCOME_DECLINED] = "declined ",
		[OUTCOME_SKIPPED] = "skipped ",
	};
	enum outcome outcome = row->fact->outcome;

	if (row->known)
		grid_add(grid, "ok");
	else
		/* Measured, but nothing could be made of it: why is told where
		 * the interval would be. */
		grid_add(grid, "%s%s", words[outcome],
			 notes_mark(notes, outcome == OUTCOME_DONE
						   ? row->interval.reason
						   : row->fact->reason)
				 .text);
}

static void interval_cell(struct grid *grid, struct notes *notes,
			  const struct interval *interval)
{
	if (interval->known)
		grid_add(grid, "%s",
			 figure_interval(interval->low, interval->high).text);
	else
		grid_add(grid, "none %s",
			 notes_mark(notes, interval->reason).text);
}

static void estimate_line(struct grid *grid, struct notes *notes,
			  const struct estimate_row *row)
{
	grid_add(grid, "%s", row->fact->method);
	grid_add(grid, "%s", figure_layout(row->fact->page_bytes).text);
	grid_add(grid, "%s",
		 figure_bits(row->known, row->bits_per_symbol).text);
	if (row->known)
		interval_cell(grid, notes, &row->interval);
	else
		grid_add(grid, "-");
	grid_add(grid, "%s", row->leans ? row->leans : "unknown");
	grid_add(grid, "%s", row->is_code ? "yes" : "no");
	if (row->known && row->order)
		grid_add(grid, "%u", row->order);
	else
		grid_add(grid, "-");
	estimate_status(grid, notes, row);
}

enum status paper_estimates(const struct writer *writer,
			    const struct corpus_view *view, struct notes *notes)
{
	struct grid grid;

	if (view->estimate_count == 0)
		return STATUS_OK;
	write_heading(writer, 3, "Estimates");
	grid_init(&grid, estimate_columns, COUNT(estimate_columns));
	for (size_t i = 0; i < view->estimate_count; i++)
		estimate_line(&grid, notes, &view->estimates[i]);
	TRY(grid_finish(&grid, writer));
	write_paragraph(
		writer,
		"Bits are per symbol (%s). A code is a length that a decoder "
		"could live on: exact for this file. 'leans' says on which "
		"side of the entropy rate the method errs: above, none (about "
		"even), or unknown (either side). The interval is for data of "
		"this kind, from resampled blocks of the file.",
		symbol_kind_name(view->fact->kind));
	return STATUS_OK;
}

static const struct column order_columns[] = {
	{"order", 5, false},        {"H per gram", 10, false},
	{"plug-in", 8, false},      {"corrected", 9, false},
	{"by coverage", 11, false}, {"crossfit", 8, false},
	{"coverage %", 10, false},  {"distinct", 15, false},
	{"trusted", 7, true},
};

enum status paper_orders(const struct writer *writer,
			 const struct corpus_view *view)
{
	struct grid grid;

	if (view->order_count == 0)
		return STATUS_OK;
	write_heading(writer, 3, "Grams");
	grid_init(&grid, order_columns, COUNT(order_columns));
	for (size_t i = 0; i < view->order_count; i++) {
		const struct order_row *row = &view->orders[i];

		grid_add(&grid, "%u", row->order);
		grid_add(&grid, "%s", figure_bits(true, row->H).text);
		grid_add(&grid, "%s", figure_bits(true, row->h_plugin).text);
		grid_add(&grid, "%s", figure_bits(true, row->h_corrected).text);
		grid_add(&grid, "%s", figure_bits(true, row->h_cwj).text);
		grid_add(&grid, "%s",
			 figure_bits(row->has_crossfit, row->h_crossfit).text);
		grid_add(&grid, "%s",
			 figure_percent(true, 100 * row->coverage).text);
		grid_add(&grid, "%s", figure_count(row->distinct).text);
		grid_add(&grid, "%s", row->trusted ? "yes" : "no");
	}
	TRY(grid_finish(&grid, writer));
	write_paragraph(
		writer,
		"Order k looks at grams of k symbols. 'H per gram' is their "
		"entropy in bits per gram; the four columns after it are bits "
		"per symbol given the k-1 before: straight from the counts "
		"(plug-in, errs low), corrected for rare grams (Grassberger "
		"2003; Chao, Wang and Jost 2013, which goes by coverage), and "
		"cross-fitted (errs high). Coverage is estimated: how "
		"likely the next gram is one that this file has shown. None of "
		"these is a floor.");
	return STATUS_OK;
}
