/* Does everything that goes into a ledger come out of it again? */
#include "ledger/ledger.h"

#include "base/memory.h"
#include "support/ledger_file.h"
#include "support/near.h"
#include "support/sample_survey.h"

#include <string.h>

static void every_field_comes_back(void **state)
{
	struct scratch *scratch = *state;
	struct ledger *ledger = scratch_open(scratch, LEDGER_WRITE);
	struct survey wanted, got = {0};
	struct reason why = {""};

	sample_survey(&wanted);
	assert_int_equal(sample_write(ledger, &wanted, true), 1);
	ledger_close(ledger);
	ledger = scratch_open(scratch, LEDGER_READ);
	assert_int_equal(ledger_read(ledger, 1, &got, &why), STATUS_OK);
	assert_true(got.finished);
	assert_int_equal(got.id, 1);
	sample_assert_equal(&got, &wanted);
	survey_release(&got);
	survey_release(&wanted);
	ledger_close(ledger);
}

static void writing_again_replaces(void **state)
{
	struct ledger *ledger = scratch_open(*state, LEDGER_WRITE);
	struct survey wanted, got = {0};
	struct corpus_fact *corpus;
	struct reason why = {""};

	sample_survey(&wanted);
	sample_write(ledger, &wanted, true);
	corpus = &wanted.corpora[0];
	corpus->n = 4194301;
	corpus->methods[0].findings.note_count = 1;
	corpus->methods[0].findings.series[1].costs.block_q16[7] = -9;
	corpus->cells[0].facts.bytes = 12345;
	corpus->cells[0].timed = false;
	corpus->cells[0].timing = (struct cell_timing){0};
	/* The corpus comes last: rows under it must survive that. */
	assert_int_equal(ledger_put_method(ledger, 1, corpus->name, 0,
					   &corpus->methods[0], &why),
			 STATUS_OK);
	assert_int_equal(ledger_put_cell(ledger, 1, corpus->name, 0,
					 &corpus->cells[0], &why),
			 STATUS_OK);
	assert_int_equal(ledger_put_corpus(ledger, 1, 0, corpus, &why),
			 STATUS_OK);
	assert_int_equal(ledger_read(ledger, 0, &got, &why), STATUS_OK);
	sample_assert_equal(&got, &wanted);
	survey_release(&got);
	survey_release(&wanted);
	ledger_close(ledger);
}

static void timing_comes_later(void **state)
{
	struct ledger *ledger = scratch_open(*state, LEDGER_WRITE);
	struct cell_timing timing = {.rounds = 3, .encode_cpu_seconds = 0.385};
	struct survey wanted, got = {0};
	struct corpus_fact *corpus;
	struct reason why = {""};

	sample_survey(&wanted);
	sample_write(ledger, &wanted, true);
	corpus = &wanted.corpora[0];
	for (int i = 0; i < 2; i++) {
		timing.decode_spread += 0.25;
		assert_int_equal(ledger_put_timing(ledger, 1, corpus->name,
						   &corpus->cells[1].key,
						   &timing, &why),
				 STATUS_OK);
	}
	corpus->cells[1].timed = true;
	corpus->cells[1].timing = timing;
	assert_int_equal(ledger_read(ledger, 1, &got, &why), STATUS_OK);
	sample_assert_equal(&got, &wanted);
	survey_release(&got);
	survey_release(&wanted);
	ledger_close(ledger);
}

static void place_orders_rows(void **state)
{
	struct ledger *ledger = scratch_open(*state, LEDGER_WRITE);
	struct survey wanted, got = {0};
	struct corpus_fact *corpus;
	struct reason why = {""};

	sample_survey(&wanted);
	assert_int_equal(ledger_begin(ledger, &wanted, "p", &why), STATUS_OK);
	for (size_t i = 2; i > 0; i--)
		assert_int_equal(ledger_put_corpus(ledger, wanted.id, i - 1,
						   &wanted.corpora[i - 1],
						   &why),
				 STATUS_OK);
	corpus = &wanted.corpora[0];
	for (size_t i = 3; i > 0; i--) {
		assert_int_equal(
			ledger_put_method(ledger, wanted.id, corpus->name,
					  i - 1, &corpus->methods[i - 1], &why),
			STATUS_OK);
		assert_int_equal(ledger_put_cell(ledger, wanted.id,
						 corpus->name, i - 1,
						 &corpus->cells[i - 1], &why),
				 STATUS_OK);
	}
	assert_int_equal(ledger_read(ledger, 0, &got, &why), STATUS_OK);
	assert_false(got.finished);
	sample_assert_equal(&got, &wanted);
	survey_release(&got);
	survey_release(&wanted);
	ledger_close(ledger);
}

static void unfinished_surveys_are_resumed(void **state)
{
	struct ledger *ledger = scratch_open(*state, LEDGER_WRITE);
	struct survey survey;
	struct reason why = {""};
	int64_t id = -7;

	sample_survey(&survey);
	assert_int_equal(ledger_resume(ledger, SAMPLE_PLAN, &id, &why),
			 STATUS_NOT_FOUND);
	assert_non_null(strstr(why.text, "--resume"));
	assert_int_equal(id, -7);
	assert_int_equal(ledger_begin(ledger, &survey, "a", &why), STATUS_OK);
	assert_int_equal(ledger_begin(ledger, &survey, "b", &why), STATUS_OK);
	assert_int_equal(ledger_begin(ledger, &survey, "a", &why), STATUS_OK);
	assert_int_equal(survey.id, 3);
	assert_int_equal(ledger_resume(ledger, "a", &id, &why), STATUS_OK);
	assert_int_equal(id, 3);
	assert_int_equal(ledger_finish(ledger, 3, &why), STATUS_OK);
	assert_int_equal(ledger_resume(ledger, "a", &id, &why), STATUS_OK);
	assert_int_equal(id, 1);
	assert_int_equal(ledger_resume(ledger, "b", &id, &why), STATUS_OK);
	assert_int_equal(id, 2);
	assert_int_equal(ledger_finish(ledger, 9, &why), STATUS_NOT_FOUND);
	survey_release(&survey);
	ledger_close(ledger);
}

static void surveys_are_listed_by_id(void **state)
{
	struct ledger *ledger = scratch_open(*state, LEDGER_WRITE);
	struct survey survey, got = {.id = 42};
	struct reason why = {""};
	int64_t *ids = NULL;
	size_t count = 9;

	assert_int_equal(ledger_list(ledger, &ids, &count, &why), STATUS_OK);
	assert_int_equal(count, 0);
	memory_free(ids);
	assert_int_equal(ledger_read(ledger, 0, &got, &why), STATUS_NOT_FOUND);
	sample_survey(&survey);
	sample_write(ledger, &survey, true);
	sample_write(ledger, &survey, false);
	assert_int_equal(ledger_list(ledger, &ids, &count, &why), STATUS_OK);
	assert_int_equal(count, 2);
	assert_int_equal(ids[0], 1);
	assert_int_equal(ids[1], 2);
	memory_free(ids);
	assert_int_equal(ledger_read(ledger, 7, &got, &why), STATUS_NOT_FOUND);
	assert_non_null(strstr(why.text, "no survey 7; it holds: 1 2"));
	assert_int_equal(got.id, 42);
	survey_release(&survey);
	ledger_close(ledger);
}

static void rows_need_what_they_belong_to(void **state)
{
	struct ledger *ledger = scratch_open(*state, LEDGER_WRITE);
	struct survey survey, got = {0};
	struct corpus_fact *corpus;
	struct reason why = {""};

	sample_survey(&survey);
	corpus = &survey.corpora[0];
	assert_int_equal(ledger_put_corpus(ledger, 5, 0, corpus, &why),
			 STATUS_BAD_USAGE);
	assert_int_equal(ledger_begin(ledger, &survey, "a", &why), STATUS_OK);
	assert_int_equal(ledger_put_cell(ledger, 1, corpus->name, 0,
					 &corpus->cells[0], &why),
			 STATUS_BAD_USAGE);
	assert_int_equal(ledger_put_method(ledger, 1, corpus->name, 0,
					   &corpus->methods[0], &why),
			 STATUS_BAD_USAGE);
	assert_int_equal(ledger_put_corpus(ledger, 1, 0, corpus, &why),
			 STATUS_OK);
	assert_int_equal(ledger_put_timing(ledger, 1, corpus->name,
					   &corpus->cells[0].key,
					   &corpus->cells[0].timing, &why),
			 STATUS_BAD_USAGE);
	assert_int_equal(ledger_read(ledger, 0, &got, &why), STATUS_OK);
	assert_int_equal(got.corpora[0].cell_count, 0);
	assert_int_equal(got.corpora[0].method_count, 0);
	survey_release(&got);
	survey_release(&survey);
	ledger_close(ledger);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		scratch_test(every_field_comes_back),
		scratch_test(writing_again_replaces),
		scratch_test(timing_comes_later),
		scratch_test(place_orders_rows),
		scratch_test(unfinished_surveys_are_resumed),
		scratch_test(surveys_are_listed_by_id),
		scratch_test(rows_need_what_they_belong_to),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
