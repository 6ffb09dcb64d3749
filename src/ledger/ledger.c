#include "ledger/ledger.h"

#include <errno.h>
#include <stdio.h>
#include <string.h>
#include <unistd.h>

#include "base/memory.h"
#include "ledger/schema.h"
#include "ledger/statement.h"

/* How long a lock of another process is waited for: a row takes far less. */
#define BUSY_MILLISECONDS 2000

/*
 * "./" keeps names such as ":memory:" and "file:x" from meaning anything to
 * SQLite.
 */
static enum status path_copy(const char *path, char **copy)
{
	const char *prefix = path[0] == '/' ? "" : "./";
	size_t before = strlen(prefix);
	size_t length = strlen(path);

	TRY(memory_new(before + length + 1, 1, copy));
	memcpy(*copy, prefix, before);
	memcpy(*copy + before, path, length + 1);
	return STATUS_OK;
}

/* Not opened: the words depend on what is there, not on SQLite's code. */
static enum status fail_open(struct ledger *ledger, enum ledger_mode mode,
			     int code, struct reason *why)
{
	if (code == SQLITE_CANTOPEN && access(ledger->path, F_OK) != 0 &&
	    mode == LEDGER_READ)
		return reason_give(why, STATUS_NOT_FOUND,
				   "%s: there is no such ledger: 'ratefloor "
				   "survey SET' writes one",
				   ledger->path);
	return ledger_fail(ledger, code, why);
}

static enum status connect(struct ledger *ledger, enum ledger_mode mode,
			   int flags, struct reason *why)
{
	int code = sqlite3_open_v2(ledger->path, &ledger->database,
				   flags | SQLITE_OPEN_EXRESCODE, NULL);

	if (!ledger->database)
		return reason_give(why, STATUS_NO_MEMORY, "%s: out of memory",
				   ledger->path);
	if (code != SQLITE_OK)
		return fail_open(ledger, mode, code & 0xff, why);
	(void)sqlite3_busy_timeout(ledger->database, BUSY_MILLISECONDS);
	/* A ledger may come from a stranger: its schema runs no code. */
	(void)sqlite3_db_config(ledger->database, SQLITE_DBCONFIG_DEFENSIVE, 1,
				(int *)NULL);
	(void)sqlite3_db_config(ledger->database,
				SQLITE_DBCONFIG_TRUSTED_SCHEMA, 0, (int *)NULL);
	(void)sqlite3_db_config(ledger->database, SQLITE_DBCONFIG_ENABLE_FKEY,
				1, (int *)NULL);
	return STATUS_OK;
}

/*
 * Rows go to a log beside the file without waiting for the disk, so that jobs
 * do not queue for it: a kill loses no row that was put, a power cut the last
 * ones, and neither leaves half of one. Where the file system cannot do it,
 * every row waits.
 */
static void start_log(struct ledger *ledger)
{
	ledger->logged = sqlite3_exec(ledger->database,
				      "PRAGMA journal_mode = WAL;"
				      "PRAGMA synchronous = NORMAL",
				      NULL, NULL, NULL) == SQLITE_OK;
}

/* One file again, on the disk, that can be read where nothing can be written.
 * Another reader may keep it from that; then the next writer does it. */
static void end_log(struct ledger *ledger)
{
	if (ledger->logged)
		(void)sqlite3_exec(ledger->database,
				   "PRAGMA synchronous = FULL;"
				   "PRAGMA journal_mode = DELETE",
				   NULL, NULL, NULL);
}

static void disconnect(struct ledger *ledger)
{
	for (size_t i = 0; i < STATEMENTS_MAX; i++) {
		(void)sqlite3_finalize(ledger->statements[i]);
		ledger->statements[i] = NULL;
		ledger->sql[i] = NULL;
	}
	end_log(ledger);
	(void)sqlite3_close(ledger->database);
	ledger->database = NULL;
}

static int read_number(struct ledger *ledger, const char *pragma,
		       int64_t *number)
{
	sqlite3_stmt *statement = NULL;
	int code = sqlite3_prepare_v2(ledger->database, pragma, -1, &statement,
				      NULL);

	if (code == SQLITE_OK)
		code = sqlite3_step(statement);
	if (code == SQLITE_ROW) {
		*number = sqlite3_column_int64(statement, 0);
		code = SQLITE_OK;
	}
	(void)sqlite3_finalize(statement);
	return code;
}

/* *empty: a file of no bytes, which becomes a ledger when written to. */
static enum status identify(struct ledger *ledger, bool *empty,
			    struct reason *why)
{
	int64_t application = 0;
	int64_t schema = 0;
	int64_t pages = 0;
	int code = read_number(ledger, "PRAGMA application_id", &application);

	if (code == SQLITE_OK)
		code = read_number(ledger, "PRAGMA user_version", &schema);
	if (code == SQLITE_OK)
		code = read_number(ledger, "PRAGMA page_count", &pages);
	if (code != SQLITE_OK)
		return ledger_fail(ledger, code, why);
	*empty = pages == 0;
	if (*empty)
		return STATUS_OK;
	if (application != SCHEMA_APPLICATION_ID)
		return ledger_fail(ledger, SQLITE_NOTADB, why);
	if (schema > SCHEMA_NUMBER)
		return reason_give(why, STATUS_LEDGER,
				   "%s: written with ledger schema %lld, this "
				   "ratefloor knows up to %d: use a newer "
				   "ratefloor, or another file",
				   ledger->path, (long long)schema,
				   SCHEMA_NUMBER);
	if (schema >= 1 && schema < SCHEMA_NUMBER)
		return reason_give(why, STATUS_LEDGER,
				   "%s: written with ledger schema %lld, this "
				   "ratefloor keeps %d: survey into a new file",
				   ledger->path, (long long)schema,
				   SCHEMA_NUMBER);
	if (schema < 1)
		return reason_give(why, STATUS_LEDGER,
				   "%s: damaged: its schema number is %lld; "
				   "restore a copy, or survey into a new file",
				   ledger->path, (long long)schema);
	return STATUS_OK;
}

static enum status create_tables(struct ledger *ledger, const void *context,
				 struct reason *why)
{
	char marks[96];
	int64_t tables = 0;
	int code = read_number(ledger, "SELECT count(*) FROM sqlite_schema",
			       &tables);

	(void)context;
	if (code != SQLITE_OK)
		return ledger_fail(ledger, code, why);
	/* Another process may have made them while this one waited. */
	if (tables > 0)
		return STATUS_OK;
	for (size_t i = 0; schema_sql[i]; i++)
		TRY(ledger_execute(ledger, schema_sql[i], why));
	(void)snprintf(marks, sizeof(marks),
		       "PRAGMA application_id = %d; PRAGMA user_version = %d",
		       SCHEMA_APPLICATION_ID, SCHEMA_NUMBER);
	return ledger_execute(ledger, marks, why);
}

static enum status open_to_read(struct ledger *ledger, struct reason *why)
{
	bool empty = false;
	int64_t number = 0;
	int code;

	TRY(connect(ledger, LEDGER_READ, SQLITE_OPEN_READONLY, why));
	code = read_number(ledger, "PRAGMA schema_version", &number);
	/*
	 * A process was killed while it wrote: the half-written row is taken
	 * back by whoever opens the file next, which takes a right to write.
	 */
	if (code == SQLITE_READONLY_ROLLBACK || code == SQLITE_BUSY_RECOVERY) {
		disconnect(ledger);
		TRY(connect(ledger, LEDGER_READ, SQLITE_OPEN_READWRITE, why));
		code = read_number(ledger, "PRAGMA schema_version", &number);
		if (code == SQLITE_OK)
			TRY(ledger_execute(ledger, "PRAGMA query_only = 1",
					   why));
	}
	if (code != SQLITE_OK)
		return ledger_fail(ledger, code, why);
	TRY(identify(ledger, &empty, why));
	if (empty)
		return ledger_fail(ledger, SQLITE_NOTADB, why);
	return STATUS_OK;
}

/*
 * Found out before hours of measuring: beside the file stands a rollback
 * journal while a row is written, so that its folder must be writable too.
 */
static enum status check_writable(struct ledger *ledger, struct reason *why)
{
	/* There is a slash: path_copy saw to that. */
	size_t length = (size_t)(strrchr(ledger->path, '/') + 1 - ledger->path);
	char *folder = NULL;
	enum status status = STATUS_OK;

	TRY(ledger_memory(ledger, memory_new(length + 1, 1, &folder), why));
	memcpy(folder, ledger->path, length);
	folder[length] = '\0';
	if (access(folder, W_OK) != 0)
		status = reason_give(why, STATUS_IO,
				     "%s: folder %s: %s: a ledger needs a "
				     "folder that exists and is writable",
				     ledger->path, folder, strerror(errno));
	else if (access(ledger->path, F_OK) == 0 &&
		 access(ledger->path, W_OK) != 0)
		status = reason_give(why, STATUS_IO,
				     "%s: %s: the ledger must be writable",
				     ledger->path, strerror(errno));
	memory_free(folder);
	return status;
}

static enum status open_to_write(struct ledger *ledger, struct reason *why)
{
	bool existed = access(ledger->path, F_OK) == 0;
	bool empty = false;
	enum status status;

	TRY(check_writable(ledger, why));
	TRY(connect(ledger, LEDGER_WRITE,
		    SQLITE_OPEN_READWRITE | SQLITE_OPEN_CREATE, why));
	TRY(identify(ledger, &empty, why));
	status = STATUS_OK;
	if (empty) {
		status = ledger_transact(ledger, create_tables, NULL, why);
		if (status == STATUS_OK)
			status = identify(ledger, &empty, why);
		if (status != STATUS_OK && !existed)
			(void)unlink(ledger->path);
	}
	if (status == STATUS_OK)
		start_log(ledger);
	return status;
}

enum status ledger_open(const char *path, enum ledger_mode mode,
			struct ledger **ledger, struct reason *why)
{
	struct ledger *made = NULL;
	enum status status = memory_new_zeroed(1, sizeof(*made), &made);

	if (status == STATUS_OK)
		status = path_copy(path, &made->path);
	if (status != STATUS_OK) {
		memory_free(made);
		return reason_give(why, status, "%s: out of memory", path);
	}
	status = mode == LEDGER_READ ? open_to_read(made, why)
				     : open_to_write(made, why);
	if (status != STATUS_OK) {
		ledger_close(made);
		return status;
	}
	*ledger = made;
	return STATUS_OK;
}

void ledger_close(struct ledger *ledger)
{
	if (!ledger)
		return;
	disconnect(ledger);
	memory_free(ledger->path);
	memory_free(ledger);
}
