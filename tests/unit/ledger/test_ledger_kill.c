/* Does a kill at any moment leave only whole rows, and a file that opens? */
#include "ledger/ledger.h"

#include "base/memory.h"
#include "base/random.h"
#include "support/ledger_file.h"
#include "support/sample_survey.h"

#include <signal.h>
#include <sqlite3.h>
#include <stdio.h>
#include <string.h>
#include <sys/wait.h>
#include <time.h>
#include <unistd.h>

#define KILLS 25
/* A slow disk writes few rows between two kills: then more of them. */
#define KILLS_MAX 250
#define ROWS_WANTED 30
#define PLAN "night"

/* Rows of ngram under new page sizes for ever: each one 12 rows of tables. */
static int write_on(const struct scratch *scratch, size_t from)
{
	struct ledger *ledger = NULL;
	struct survey survey;
	struct corpus_fact *corpus;
	struct reason why = {""};
	int64_t id = 0;

	sample_survey(&survey);
	corpus = &survey.corpora[0];
	if (ledger_open(scratch->path, LEDGER_WRITE, &ledger, &why) !=
	    STATUS_OK)
		return 1;
	if (ledger_resume(ledger, PLAN, &id, &why) != STATUS_OK) {
		if (ledger_begin(ledger, &survey, PLAN, &why) != STATUS_OK)
			return 2;
		id = survey.id;
	}
	if (ledger_put_corpus(ledger, id, 0, corpus, &why) != STATUS_OK)
		return 3;
	for (size_t i = from;; i++) {
		corpus->methods[0].page_bytes = i;
		if (ledger_put_method(ledger, id, corpus->name, i,
				      &corpus->methods[0], &why) != STATUS_OK)
			return 4;
	}
}

static void kill_one(const struct scratch *scratch, size_t from,
		     long nanoseconds)
{
	const struct timespec wait = {0, nanoseconds};
	int result = 0;
	pid_t child = fork();

	assert_true(child >= 0);
	if (child == 0)
		_exit(write_on(scratch, from));
	(void)nanosleep(&wait, NULL);
	assert_int_equal(kill(child, SIGKILL), 0);
	assert_int_equal(waitpid(child, &result, 0), child);
	assert_true(WIFSIGNALED(result));
}

/* Methods held, each checked to be whole. */
static size_t whole_rows(const struct scratch *scratch, size_t least)
{
	struct ledger *ledger = NULL;
	struct survey got = {0};
	struct reason why = {""};
	size_t rows = 0;
	enum status status;

	status = ledger_open(scratch->path, LEDGER_READ, &ledger, &why);
	/* Killed before there was a ledger at all. */
	if (status == STATUS_NOT_FOUND || (status == STATUS_LEDGER && !least))
		return 0;
	assert_int_equal(status, STATUS_OK);
	status = ledger_read(ledger, 0, &got, &why);
	if (status == STATUS_OK && got.corpus_count == 1) {
		const struct corpus_fact *corpus = &got.corpora[0];

		rows = corpus->method_count;
		for (size_t i = 0; i < rows; i++) {
			const struct findings *findings =
				&corpus->methods[i].findings;

			assert_int_equal(corpus->methods[i].page_bytes, i);
			assert_int_equal(findings->series_count, 3);
			assert_int_equal(findings->order_count, 2);
			assert_int_equal(findings->note_count, 2);
		}
	}
	assert_true(status == STATUS_OK || status == STATUS_NOT_FOUND);
	survey_release(&got);
	ledger_close(ledger);
	return rows;
}

static void kills_leave_whole_rows(void **state)
{
	struct scratch *scratch = *state;
	struct random_stream random;
	struct reason why = {""};
	struct ledger *ledger;
	size_t rows = 0;

	random_init(&random, 20, 26);
	for (unsigned i = 0; i < KILLS || (rows < ROWS_WANTED && i < KILLS_MAX);
	     i++) {
		size_t found;

		kill_one(scratch, rows,
			 1000000 + (long)random_below(&random, 80000000));
		found = whole_rows(scratch, rows);
		/* What was committed before is there for good. */
		assert_true(found >= rows);
		rows = found;
	}
	assert_true(rows >= ROWS_WANTED);
	/* Going on takes the journal of the last kill away. */
	ledger = scratch_open(scratch, LEDGER_WRITE);
	assert_int_equal(ledger_finish(ledger, 1, &why), STATUS_OK);
	ledger_close(ledger);
	assert_int_equal(scratch_files(scratch), 1);
}

/* Killed with half of a large row already in the file itself. */
static int die_half_way(const struct scratch *scratch)
{
	sqlite3 *database = NULL;

	if (sqlite3_open(scratch->path, &database) != SQLITE_OK)
		return 1;
	if (sqlite3_exec(
		    database,
		    "PRAGMA cache_size = 1; BEGIN;"
		    "UPDATE series SET block_q16 = randomblob(800);"
		    "UPDATE corpus SET origin = printf('%.*c', 90000, 'x')",
		    NULL, NULL, NULL) != SQLITE_OK)
		return 2;
	return raise(SIGKILL);
}

static void a_reader_takes_half_a_row_back(void **state)
{
	struct scratch *scratch = *state;
	struct ledger *ledger = scratch_open(scratch, LEDGER_WRITE);
	struct survey wanted, got = {0};
	struct reason why = {""};
	unsigned char *before, *after;
	size_t length = 0;
	size_t length_after = 0;
	int result = 0;
	pid_t child;

	sample_survey(&wanted);
	sample_write(ledger, &wanted, true);
	ledger_close(ledger);
	before = scratch_bytes(scratch->path, &length);
	child = fork();
	assert_true(child >= 0);
	if (child == 0)
		_exit(die_half_way(scratch));
	assert_int_equal(waitpid(child, &result, 0), child);
	assert_true(WIFSIGNALED(result));
	/* Otherwise nothing of the row reached the file: no test at all. */
	after = scratch_bytes(scratch->path, &length_after);
	assert_true(length != length_after ||
		    memcmp(before, after, length) != 0);
	assert_int_equal(scratch_files(scratch), 2);
	ledger = scratch_open(scratch, LEDGER_READ);
	assert_int_equal(ledger_read(ledger, 0, &got, &why), STATUS_OK);
	sample_assert_equal(&got, &wanted);
	assert_int_equal(ledger_begin(ledger, &wanted, "p", &why), STATUS_IO);
	ledger_close(ledger);
	assert_int_equal(scratch_files(scratch), 1);
	survey_release(&got);
	survey_release(&wanted);
	memory_free(before);
	memory_free(after);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		scratch_test(kills_leave_whole_rows),
		scratch_test(a_reader_takes_half_a_row_back),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
