#include "report/formats.h"
#include "report/paper.h"
#include "report/stream.h"

#define COUNT(array) (sizeof(array) / sizeof((array)[0]))

static const struct column columns[] = {
	{"codec", CELL_COLUMN, true}, {"layout", 7, true},
	{"bits", 7, false},           {"gap", 7, false},
	{"95% of gap", 17, true},     {"gap %", 7, false},
	{"floor %", 7, false},        {"enc/dec MB/s", 17, false},
	{"bits/rec", 9, false},
};

static void cell_line(struct grid *grid, const struct cell_row *row,
		      bool records)
{
	const struct interval *interval = &row->gap_interval;
	bool known = row->known && !cell_failed(row->fact);

	grid_add(grid, "%s", cell_name(row->fact).text);
	grid_add(grid, "%s", figure_layout(row->fact->page_bytes).text);
	if (!known) {
		grid_add(grid, "%s", cell_failed(row->fact) ? "FAILED" : "-");
		for (size_t i = 3; i < grid->column_count; i++)
			grid_add(grid, "-");
		return;
	}
	grid_add(grid, "%s", figure_bits(true, row->bits_per_symbol).text);
	grid_add(grid, "%s", figure_bits(true, row->gap).text);
	grid_add(grid, "%s",
		 interval->known
			 ? figure_interval(interval->low, interval->high).text
			 : "-");
	grid_add(grid, "%s",
		 figure_percent(row->has_percent, row->gap_percent).text);
	grid_add(grid, "%s", figure_percent(true, 100 * row->efficiency).text);
	if (row->fact->timed)
		grid_add(grid, "%s%s/%s", row->timing_noisy ? NOISY_MARK : "",
			 figure_speed(row->encode_mb_per_s).text,
			 figure_speed(row->decode_mb_per_s).text);
	else
		grid_add(grid, "-");
	if (records)
		grid_add(grid, "%s",
			 figure_percent(row->has_record, row->bits_per_record)
				 .text);
}

static void bracket_line(const struct writer *writer,
			 const struct bracket_row *bracket)
{
	const char *drift = bracket->not_calibrated
				    ? "; not calibrated: the data drifts"
				    : "";

	if (!bracket->known)
		write_paragraph(writer, "No rate bracket: %s.",
				bracket->reason);
	else if (bracket->open_below)
		write_paragraph(writer,
				"Rate bracket: open below, at most %s%s.",
				figure_bits(true, bracket->high).text, drift);
	else
		write_paragraph(
			writer, "Rate bracket: %s%s.",
			figure_interval(bracket->low, bracket->high).text,
			drift);
}

static void floor_line(const struct writer *writer,
		       const struct corpus_view *view)
{
	const struct interval *interval = &view->floor.interval;

	write_paragraph(
		writer,
		"%s symbols of kind %s. Floor: %s bits per symbol by %s%s, "
		"exact for this file. Data of this kind: %s%s.",
		figure_count(view->fact->n).text,
		symbol_kind_name(view->fact->kind),
		figure_bits(view->floor.known, view->floor.bits_per_symbol)
			.text,
		view->floor.known ? view->floor.held_by : "nothing",
		view->floor.by_codec ? " (a codec: every estimator misses "
				       "a structure)"
				     : "",
		interval->known
			? figure_interval(interval->low, interval->high).text
			: "no interval, for ",
		interval->known ? "" : interval->reason);
}

static enum status write_corpus(const struct writer *writer,
				const struct corpus_view *view)
{
	struct grid grid;
	bool records;

	write_heading(writer, 2, view->fact->name);
	if (view->fact->outcome != OUTCOME_DONE) {
		paper_corpus_words(writer, view);
		return STATUS_OK;
	}
	floor_line(writer, view);
	bracket_line(writer, &view->bracket);
	if (!view->cell_count)
		return STATUS_OK;
	records = view->fact->records > 0;
	grid_init(&grid, columns, COUNT(columns) - !records);
	for (size_t i = 0; i < view->cell_count; i++)
		cell_line(&grid, &view->cells[i], records);
	return grid_finish(&grid, writer);
}

static enum status write_table(const struct writer *writer,
			       const struct analysis *analysis)
{
	paper_survey_words(writer, analysis->survey);
	for (size_t i = 0; i < analysis->corpus_count; i++)
		TRY(write_corpus(writer, &analysis->corpora[i]));
	TRY(paper_overview(writer, analysis));
	write_paragraph(
		writer,
		"In the tables above, bits and gap are per symbol and exact "
		"for the file; the 95%% interval of the gap is for data of "
		"this kind, from resampled blocks of paired differences, and "
		"'-' where there is too little data for one. gap %% is the gap "
		"over the floor, floor %% the floor over the bits achieved. "
		"bits/rec: bits per record, the only unit that compares "
		"formats. " NOISY_MARK " before MB/s: noisy, rounds differ by "
		"more than 10%%. "
		"The whole report, with reasons, estimators, gram orders, the "
		"parts of each gap and memory: ratefloor report LEDGER.");
	return STATUS_OK;
}

static enum status table_write(FILE *out, const struct analysis *analysis,
			       struct reason *why)
{
	const struct writer writer = {.out = out};

	return report_finish(out, write_table(&writer, analysis), why);
}

const struct report_format report_table = {
	.name = "table",
	.summary =
		"the main figures of every corpus and cell, for the terminal",
	.write = table_write,
};
