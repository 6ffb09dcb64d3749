/* Can a reader take everything from the page, and does the page hold? */
#include "report/report.h"

#include "base/memory.h"
#include "report/writer.h"
#include "support/near.h"
#include "support/sample_analysis.h"
#include "support/sample_survey.h"

#include <string.h>

/* Says whether the text, its line breaks read as spaces, holds the words. */
static bool holds(const char *text, const char *words)
{
	char *flat = sample_text(text);
	bool found;

	for (char *c = flat; *c; c++) {
		if (*c == '\n')
			*c = ' ';
	}
	found = strstr(flat, words) != NULL;
	memory_free(flat);
	return found;
}

static void says(const struct sample_analysis *sample, const char *words)
{
	static const char *const formats[] = {"text", "markdown"};

	for (size_t i = 0; i < 2; i++) {
		char *text = sample_report(report_find(formats[i]),
					   &sample->analysis);

		if (!holds(text, words))
			fail_msg("%s: no '%s' in:\n%s", formats[i], words,
				 text);
		memory_free(text);
	}
}

static void says_not(const struct sample_analysis *sample, const char *words)
{
	char *text = sample_report(report_find("text"), &sample->analysis);

	if (holds(text, words))
		fail_msg("'%s' in:\n%s", words, text);
	memory_free(text);
}

static void the_page_answers(void **state)
{
	struct sample_analysis sample;

	(void)state;
	sample_analysis_init(&sample);
	says(&sample, "Set marrow-bay, survey 3");
	says(&sample, "4,194,304 symbols of kind u16le; 801 different");
	says(&sample, "SHA-256 bbbbbbbbbbbb.");
	says(&sample, "Records declared: 349,525");
	says(&sample, "1.5100 bits per symbol");
	says(&sample, "Floor: 1.5234 bits per symbol, held by mix, the "
		      "shortest of 5 code lengths. This file: exact");
	says(&sample, "Data of this kind: ");
	says(&sample, "between 1.4321 and 1.5432 bits per symbol");
	says(&sample, "Nothing here refutes that; nothing proves it either.");
	says(&sample, "Trusted order: 1. Why not one more: at order 2 coverage "
		      "is 81.2%, 95% is needed.");
	says(&sample, "only 5.2 effective blocks where 8 are needed");
	says(&sample, "needs 6400 symbols, found 12");
	says(&sample, "byte 7: got 0x41, wanted 0x42");
	says(&sample, "Skipped: not fetched; see 'ratefloor corpora'.");
	says(&sample, "FAILED");
	says(&sample, "3.52/67.1");
	says(&sample, "262K/32K");
	says(&sample, ">1");
	says_not(&sample, "UNFINISHED");
	says_not(&sample, "Open below");
	says_not(&sample, "Not calibrated");
	says_not(&sample, "Floor held by a codec");
	sample_analysis_release(&sample);
}

static void honest_failures_are_told(void **state)
{
	struct sample_analysis sample;

	(void)state;
	sample_analysis_init(&sample);
	sample.views[0].bracket.open_below = true;
	says(&sample, "open below, at most 1.5432 bits per symbol (by mix)");
	says(&sample, "Open below: a code length came out lower than the "
		      "lower edge");
	says_not(&sample, "1.4321");
	sample.views[0].bracket.not_calibrated = true;
	says(&sample, "Not calibrated: the data drifts");
	sample.views[0].floor.by_codec = true;
	says(&sample, "Floor held by a codec: it beat every estimator");
	sample_analysis_release(&sample);
}

static void what_is_unknown_says_why(void **state)
{
	struct sample_analysis sample;

	(void)state;
	sample_analysis_init(&sample);
	sample.views[0].bracket.known = false;
	strcpy(sample.views[0].bracket.reason, "no order is steady");
	says(&sample, "No rate bracket: no order is steady.");
	sample.views[0].trusted_order = 0;
	says(&sample, "Trusted order: none. Why not even order 1: at order 2");
	sample.views[0].floor.interval = sample.cells[1].interval;
	says(&sample, "no interval: only 5.2 effective blocks where 8 are "
		      "needed.");
	/* Counted, but no order could be trusted. */
	sample.estimates[0].known = false;
	strcpy(sample.estimates[0].interval.reason, "no order passes");
	says(&sample, "no order passes");
	sample.cells[0].known = false;
	sample.cells[0].interval = sample.cells[1].interval;
	strcpy(sample.cells[0].interval.reason, "no symbols to divide by");
	says(&sample, "no symbols to divide by");
	sample.views[0].floor.known = false;
	says(&sample, "Floor: none.");
	sample.survey.finished = false;
	says(&sample, "UNFINISHED");
	sample.survey.corpora[0].outcome = OUTCOME_FAILED;
	strcpy(sample.survey.corpora[0].reason, "");
	says(&sample, "FAILED: ");
	says_not(&sample, "Estimates");
	sample_analysis_release(&sample);
}

static void bare_corpora_are_reported(void **state)
{
	struct sample_analysis sample;
	struct corpus_view *view = &sample.views[0];

	(void)state;
	sample_analysis_init(&sample);
	view->cell_count = 0;
	says_not(&sample, "How far each codec");
	view->order_count = 0;
	says_not(&sample, "Trusted order");
	says(&sample, "No trusted order: at order 2");
	view->estimate_count = 0;
	says_not(&sample, "Estimates");
	view->cell_count = 3;
	memset(sample.cells, 0, sizeof(sample.cells));
	for (size_t i = 0; i < 3; i++)
		sample.cells[i].fact = &sample.survey.corpora[0].cells[2];
	says(&sample, "How far each codec");
	says_not(&sample, "What each codec costs");
	sample_analysis_release(&sample);
}

/* The longest of everything that a ledger lets in. */
static void make_endless(struct sample_analysis *sample)
{
	struct corpus_fact *corpus = &sample->survey.corpora[0];

	memset(corpus->name, 0x1b, LEDGER_NAME_BYTES - 1);
	memset(corpus->licence, 'L', LEDGER_NAME_BYTES - 1);
	memset(sample->survey.set_name, '\n', LEDGER_NAME_BYTES - 1);
	memset(sample->survey.program, 'P', LEDGER_NAME_BYTES - 1);
	corpus->n = UINT64_MAX;
	for (size_t i = 0; i < 3; i++) {
		memset(corpus->methods[i].method, 'm', LEDGER_NAME_BYTES - 1);
		memset(corpus->cells[i].key.codec, 0x07, CELL_NAME_BYTES - 1);
		memset(corpus->cells[i].key.level, '9', CELL_NAME_BYTES - 1);
		corpus->cells[i].page_bytes = SIZE_MAX;
		corpus->cells[i].facts.bytes = UINT64_MAX;
		corpus->cells[i].facts.encode_memory_bytes = UINT64_MAX;
		sample->cells[i].bits_per_symbol = 31234.5;
		sample->cells[i].gap_percent = 1e300;
		sample->cells[i].encode_mb_per_s = 1e9;
		sample->cells[i].gap_interval.high = 1e9;
	}
	sample->orders[1].distinct = UINT64_MAX;
	sample->orders[1].H = 1e6;
	memset(sample->views[0].floor.held_by, 'h', 3 * CELL_NAME_BYTES - 1);
	memset(sample->views[0].trust_limit, 't', ANALYSIS_REASON_BYTES - 1);
}

static void lines_fit_the_page(void **state)
{
	struct sample_analysis sample;
	char *text, *line;

	(void)state;
	sample_analysis_init(&sample);
	make_endless(&sample);
	text = sample_report(report_find("text"), &sample.analysis);
	for (line = strtok(text, "\n"); line; line = strtok(NULL, "\n")) {
		if (strlen(line) > PAGE_COLUMNS)
			fail_msg("%zu columns: %s", strlen(line), line);
		for (const char *c = line; *c; c++)
			assert_true(*c >= ' ' && *c <= '~');
	}
	memory_free(text);
	sample_analysis_release(&sample);
}

/* A table of GitHub's Markdown needs equal cells in each of its lines. */
static unsigned pipes(const char *line)
{
	unsigned count = 0;

	for (const char *c = line; *c; c++)
		count += *c == '|' && (c == line || c[-1] != '\\');
	return count;
}

static void markdown_tables_hold(void **state)
{
	struct sample_analysis sample;
	char *text, *line;
	unsigned cells = 0;
	unsigned tables = 0;

	(void)state;
	sample_analysis_init(&sample);
	strcpy(sample.survey.corpora[0].name, "a|b\n|c\n# <script>alert()");
	strcpy(sample.survey.corpora[0].cells[1].key.codec, "x|y`");
	text = sample_report(report_find("markdown"), &sample.analysis);
	/* CommonMark 0.30, section 2.4: an escaped bracket opens no tag. */
	assert_non_null(strstr(text, "\\<script\\>"));
	assert_null(strstr(text, " <script"));
	for (line = strtok(text, "\n"); line; line = strtok(NULL, "\n")) {
		if (line[0] != '|') {
			cells = 0;
			continue;
		}
		if (cells == 0) {
			cells = pipes(line);
			tables++;
		}
		assert_int_equal(pipes(line), cells);
	}
	/* strtok skips empty lines, but words stand between two tables. */
	assert_int_equal(tables, 8);
	memory_free(text);
	sample_analysis_release(&sample);
}

static void every_format_tells_of_a_full_disk(void **state)
{
	struct sample_analysis sample;

	(void)state;
	sample_analysis_init(&sample);
	for (size_t i = 0; report_formats[i]; i++) {
		struct reason why = {""};
		FILE *full = fopen("/dev/full", "w");

		assert_non_null(full);
		assert_int_equal(
			report_formats[i]->write(full, &sample.analysis, &why),
			STATUS_IO);
		assert_non_null(strstr(why.text, "No space left"));
		(void)fclose(full);
	}
	sample_analysis_release(&sample);
}

static void formats_are_found_by_name(void **state)
{
	static const char *const names[] = {"table", "text", "markdown", "csv",
					    "json"};

	(void)state;
	for (size_t i = 0; i < 5; i++) {
		assert_non_null(report_find(names[i]));
		assert_string_equal(report_find(names[i])->name, names[i]);
	}
	assert_null(report_find("tide"));
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(the_page_answers),
		cmocka_unit_test(honest_failures_are_told),
		cmocka_unit_test(what_is_unknown_says_why),
		cmocka_unit_test(bare_corpora_are_reported),
		cmocka_unit_test(lines_fit_the_page),
		cmocka_unit_test(markdown_tables_hold),
		cmocka_unit_test(every_format_tells_of_a_full_disk),
		cmocka_unit_test(formats_are_found_by_name),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
