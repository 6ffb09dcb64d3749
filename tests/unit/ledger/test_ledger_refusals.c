/* Is every file that cannot be used refused with words, and left alone? */
#include "ledger/ledger.h"

#include "base/memory.h"
#include "ledger/statement.h"
#include "support/ledger_file.h"
#include "support/sample_survey.h"

#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <sys/wait.h>
#include <unistd.h>

/* Opens, expects the status, the words, and the file byte for byte as it was.
 */
static void refused(const char *path, enum ledger_mode mode, enum status wanted,
		    const char *words)
{
	struct ledger *ledger = NULL;
	struct reason why = {""};
	unsigned char *before, *after;
	size_t length = 0;
	size_t length_after = 0;

	before = scratch_bytes(path, &length);
	assert_int_equal(ledger_open(path, mode, &ledger, &why), wanted);
	assert_null(ledger);
	if (!strstr(why.text, words))
		fail_msg("'%s' is not in: %s", words, why.text);
	assert_non_null(strstr(why.text, path));
	after = scratch_bytes(path, &length_after);
	assert_int_equal(length, length_after);
	assert_memory_equal(before, after, length);
	memory_free(before);
	memory_free(after);
}

static void no_file_to_read(void **state)
{
	struct scratch *scratch = *state;
	struct ledger *ledger = NULL;
	struct reason why = {""};

	assert_int_equal(ledger_open(scratch->path, LEDGER_READ, &ledger, &why),
			 STATUS_NOT_FOUND);
	assert_non_null(strstr(why.text, "no such ledger"));
	assert_int_equal(scratch_files(scratch), 0);
}

static void other_files_are_left_alone(void **state)
{
	struct scratch *scratch = *state;
	static const char text[] = "station,lat,lon\nNorth Spit,0.4,1.1\n";

	scratch_write(scratch->path, text, sizeof(text) - 1);
	refused(scratch->path, LEDGER_READ, STATUS_LEDGER, "not a ledger");
	refused(scratch->path, LEDGER_WRITE, STATUS_LEDGER, "not a ledger");
	assert_int_equal(scratch_files(scratch), 1);
}

static void other_databases_are_left_alone(void **state)
{
	struct scratch *scratch = *state;

	scratch_sql(scratch->path, "CREATE TABLE tide (height REAL)");
	refused(scratch->path, LEDGER_READ, STATUS_LEDGER, "not a ledger");
	refused(scratch->path, LEDGER_WRITE, STATUS_LEDGER, "not a ledger");
	assert_int_equal(scratch_files(scratch), 1);
}

static void an_empty_file_is_new(void **state)
{
	struct scratch *scratch = *state;
	struct ledger *ledger;

	scratch_write(scratch->path, "", 0);
	refused(scratch->path, LEDGER_READ, STATUS_LEDGER, "not a ledger");
	ledger = scratch_open(scratch, LEDGER_WRITE);
	ledger_close(ledger);
	ledger = scratch_open(scratch, LEDGER_READ);
	ledger_close(ledger);
}

static void newer_schemas_are_named(void **state)
{
	struct scratch *scratch = *state;

	ledger_close(scratch_open(scratch, LEDGER_WRITE));
	scratch_sql(scratch->path, "PRAGMA user_version = 7");
	refused(scratch->path, LEDGER_WRITE, STATUS_LEDGER,
		"schema 7, this ratefloor knows up to 3");
	refused(scratch->path, LEDGER_READ, STATUS_LEDGER, "newer ratefloor");
	scratch_sql(scratch->path, "PRAGMA user_version = 1");
	refused(scratch->path, LEDGER_READ, STATUS_LEDGER,
		"schema 1, this ratefloor keeps 3: survey into a new file");
	scratch_sql(scratch->path, "PRAGMA user_version = 0");
	refused(scratch->path, LEDGER_READ, STATUS_LEDGER, "damaged");
}

static void folders_that_cannot_hold_one(void **state)
{
	struct scratch *scratch = *state;
	struct ledger *ledger = NULL;
	struct reason why = {""};
	char path[96];

	/* Not even root makes a file below /proc. */
	assert_int_equal(
		ledger_open("/proc/marrow.ledger", LEDGER_WRITE, &ledger, &why),
		STATUS_IO);
	assert_non_null(strstr(why.text, "/proc/marrow.ledger"));
	assert_non_null(strstr(why.text, "folder"));
	scratch_path(scratch, "absent/x", path);
	assert_int_equal(ledger_open(path, LEDGER_WRITE, &ledger, &why),
			 STATUS_IO);
	assert_non_null(strstr(why.text, "No such file"));
	assert_int_equal(
		ledger_open(scratch->folder, LEDGER_WRITE, &ledger, &why),
		STATUS_IO);
	assert_int_equal(
		ledger_open(scratch->folder, LEDGER_READ, &ledger, &why),
		STATUS_IO);
	assert_null(ledger);
}

/*
 * Runs work in a child without root's rights; 0 when all went well. A child's
 * failed assertion must not run the parent's other tests: it only counts.
 */
static int in_child(int (*work)(const struct scratch *scratch),
		    const struct scratch *scratch, int give_up_root)
{
	int result = 0;
	pid_t child = fork();

	assert_true(child >= 0);
	if (child == 0) {
		if (give_up_root && geteuid() == 0 && setuid(65534) != 0)
			_exit(99);
		_exit(work(scratch));
	}
	assert_int_equal(waitpid(child, &result, 0), child);
	return WIFEXITED(result) ? WEXITSTATUS(result) : 98;
}

static int read_but_not_write(const struct scratch *scratch)
{
	struct ledger *ledger = NULL;
	struct survey survey = {0};
	struct reason why = {""};

	if (ledger_open(scratch->path, LEDGER_WRITE, &ledger, &why) !=
	    STATUS_IO)
		return 1;
	if (!strstr(why.text, "Permission denied"))
		return 2;
	if (ledger_open(scratch->path, LEDGER_READ, &ledger, &why) != STATUS_OK)
		return 3;
	if (ledger_read(ledger, 0, &survey, &why) != STATUS_OK)
		return 4;
	if (survey.corpus_count != 2)
		return 5;
	survey_release(&survey);
	ledger_close(ledger);
	return 0;
}

static void a_read_only_folder_can_be_read(void **state)
{
	struct scratch *scratch = *state;
	struct ledger *ledger = scratch_open(scratch, LEDGER_WRITE);
	struct survey survey;
	int result;

	sample_survey(&survey);
	sample_write(ledger, &survey, true);
	survey_release(&survey);
	ledger_close(ledger);
	assert_int_equal(chmod(scratch->path, 0444), 0);
	assert_int_equal(chmod(scratch->folder, 0555), 0);
	result = in_child(read_but_not_write, scratch, 1);
	assert_int_equal(chmod(scratch->folder, 0755), 0);
	assert_int_equal(result, 0);
	assert_int_equal(scratch_files(scratch), 1);
}

static void a_lock_is_waited_for_shortly(void **state)
{
	struct scratch *scratch = *state;
	struct ledger *ledger = scratch_open(scratch, LEDGER_WRITE);
	struct survey survey;
	struct reason why = {""};
	sqlite3 *other = NULL;

	sample_survey(&survey);
	assert_int_equal(sqlite3_open(scratch->path, &other), SQLITE_OK);
	assert_int_equal(
		sqlite3_exec(other, "BEGIN EXCLUSIVE", NULL, NULL, NULL),
		SQLITE_OK);
	(void)sqlite3_busy_timeout(ledger->database, 50);
	assert_int_equal(ledger_begin(ledger, &survey, "p", &why),
			 STATUS_LEDGER);
	assert_non_null(strstr(why.text, "in use by another process"));
	assert_int_equal(sqlite3_exec(other, "ROLLBACK", NULL, NULL, NULL),
			 SQLITE_OK);
	assert_int_equal(ledger_begin(ledger, &survey, "p", &why), STATUS_OK);
	assert_int_equal(sqlite3_close(other), SQLITE_OK);
	survey_release(&survey);
	ledger_close(ledger);
}

static void a_reader_does_not_write(void **state)
{
	struct scratch *scratch = *state;
	struct survey survey;
	struct reason why = {""};
	struct ledger *ledger;

	ledger_close(scratch_open(scratch, LEDGER_WRITE));
	ledger = scratch_open(scratch, LEDGER_READ);
	sample_survey(&survey);
	assert_int_equal(ledger_begin(ledger, &survey, "p", &why), STATUS_IO);
	assert_int_equal(survey.id, 0);
	survey_release(&survey);
	ledger_close(ledger);
}

/* Rows until the disk is full; the reason and what is left are checked. */
static void fill(struct ledger *ledger, struct survey *survey,
		 enum status *last, struct reason *why)
{
	struct corpus_fact *corpus = &survey->corpora[0];

	*last = ledger_begin(ledger, survey, "p", why);
	if (*last == STATUS_OK)
		*last = ledger_put_corpus(ledger, survey->id, 0, corpus, why);
	for (unsigned i = 0; i < 3000 && *last == STATUS_OK; i++) {
		(void)snprintf(corpus->cells[0].key.level, CELL_NAME_BYTES,
			       "%u", i);
		*last = ledger_put_cell(ledger, survey->id, corpus->name, i,
					&corpus->cells[0], why);
	}
}

static void a_full_disk_keeps_whole_rows(void **state)
{
	struct scratch *scratch = *state;
	struct ledger *ledger = scratch_open(scratch, LEDGER_WRITE);
	struct survey survey, got = {0};
	struct reason why = {""};
	enum status last = STATUS_OK;
	size_t kept;

	/* SQLite's own limit gives the code of a full disk. */
	assert_int_equal(sqlite3_exec(ledger->database,
				      "PRAGMA max_page_count = 60", NULL, NULL,
				      NULL),
			 SQLITE_OK);
	sample_survey(&survey);
	fill(ledger, &survey, &last, &why);
	assert_int_equal(last, STATUS_IO);
	assert_non_null(strstr(why.text, "disk full"));
	ledger_close(ledger);
	ledger = scratch_open(scratch, LEDGER_READ);
	assert_int_equal(ledger_read(ledger, 0, &got, &why), STATUS_OK);
	kept = got.corpora[0].cell_count;
	assert_true(kept > 10 && kept < 1000);
	for (size_t i = 0; i < kept; i++)
		assert_int_equal(got.corpora[0].cells[i].facts.flushed.blocks,
				 100);
	survey_release(&got);
	survey_release(&survey);
	ledger_close(ledger);
	assert_int_equal(scratch_files(scratch), 1);
}

static int write_past_the_limit(const struct scratch *scratch)
{
	struct rlimit limit = {200000, 200000};
	struct ledger *ledger = NULL;
	struct survey survey;
	struct reason why = {""};
	enum status last = STATUS_OK;

	sample_survey(&survey);
	if (signal(SIGXFSZ, SIG_IGN) == SIG_ERR ||
	    setrlimit(RLIMIT_FSIZE, &limit) != 0)
		return 1;
	if (ledger_open(scratch->path, LEDGER_WRITE, &ledger, &why) !=
	    STATUS_OK)
		return 2;
	fill(ledger, &survey, &last, &why);
	ledger_close(ledger);
	survey_release(&survey);
	if (last != STATUS_IO)
		return 3;
	return strstr(why.text, "rows written before are kept") ? 0 : 4;
}

static void a_file_size_limit_keeps_whole_rows(void **state)
{
	struct scratch *scratch = *state;
	struct survey got = {0};
	struct reason why = {""};
	struct ledger *ledger;

	assert_int_equal(in_child(write_past_the_limit, scratch, 0), 0);
	ledger = scratch_open(scratch, LEDGER_READ);
	assert_int_equal(ledger_read(ledger, 0, &got, &why), STATUS_OK);
	assert_true(got.corpora[0].cell_count > 10);
	survey_release(&got);
	ledger_close(ledger);
}

static int create_without_room(const struct scratch *scratch)
{
	struct rlimit limit = {4096, 4096};
	struct ledger *ledger = NULL;
	struct reason why = {""};

	if (signal(SIGXFSZ, SIG_IGN) == SIG_ERR ||
	    setrlimit(RLIMIT_FSIZE, &limit) != 0)
		return 1;
	if (ledger_open(scratch->path, LEDGER_WRITE, &ledger, &why) !=
	    STATUS_IO)
		return 2;
	return ledger ? 3 : 0;
}

static void nothing_is_left_of_one_not_made(void **state)
{
	struct scratch *scratch = *state;

	assert_int_equal(in_child(create_without_room, scratch, 0), 0);
	assert_int_equal(scratch_files(scratch), 0);
}

static void make_sample(const struct scratch *scratch)
{
	struct ledger *ledger = scratch_open(scratch, LEDGER_WRITE);
	struct survey survey;

	sample_survey(&survey);
	sample_write(ledger, &survey, true);
	survey_release(&survey);
	ledger_close(ledger);
}

/* Reads the scratch ledger, which SQL has spoilt, and wants these words. */
static void spoilt(const struct scratch *scratch, const char *sql,
		   const char *words)
{
	size_t length = 0;
	unsigned char *bytes = scratch_bytes(scratch->path, &length);
	struct survey got = {0};
	struct reason why = {""};
	struct ledger *ledger;

	scratch_sql(scratch->path, sql);
	ledger = scratch_open(scratch, LEDGER_READ);
	assert_int_equal(ledger_read(ledger, 0, &got, &why), STATUS_LEDGER);
	if (!strstr(why.text, words))
		fail_msg("'%s' is not in: %s", words, why.text);
	assert_null(got.corpora);
	ledger_close(ledger);
	scratch_write(scratch->path, bytes, length);
	memory_free(bytes);
}

static void spoilt_rows_are_named(void **state)
{
	const struct scratch *scratch = *state;

	make_sample(scratch);
	spoilt(scratch, "UPDATE series SET block_q16 = zeroblob(799)",
	       "series, column block_q16: wrong number of blocks");
	spoilt(scratch, "UPDATE series SET block_q16 = zeroblob(792)",
	       "series, column block_q16: wrong number of blocks");
	spoilt(scratch, "UPDATE cell SET block_q16 = zeroblob(8)",
	       "cell, column block_q16: wrong number of blocks");
	spoilt(scratch, "UPDATE corpus SET block_bytes = zeroblob(792)",
	       "not as many blocks");
	spoilt(scratch,
	       "UPDATE corpus SET block_bytes = zeroblob(8000000),"
	       " block_symbols = zeroblob(8000000)",
	       "wrong number of blocks");
	spoilt(scratch, "UPDATE corpus SET symbols = 'barnacle'",
	       "column symbols: no such kind of symbol");
	spoilt(scratch,
	       "UPDATE corpus SET name = printf('%.*c', 64, 'x') WHERE n",
	       "column name: too long");
	spoilt(scratch, "UPDATE method SET reason = 'a' || char(0) || 'b'",
	       "column reason: not a text");
	spoilt(scratch,
	       "PRAGMA ignore_check_constraints = 1;"
	       "UPDATE cell SET outcome = 'maybe'",
	       "column outcome: no such outcome");
	spoilt(scratch, "UPDATE cell SET lossless = 2",
	       "column lossless: out of range");
	spoilt(scratch, "UPDATE survey SET gap_limit = 9e999",
	       "column gap_limit: not a finite number");
	spoilt(scratch, "DELETE FROM gram WHERE part = 1", "missing");
	spoilt(scratch, "DELETE FROM series WHERE place = 0", "missing");
	spoilt(scratch, "DROP TABLE note", "note");
}

/*
 * Any byte may be wrong: the ledger is refused or read, but nothing crashes
 * (the sanitizers watch) and the file is not written to.
 */
static void flipped_bytes_do_no_harm(void **state)
{
	struct scratch *scratch = *state;
	unsigned char *bytes;
	size_t length = 0;
	unsigned refusals = 0;

	make_sample(scratch);
	bytes = scratch_bytes(scratch->path, &length);
	for (size_t at = 0; at < length; at += at < 128 ? 1 : 211) {
		struct ledger *ledger = NULL;
		struct survey got = {0};
		struct reason why = {""};
		enum status status;

		bytes[at] ^= 0x55;
		scratch_write(scratch->path, bytes, length);
		status = ledger_open(scratch->path, LEDGER_READ, &ledger, &why);
		if (status == STATUS_OK)
			status = ledger_read(ledger, 0, &got, &why);
		if (status != STATUS_OK) {
			refusals++;
			assert_true(why.text[0] != '\0');
		}
		survey_release(&got);
		ledger_close(ledger);
		bytes[at] ^= 0x55;
	}
	assert_true(refusals > 20);
	memory_free(bytes);
}

static void cut_files_are_refused(void **state)
{
	struct scratch *scratch = *state;
	unsigned char *bytes;
	size_t length = 0;

	make_sample(scratch);
	bytes = scratch_bytes(scratch->path, &length);
	for (size_t kept = 50; kept < length; kept += length / 9) {
		struct ledger *ledger = NULL;
		struct survey got = {0};
		struct reason why = {""};
		enum status status;

		scratch_write(scratch->path, bytes, kept);
		status = ledger_open(scratch->path, LEDGER_READ, &ledger, &why);
		if (status == STATUS_OK)
			status = ledger_read(ledger, 0, &got, &why);
		assert_int_equal(status, STATUS_LEDGER);
		ledger_close(ledger);
	}
	memory_free(bytes);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		scratch_test(no_file_to_read),
		scratch_test(other_files_are_left_alone),
		scratch_test(other_databases_are_left_alone),
		scratch_test(an_empty_file_is_new),
		scratch_test(newer_schemas_are_named),
		scratch_test(folders_that_cannot_hold_one),
		scratch_test(a_read_only_folder_can_be_read),
		scratch_test(a_lock_is_waited_for_shortly),
		scratch_test(a_reader_does_not_write),
		scratch_test(a_full_disk_keeps_whole_rows),
		scratch_test(a_file_size_limit_keeps_whole_rows),
		scratch_test(nothing_is_left_of_one_not_made),
		scratch_test(spoilt_rows_are_named),
		scratch_test(flipped_bytes_do_no_harm),
		scratch_test(cut_files_are_refused),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
