#include "report/paper.h"

#include <stdio.h>

#include "report/formats.h"
#include "report/stream.h"

static void libraries_words(const struct writer *writer,
			    const struct survey *survey)
{
	char list[2048] = "none";
	size_t used = 0;

	for (size_t i = 0; i < survey->library_count; i++) {
		int length =
			snprintf(list + used, sizeof(list) - used, "%s%s %s",
				 i ? ", " : "", survey->libraries[i].name,
				 survey->libraries[i].version);

		if (length < 0 || (size_t)length >= sizeof(list) - used)
			break;
		used += (size_t)length;
	}
	write_paragraph(writer, "Libraries: %s.", list);
}

void paper_survey_words(const struct writer *writer,
			const struct survey *survey)
{
	char title[2 * LEDGER_NAME_BYTES];

	(void)snprintf(title, sizeof(title), "Set %s, survey %lld",
		       survey->set_name, (long long)survey->id);
	write_heading(writer, 1, title);
	write_paragraph(writer, "%s; seed %llu; gram orders 1 to %u.",
			survey->program, (unsigned long long)survey->seed,
			survey->orders);
	libraries_words(writer, survey);
	if (survey->gap_limit >= 0)
		write_paragraph(
			writer,
			"Gap limit of the set: %s%% of the "
			"floor.",
			figure_percent(true, 100 * survey->gap_limit).text);
	if (!survey->finished)
		write_paragraph(writer,
				"UNFINISHED: the survey was stopped or is "
				"still running. What is missing below was not "
				"measured yet; --resume goes on.");
}

static enum status write_corpus(const struct writer *writer,
				const struct corpus_view *view)
{
	struct notes notes = {0};
	enum status status = STATUS_OK;
	enum status noted;

	write_heading(writer, 2, view->fact->name);
	paper_corpus_words(writer, view);
	if (view->fact->outcome == OUTCOME_DONE) {
		status = paper_estimates(writer, view, &notes);
		if (status == STATUS_OK)
			status = paper_orders(writer, view);
		if (status == STATUS_OK)
			status = paper_cells(writer, view, &notes);
	}
	noted = notes_finish(&notes, writer);
	return status == STATUS_OK ? noted : status;
}

static enum status write_paper(const struct writer *writer,
			       const struct analysis *analysis)
{
	paper_survey_words(writer, analysis->survey);
	TRY(paper_overview(writer, analysis));
	for (size_t i = 0; i < analysis->corpus_count; i++)
		TRY(write_corpus(writer, &analysis->corpora[i]));
	return STATUS_OK;
}

static enum status text_write(FILE *out, const struct analysis *analysis,
			      struct reason *why)
{
	const struct writer writer = {.out = out};

	return report_finish(out, write_paper(&writer, analysis), why);
}

static enum status markdown_write(FILE *out, const struct analysis *analysis,
				  struct reason *why)
{
	const struct writer writer = {.out = out, .markdown = true};

	return report_finish(out, write_paper(&writer, analysis), why);
}

const struct report_format report_text = {
	.name = "text",
	.summary = "for the terminal, at most 100 columns of plain ASCII",
	.write = text_write,
};

const struct report_format report_markdown = {
	.name = "markdown",
	.summary = "the same as a Markdown page, with tables",
	.write = markdown_write,
};
