/* Ledger and reports: does every allocation that fails leave things clean? */
#include "faults/inject.h"

#include "ledger/ledger.h"
#include "report/report.h"

#include "support/ledger_file.h"
#include "support/near.h"
#include "support/sample_analysis.h"
#include "support/sample_survey.h"

#include <string.h>

#define MOST 400

/* One ledger on disk, the survey in it, and what is asked of it. */
struct fixture {
	const struct scratch *scratch;
	struct survey survey;
	struct sample_analysis sample;
	const struct report_format *format;
};

static enum status read_survey(void *context)
{
	const struct fixture *fixture = context;
	struct ledger *ledger = NULL;
	struct survey got = {0};
	struct reason why = {""};
	enum status status;

	status =
		ledger_open(fixture->scratch->path, LEDGER_READ, &ledger, &why);
	if (status == STATUS_OK)
		status = ledger_read(ledger, 0, &got, &why);
	if (status == STATUS_OK)
		sample_assert_equal(&got, &fixture->survey);
	else
		assert_non_null(strstr(why.text, "out of memory"));
	survey_release(&got);
	ledger_close(ledger);
	return status;
}

static void reading(void **state)
{
	struct fixture fixture = {.scratch = *state};
	struct ledger *ledger = scratch_open(*state, LEDGER_WRITE);

	sample_survey(&fixture.survey);
	sample_write(ledger, &fixture.survey, true);
	ledger_close(ledger);
	inject_each(read_survey, &fixture, MOST);
	survey_release(&fixture.survey);
}

static enum status write_rows(void *context)
{
	struct fixture *fixture = context;
	const struct corpus_fact *corpus = &fixture->survey.corpora[0];
	struct ledger *ledger = NULL;
	struct reason why = {""};
	enum status status;

	status = ledger_open(fixture->scratch->path, LEDGER_WRITE, &ledger,
			     &why);
	if (status == STATUS_OK)
		status = ledger_begin(ledger, &fixture->survey, "p", &why);
	if (status == STATUS_OK)
		status = ledger_put_corpus(ledger, fixture->survey.id, 0,
					   corpus, &why);
	if (status == STATUS_OK)
		status = ledger_put_method(ledger, fixture->survey.id,
					   corpus->name, 0, &corpus->methods[0],
					   &why);
	if (status == STATUS_OK)
		status = ledger_put_cell(ledger, fixture->survey.id,
					 corpus->name, 0, &corpus->cells[0],
					 &why);
	if (status != STATUS_OK)
		assert_non_null(strstr(why.text, "out of memory"));
	ledger_close(ledger);
	return status;
}

static void writing(void **state)
{
	struct fixture fixture = {.scratch = *state};

	sample_survey(&fixture.survey);
	inject_each(write_rows, &fixture, MOST);
	survey_release(&fixture.survey);
}

static enum status merge_part(void *context)
{
	const struct fixture *fixture = context;
	const char *parts[] = {fixture->scratch->path};
	struct ledger *ledger = NULL;
	struct reason why = {""};
	char path[96];
	int64_t id = 0;
	enum status status;

	scratch_path(fixture->scratch, "whole", path);
	status = ledger_open(path, LEDGER_WRITE, &ledger, &why);
	if (status == STATUS_OK)
		status = ledger_merge(ledger, parts, 1, &id, &why);
	if (status != STATUS_OK)
		assert_non_null(strstr(why.text, "out of memory"));
	ledger_close(ledger);
	return status;
}

static void merging(void **state)
{
	struct fixture fixture = {.scratch = *state};
	struct ledger *ledger = scratch_open(*state, LEDGER_WRITE);

	sample_survey(&fixture.survey);
	sample_write(ledger, &fixture.survey, true);
	ledger_close(ledger);
	inject_each(merge_part, &fixture, MOST);
	survey_release(&fixture.survey);
}

static enum status write_report(void *context)
{
	const struct fixture *fixture = context;
	FILE *out = fopen("/dev/null", "w");
	struct reason why = {""};
	enum status status;

	if (!out)
		return STATUS_NO_MEMORY;
	status = fixture->format->write(out, &fixture->sample.analysis, &why);
	if (status != STATUS_OK)
		assert_non_null(strstr(why.text, "out of memory"));
	(void)fclose(out);
	return status;
}

static void reporting(void **state)
{
	struct fixture fixture;

	(void)state;
	sample_analysis_init(&fixture.sample);
	for (size_t i = 0; report_formats[i]; i++) {
		fixture.format = report_formats[i];
		/* The flat table needs no heap at all. */
		if (strcmp(fixture.format->name, "csv") != 0)
			inject_each(write_report, &fixture, MOST);
	}
	sample_analysis_release(&fixture.sample);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		scratch_test(reading),
		scratch_test(writing),
		scratch_test(merging),
		cmocka_unit_test(reporting),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
