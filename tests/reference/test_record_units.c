/*
 * Which unit compares two formats of one table? 200,000 flights as JSON and as
 * columns (Arrow); skipped where they are not fetched. Sizes measured with
 * another program: liblzma 5.4.1 at 9e, a percent otherwise.
 */
#include "codec/codec.h"

#include "support/fetched.h"
#include "support/near.h"
#include "support/tiny_survey.h"

#include <stdlib.h>
#include <string.h>

#define RECORDS 200000

static struct cell_row row_of(const char *name, double packed_bytes)
{
	const struct symbol_rules rules = {.kind = SYMBOL_BYTE,
					   .record_count = RECORDS};
	const struct setting_words words = {"9e", NULL, NULL, NULL};
	struct fetched file = fetched_read(name, 10000000);
	struct codec_setting setting;
	struct sequence sequence;
	struct cuts none = {0};
	struct survey survey;
	struct analysis analysis;
	struct cell_row row;
	struct reason why;

	if (!file.bytes)
		skip();
	assert_int_equal(
		setting_parse(codec_find("xz"), &words, &setting, &why),
		STATUS_OK);
	assert_int_equal(sequence_init(&sequence,
				       (struct slice){file.bytes, file.length},
				       &rules, &why),
			 STATUS_OK);
	tiny_survey(&survey, 100, 64);
	survey.corpora[0].n = sequence.n;
	survey.corpora[0].canonical_bytes = sequence.canonical_bytes;
	survey.corpora[0].records = sequence.records;
	assert_int_equal(
		cell_measure(codec_find("xz"), &setting, 0, &sequence, &none,
			     &tiny_cell(&survey, "xz", "9e", 0, 0)->facts,
			     &why),
		STATUS_OK);
	tiny_analyse(&survey, &analysis);
	row = analysis.corpora[0].cells[0];
	assert_near((double)row.fact->facts.bytes, packed_bytes,
		    0.01 * packed_bytes);
	row.fact = NULL;
	analysis_release(&analysis);
	survey_release(&survey);
	sequence_release(&sequence);
	free(file.bytes);
	return row;
}

static void bits_per_byte_mislead_and_bits_per_record_do_not(void **state)
{
	struct cell_row columns, text;

	(void)state;
	columns = row_of("flights_200k.arrow", 442972);
	text = row_of("flights_200k.json", 705552);
	assert_near(columns.bits_per_symbol, 2.21, 0.01);
	assert_near(text.bits_per_symbol, 0.57, 0.01);
	assert_true(columns.has_record && text.has_record);
	assert_near(columns.bits_per_record, 8 * 442972.0 / RECORDS, 0.2);
	assert_near(text.bits_per_record, 8 * 705552.0 / RECORDS, 0.3);
	assert_true(columns.bits_per_record < text.bits_per_record);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(
			bits_per_byte_mislead_and_bits_per_record_do_not),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
