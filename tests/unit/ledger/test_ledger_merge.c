/* Do parts make one survey, and are those that do not fit refused? */
#include "ledger/ledger.h"

#include "base/memory.h"
#include "support/ledger_file.h"
#include "support/sample_survey.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* Writes a part that holds cells first .. last - 1 of the first corpus. */
static void write_part(const char *path, struct survey *survey, size_t first,
		       size_t last)
{
	const struct corpus_fact *corpus = &survey->corpora[0];
	struct ledger *ledger = NULL;
	struct reason why = {""};

	assert_int_equal(ledger_open(path, LEDGER_WRITE, &ledger, &why),
			 STATUS_OK);
	assert_int_equal(ledger_begin(ledger, survey, SAMPLE_PLAN, &why),
			 STATUS_OK);
	assert_int_equal(ledger_put_corpus(ledger, survey->id, 0, corpus, &why),
			 STATUS_OK);
	for (size_t i = first; i < last; i++) {
		assert_int_equal(ledger_put_cell(ledger, survey->id,
						 corpus->name, i,
						 &corpus->cells[i], &why),
				 STATUS_OK);
		assert_int_equal(ledger_put_method(ledger, survey->id,
						   corpus->name, i,
						   &corpus->methods[i], &why),
				 STATUS_OK);
	}
	if (first == 0)
		assert_int_equal(ledger_put_corpus(ledger, survey->id, 1,
						   &survey->corpora[1], &why),
				 STATUS_OK);
	assert_int_equal(ledger_finish(ledger, survey->id, &why), STATUS_OK);
	ledger_close(ledger);
}

static void merge_is(const struct scratch *scratch, const char *const *parts,
		     enum status wanted, const char *words)
{
	struct ledger *ledger = scratch_open(scratch, LEDGER_WRITE);
	struct reason why = {""};
	int64_t id = -1;
	int64_t *ids = NULL;
	size_t count = 0;

	assert_int_equal(ledger_merge(ledger, parts, 2, &id, &why), wanted);
	if (!strstr(why.text, words))
		fail_msg("'%s' is not in: %s", words, why.text);
	assert_int_equal(ledger_list(ledger, &ids, &count, &why), STATUS_OK);
	assert_int_equal(count, wanted == STATUS_OK);
	memory_free(ids);
	if (wanted == STATUS_OK)
		assert_int_equal(id, 1);
	else
		assert_int_equal(id, -1);
	ledger_close(ledger);
}

static void parts_make_the_whole(void **state)
{
	struct scratch *scratch = *state;
	char one[96], two[96];
	const char *parts[] = {one, two};
	struct survey wanted, got = {0};
	struct reason why = {""};
	struct ledger *ledger;

	scratch_path(scratch, "one", one);
	scratch_path(scratch, "two", two);
	sample_survey(&wanted);
	/* Cell 1 lies in both; the second has an older survey before it. */
	write_part(one, &wanted, 0, 2);
	write_part(two, &wanted, 2, 3);
	write_part(two, &wanted, 1, 3);
	assert_int_equal(wanted.id, 2);
	merge_is(scratch, parts, STATUS_OK, "");
	ledger = scratch_open(scratch, LEDGER_READ);
	assert_int_equal(ledger_read(ledger, 0, &got, &why), STATUS_OK);
	assert_true(got.finished);
	sample_assert_equal(&got, &wanted);
	survey_release(&got);
	survey_release(&wanted);
	ledger_close(ledger);
}

static void cells_that_differ_are_named(void **state)
{
	struct scratch *scratch = *state;
	char one[96], two[96];
	const char *parts[] = {one, two};
	struct survey survey;

	scratch_path(scratch, "one", one);
	scratch_path(scratch, "two", two);
	sample_survey(&survey);
	write_part(one, &survey, 0, 2);
	survey.corpora[0].cells[1].facts.bytes++;
	write_part(two, &survey, 1, 3);
	merge_is(scratch, parts, STATUS_MISMATCH,
		 "cell gauge-frames house  4096 differs");
	survey_release(&survey);
}

static void block_bits_that_differ_are_named(void **state)
{
	struct scratch *scratch = *state;
	char one[96], two[96];
	const char *parts[] = {one, two};
	struct survey survey;

	scratch_path(scratch, "one", one);
	scratch_path(scratch, "two", two);
	sample_survey(&survey);
	write_part(one, &survey, 0, 2);
	survey.corpora[0].methods[0].findings.series[0].costs.block_q16[99]++;
	write_part(two, &survey, 0, 1);
	merge_is(scratch, parts, STATUS_MISMATCH,
		 "series gauge-frames ngram 0 differs");
	survey_release(&survey);
}

static void plans_that_differ_are_named(void **state)
{
	struct scratch *scratch = *state;
	char one[96], two[96], three[96];
	const char *parts[] = {one, two};
	struct survey survey;

	scratch_path(scratch, "one", one);
	scratch_path(scratch, "two", two);
	scratch_path(scratch, "three", three);
	sample_survey(&survey);
	write_part(one, &survey, 0, 2);
	survey.seed++;
	write_part(two, &survey, 2, 3);
	merge_is(scratch, parts, STATUS_MISMATCH, "seed differs");
	survey.seed--;
	strcpy(survey.libraries[1].version, "5.6.0");
	write_part(three, &survey, 2, 3);
	parts[1] = three;
	merge_is(scratch, parts, STATUS_MISMATCH, "library versions differs");
	survey_release(&survey);
}

static void unfit_parts_are_refused(void **state)
{
	struct scratch *scratch = *state;
	char one[96], two[96];
	const char *parts[] = {one, two};
	struct survey survey;
	struct ledger *ledger = NULL;
	struct reason why = {""};

	scratch_path(scratch, "one", one);
	scratch_path(scratch, "two", two);
	sample_survey(&survey);
	write_part(one, &survey, 0, 2);
	merge_is(scratch, parts, STATUS_NOT_FOUND, two);
	scratch_write(two, "tide tables", 11);
	merge_is(scratch, parts, STATUS_LEDGER, "not a ledger");
	scratch_write(two, "", 0);
	assert_int_equal(ledger_open(two, LEDGER_WRITE, &ledger, &why),
			 STATUS_OK);
	assert_int_equal(ledger_begin(ledger, &survey, SAMPLE_PLAN, &why),
			 STATUS_OK);
	ledger_close(ledger);
	merge_is(scratch, parts, STATUS_MISMATCH, "not finished");
	survey_release(&survey);
}

static void a_ledger_is_no_part_of_itself(void **state)
{
	struct scratch *scratch = *state;
	const char *parts[] = {scratch->path};
	struct survey survey;
	struct ledger *ledger;
	struct reason why = {""};
	int64_t id = 0;

	sample_survey(&survey);
	write_part(scratch->path, &survey, 0, 2);
	ledger = scratch_open(scratch, LEDGER_WRITE);
	assert_int_equal(ledger_merge(ledger, parts, 1, &id, &why),
			 STATUS_BAD_USAGE);
	assert_int_equal(ledger_merge(ledger, parts, 0, &id, &why),
			 STATUS_BAD_USAGE);
	survey_release(&survey);
	ledger_close(ledger);
}

/* Runs the script on a ledger and hands out what it prints. */
static char *facts_of(const char *path, const char *out)
{
	char command[256];
	unsigned char *bytes;
	size_t length = 0;

	(void)snprintf(command, sizeof(command), "scripts/facts %s > %s", path,
		       out);
	assert_int_equal(system(command), 0);
	bytes = scratch_bytes(out, &length);
	assert_true(length > 1000);
	assert_int_equal(memory_resize(&bytes, length + 1, 1), STATUS_OK);
	bytes[length] = '\0';
	return (char *)bytes;
}

/* Order of writing, times and older surveys leave no trace in the facts. */
static void equal_facts_print_alike(void **state)
{
	struct scratch *scratch = *state;
	char one[96], two[96], out[96];
	const char *parts[] = {one, two};
	struct survey survey;
	struct ledger *ledger;
	char *whole, *merged;

	scratch_path(scratch, "one", one);
	scratch_path(scratch, "two", two);
	scratch_path(scratch, "out", out);
	sample_survey(&survey);
	write_part(two, &survey, 1, 3);
	survey.corpora[0].cells[0].timing.encode_cpu_seconds += 0.3;
	write_part(one, &survey, 0, 1);
	merge_is(scratch, parts, STATUS_OK, "");
	merged = facts_of(scratch->path, out);
	ledger = scratch_open(scratch, LEDGER_WRITE);
	sample_write(ledger, &survey, false);
	ledger_close(ledger);
	whole = facts_of(scratch->path, out);
	assert_string_equal(whole, merged);
	assert_non_null(strstr(whole, "5000000017"));
	assert_null(strstr(whole, "2.685"));
	memory_free(whole);
	memory_free(merged);
	survey_release(&survey);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		scratch_test(parts_make_the_whole),
		scratch_test(cells_that_differ_are_named),
		scratch_test(block_bits_that_differ_are_named),
		scratch_test(plans_that_differ_are_named),
		scratch_test(unfit_parts_are_refused),
		scratch_test(a_ledger_is_no_part_of_itself),
		scratch_test(equal_facts_print_alike),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
