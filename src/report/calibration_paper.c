#include "report/calibration_report.h"

#include "report/figures.h"
#include "report/stream.h"
#include "report/writer.h"

#define COUNT(array) (sizeof(array) / sizeof((array)[0]))

static const struct column goal_columns[] = {
	{"promise", 48, true},  {"decided by", 14, true}, {"wanted", 13, true},
	{"measured", 8, false}, {"99%", 15, true},        {"met", 3, true},
};

static void goal_line(struct grid *grid, const struct calibration_goal *goal)
{
	grid_add(grid, "%s", goal->what);
	grid_add(grid, "%s", goal->who[0] ? goal->who : "all");
	grid_add(grid, "%.3g to %.3g", goal->least, goal->most);
	grid_add(grid, "%.4f", goal->value);
	if (goal->has_share)
		grid_add(grid, "[%.4f,%.4f]", goal->share.low,
			 goal->share.high);
	else
		grid_add(grid, "-");
	grid_add(grid, "%s", goal->met ? "yes" : "NO");
}

static enum status write_goals(const struct writer *writer,
			       const struct calibration_case *cases,
			       size_t count)
{
	struct calibration_goal goals[CALIBRATION_GOALS];
	size_t goal_count = calibration_goals(cases, count, goals);
	struct grid grid;

	grid_init(&grid, goal_columns, COUNT(goal_columns));
	for (size_t i = 0; i < goal_count; i++)
		goal_line(&grid, &goals[i]);
	return grid_finish(&grid, writer);
}

static const struct column bracket_columns[] = {
	{"source", 14, true},  {"family", 11, true}, {"rate", 7, false},
	{"covered", 7, false}, {"99%", 13, true},    {"told", 5, false},
	{"width %", 9, false}, {"open", 5, false},   {"missed low", 10, false},
	{"flagged", 7, false},
};

static void bracket_line(struct grid *grid, const struct calibration_case *one)
{
	grid_add(grid, "%s", one->subject.source);
	grid_add(grid, "%s", one->subject.family);
	grid_add(grid, "%s", figure_bits(true, one->subject.known_rate).text);
	grid_add(grid, "%.3f", one->bracket.value);
	grid_add(grid, "[%.3f,%.3f]", one->bracket.low, one->bracket.high);
	grid_add(grid, "%.3f", one->bracket_told.value);
	grid_add(grid, "%.2f", 100 * one->bracket_width.value);
	grid_add(grid, "%.3f", one->open_below.value);
	grid_add(grid, "%.3f", one->below.value);
	grid_add(grid, "%.3f", one->drifts.value);
}

static enum status write_brackets(const struct writer *writer,
				  const struct calibration_case *cases,
				  size_t count)
{
	struct grid grid;

	grid_init(&grid, bracket_columns, COUNT(bracket_columns));
	for (size_t i = 0; i < count; i++)
		bracket_line(&grid, &cases[i]);
	TRY(grid_finish(&grid, writer));
	write_paragraph(
		writer,
		"The bracket on each source. 'covered' is the share of "
		"brackets that hold the true rate, with its Wilson 99%% "
		"interval; 'told' the share of samples with a bracket; "
		"'width' the median, in %% of the rate; 'open' the share "
		"whose lower edge a code refuted; 'missed low' the "
		"share whose lower edge lies above the rate; 'flagged' "
		"the share of samples whose blocks drift.");
	return STATUS_OK;
}

static const struct column row_columns[] = {
	{"source", 14, true},   {"estimator", 14, true}, {"bias %", 8, false},
	{"+-", 6, false},       {"rmse %", 7, false},    {"width %", 8, false},
	{"own mean", 8, false}, {"99%", 13, true},       {"rate", 5, false},
	{"told", 5, false},
};

static void row_line(struct grid *grid, const struct calibration_case *one,
		     const struct calibration_row *row)
{
	double rate = one->subject.known_rate;
	double percent = rate > 0 ? 100 / rate : 0;

	grid_add(grid, "%s", one->subject.source);
	grid_add(grid, "%s", row->name);
	grid_add(grid, "%+.3f", percent * row->bias.value);
	grid_add(grid, "%.3f", percent * row->bias.error);
	grid_add(grid, "%.3f", percent * row->rmse.value);
	grid_add(grid, "%.3f", percent * row->width.value);
	grid_add(grid, "%.3f", row->own_mean.value);
	grid_add(grid, "[%.3f,%.3f]", row->own_mean.low, row->own_mean.high);
	grid_add(grid, "%.3f", row->true_rate.value);
	grid_add(grid, "%.3f", row->told.value);
}

static enum status write_rows(const struct writer *writer,
			      const struct calibration_case *cases,
			      size_t count)
{
	struct grid grid;

	grid_init(&grid, row_columns, COUNT(row_columns));
	for (size_t i = 0; i < count; i++) {
		for (size_t r = 0; r < cases[i].row_count; r++) {
			if (cases[i].rows[r].told.trials)
				row_line(&grid, &cases[i], &cases[i].rows[r]);
		}
	}
	TRY(grid_finish(&grid, writer));
	write_paragraph(
		writer,
		"Each estimator at the order that suits the source. "
		"'bias', its standard error, 'rmse' and the median "
		"'width' of the 95%% interval are in %% of the rate. 'own "
		"mean' is how often the interval covers the mean of the "
		"estimator over all samples, which is what it promises; "
		"'rate' how often it covers the true rate; 'told' the "
		"share with an interval, of the samples it ran on.");
	return STATUS_OK;
}

static const struct column codes_columns[] = {
	{"source", 14, true},       {"samples", 7, false},
	{"without", 7, false},      {"width %", 7, false},
	{"with", 5, false},         {"99%", 13, true},
	{"width %", 7, false},      {"open", 5, false},
	{"missed high", 11, false}, {"narrower", 8, false},
};

static void codes_line(struct grid *grid, const struct calibration_case *one)
{
	const struct calibration_bracket *with = &one->with_codes;
	const struct calibration_bracket *without = &one->without_codes;

	grid_add(grid, "%s", one->subject.source);
	grid_add(grid, "%zu", with->covers.trials);
	grid_add(grid, "%.3f", without->covers.value);
	grid_add(grid, "%.2f", 100 * without->width.value);
	grid_add(grid, "%.3f", with->covers.value);
	grid_add(grid, "[%.3f,%.3f]", with->covers.low, with->covers.high);
	grid_add(grid, "%.2f", 100 * with->width.value);
	grid_add(grid, "%.3f", with->open_below.value);
	grid_add(grid, "%.3f", with->above.value);
	grid_add(grid, "%.3f", one->codes_narrow.value);
}

static size_t with_codes(const struct calibration_case *cases, size_t count)
{
	size_t trials = 0;

	for (size_t i = 0; i < count; i++)
		trials += cases[i].with_codes.covers.trials;
	return trials;
}

static enum status write_codes(const struct writer *writer,
			       const struct calibration_case *cases,
			       size_t count)
{
	struct grid grid;

	if (!with_codes(cases, count))
		return STATUS_OK;
	grid_init(&grid, codes_columns, COUNT(codes_columns));
	for (size_t i = 0; i < count; i++) {
		if (cases[i].with_codes.covers.trials)
			codes_line(&grid, &cases[i]);
	}
	TRY(grid_finish(&grid, writer));
	write_paragraph(
		writer,
		"What mix and ctw do to the bracket, on the first samples of "
		"each source only, for they take longer than all else "
		"together: coverage and median width without them and with "
		"them among the upper edges; how often a code is below the "
		"lower edge then; how often the rate lies above the upper "
		"edge; and the median of the one width over the other.");
	return STATUS_OK;
}

static const struct column gap_columns[] = {
	{"source", 14, true},
	{"covered", 7, false},
	{"99%", 13, true},
	{"samples", 7, false},
	{"width by unpaired", 17, false},
	{"width by need", 13, false},
};

static size_t with_gaps(const struct calibration_case *cases, size_t count)
{
	size_t trials = 0;

	for (size_t i = 0; i < count; i++)
		trials += cases[i].gap.trials;
	return trials;
}

static enum status write_gaps(const struct writer *writer,
			      const struct calibration_case *cases,
			      size_t count)
{
	struct grid grid;

	if (!with_gaps(cases, count))
		return STATUS_OK;
	grid_init(&grid, gap_columns, COUNT(gap_columns));
	for (size_t i = 0; i < count; i++) {
		const struct calibration_case *one = &cases[i];

		grid_add(&grid, "%s", one->subject.source);
		grid_add(&grid, "%.3f", one->gap.value);
		grid_add(&grid, "[%.3f,%.3f]", one->gap.low, one->gap.high);
		grid_add(&grid, "%zu", one->gap.trials);
		grid_add(&grid, "%.3f", one->gap_width_ratio.value);
		grid_add(&grid, "%.2f", one->gap_width_by_need);
	}
	TRY(grid_finish(&grid, writer));
	write_paragraph(writer,
			"The gap of zlib 9 over the corrected entropy, by "
			"paired blocks: how often its interval covers the mean "
			"gap over all samples, and its median width beside "
			"that of two unpaired intervals, and beside the width "
			"that the scatter of the gaps over all samples asks "
			"for. Samples whose flushes cost over 10%% have no "
			"interval.");
	return STATUS_OK;
}

static enum status write_length(const struct writer *writer,
				const struct calibration_case *cases,
				size_t count)
{
	char title[96];

	(void)snprintf(title, sizeof(title), "%s symbols, %zu samples a source",
		       figure_count(cases[0].subject.symbols).text,
		       cases[0].runs);
	write_heading(writer, 2, title);
	TRY(write_goals(writer, cases, count));
	TRY(write_brackets(writer, cases, count));
	TRY(write_codes(writer, cases, count));
	TRY(write_rows(writer, cases, count));
	return write_gaps(writer, cases, count);
}

static enum status write_all(const struct writer *writer,
			     const struct calibration_report *report)
{
	size_t i = 0;

	write_heading(writer, 1,
		      "Calibration on sources of known entropy rate");
	write_paragraph(writer,
			"%s, seed %llu, grams of orders 1 to %u. Every share "
			"stands with its Wilson 99%% interval.",
			report->program, (unsigned long long)report->seed,
			report->orders);
	while (i < report->case_count) {
		size_t same = calibration_run_of(report->cases + i,
						 report->case_count - i);

		TRY(write_length(writer, report->cases + i, same));
		i += same;
	}
	return STATUS_OK;
}

static enum status write_text(FILE *out,
			      const struct calibration_report *report,
			      struct reason *why)
{
	const struct writer writer = {out, false};

	return report_finish(out, write_all(&writer, report), why);
}

static enum status write_markdown(FILE *out,
				  const struct calibration_report *report,
				  struct reason *why)
{
	const struct writer writer = {out, true};

	return report_finish(out, write_all(&writer, report), why);
}

const struct calibration_format calibration_text = {
	.name = "text",
	.write = write_text,
};

const struct calibration_format calibration_markdown = {
	.name = "markdown",
	.write = write_markdown,
};
