/* Does the page say which lever wins what, and where a dictionary hurts? */
#include "report/report.h"

#include "base/memory.h"
#include "support/near.h"
#include "support/sample_analysis.h"
#include "support/sample_survey.h"

#include <stdio.h>
#include <string.h>

/* Whether a report holds the words, line breaks read as spaces. */
static bool holds(const struct sample_analysis *sample, const char *format,
		  const char *words)
{
	char *text = sample_report(report_find(format), &sample->analysis);
	bool found;

	for (char *c = text; *c; c++) {
		if (*c == '\n')
			*c = ' ';
	}
	found = strstr(text, words) != NULL;
	memory_free(text);
	return found;
}

static void each_term_has_its_lever(void **state)
{
	struct sample_analysis sample;

	(void)state;
	sample_analysis_init(&sample);
	assert_true(holds(&sample, "text",
			  "lever: larger pages, or a trained "
			  "dictionary"));
	assert_true(holds(&sample, "text", "lever: another container"));
	assert_true(holds(&sample, "text", "lever: several pages in one unit"));
	/* Restart, .25, is the largest term of the sample. */
	assert_true(holds(&sample, "text", "larger pages 0.2500"));
	assert_true(holds(&sample, "text",
			  "Which lever recovers most: for 1 "
			  "of 1 cells it is larger pages"));
	assert_true(holds(&sample, "text", "[0.2401,0.2599]"));
	assert_true(holds(&sample, "text", "+0.0005"));
	sample.cells[0].stack.family = 0.75;
	assert_true(holds(&sample, "text", "other codec 0.7500"));
	sample_analysis_release(&sample);
}

static void without_storage_there_is_no_such_column(void **state)
{
	struct sample_analysis sample;

	(void)state;
	sample_analysis_init(&sample);
	sample.cells[0].stack.has_storage = false;
	assert_false(holds(&sample, "text", "storage"));
	sample_analysis_release(&sample);
}

static void a_dictionary_that_hurts_is_told(void **state)
{
	struct sample_analysis sample;
	struct dictionary_row *row;

	(void)state;
	sample_analysis_init(&sample);
	row = &sample.cells[1].dictionary;
	assert_true(holds(&sample, "text", "HURTS"));
	/* Saves .21 - .0315; 8,388,608 bytes x .21 / .1785. */
	assert_true(holds(&sample, "text",
			  "hurts: it saves 0.1785 bits a symbol on the pages "
			  "and takes 0.2100 itself. On data like this it would "
			  "pay from about 9,868,950 bytes of input on."));
	assert_true(holds(&sample, "text",
			  "warm: the reference that has read "
			  "the other half"));
	row->won = -0.5;
	assert_true(holds(&sample, "text", "even before its own bytes"));
	row->won = 0.5;
	row->won_interval.low = 0.4;
	row->won_interval.high = 0.6;
	assert_true(holds(&sample, "text", "helps"));
	assert_false(holds(&sample, "text", "HURTS"));
	row->won_interval.low = -0.1;
	assert_true(holds(&sample, "text", "undecided"));
	row->warm_known = false;
	assert_true(holds(&sample, "text", "did not measure it"));
	row->has = false;
	assert_false(holds(&sample, "text", "dictionaries win"));
	sample_analysis_release(&sample);
}

static void noisy_times_are_marked(void **state)
{
	struct sample_analysis sample;

	(void)state;
	sample_analysis_init(&sample);
	assert_false(holds(&sample, "text", "~3.52/67.1"));
	sample.cells[0].timing_noisy = true;
	assert_true(holds(&sample, "text", "~3.52/67.1"));
	assert_true(holds(&sample, "table", "~3.52/67.1"));
	assert_true(holds(&sample, "json", "\"timing_noisy\": true"));
	sample_analysis_release(&sample);
}

/* Two names that differ at their ends must not look alike. */
static void long_names_are_not_cut(void **state)
{
	static const char *const formats[] = {"text", "table"};
	struct sample_analysis sample;
	struct cell_fact *cells;

	(void)state;
	sample_analysis_init(&sample);
	cells = sample.survey.corpora[0].cells;
	strcpy(cells[0].key.codec, "zstd");
	strcpy(cells[0].key.level, "19 checksum threads:2 dict:64K");
	strcpy(cells[1].key.codec, "zstd");
	strcpy(cells[1].key.level, "19 checksum threads:2 dict:16K");
	for (size_t i = 0; i < 2; i++) {
		assert_true(holds(&sample, formats[i],
				  "zstd 19 checksum threads:2 dict:64K"));
		assert_true(holds(&sample, formats[i],
				  "zstd 19 checksum threads:2 dict:16K"));
	}
	sample_analysis_release(&sample);
}

static void records_stand_in_the_table(void **state)
{
	struct sample_analysis sample;

	(void)state;
	sample_analysis_init(&sample);
	assert_true(holds(&sample, "table", "22.8"));
	sample.survey.corpora[0].records = 0;
	sample.cells[0].has_record = false;
	assert_false(holds(&sample, "table", "22.8"));
	sample_analysis_release(&sample);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(each_term_has_its_lever),
		cmocka_unit_test(without_storage_there_is_no_such_column),
		cmocka_unit_test(a_dictionary_that_hurts_is_told),
		cmocka_unit_test(noisy_times_are_marked),
		cmocka_unit_test(long_names_are_not_cut),
		cmocka_unit_test(records_stand_in_the_table),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
