#include "ledger/statement.h"

#include <string.h>

#include "base/memory.h"

enum status ledger_memory(const struct ledger *ledger, enum status status,
			  struct reason *why)
{
	if (status != STATUS_NO_MEMORY)
		return status;
	return reason_give(why, status, "%s: out of memory", ledger->path);
}

static enum status fail_reading(struct ledger *ledger, int code,
				struct reason *why)
{
	switch (code & 0xff) {
	case SQLITE_NOTADB:
		return reason_give(why, STATUS_LEDGER,
				   "%s: not a ledger: name a file that "
				   "'ratefloor survey' wrote, or a new one",
				   ledger->path);
	case SQLITE_CORRUPT:
		return reason_give(
			why, STATUS_LEDGER,
			"%s: damaged (%s): restore a copy, or survey "
			"into a new file",
			ledger->path, sqlite3_errmsg(ledger->database));
	case SQLITE_BUSY:
	case SQLITE_LOCKED:
		return reason_give(why, STATUS_LEDGER,
				   "%s: in use by another process: wait for it "
				   "to end, or survey into another file",
				   ledger->path);
	default:
		return reason_give(why, STATUS_LEDGER, "%s: %s", ledger->path,
				   sqlite3_errmsg(ledger->database));
	}
}

enum status ledger_fail(struct ledger *ledger, int code, struct reason *why)
{
	int number = sqlite3_system_errno(ledger->database);

	switch (code & 0xff) {
	case SQLITE_NOMEM:
		return ledger_memory(ledger, STATUS_NO_MEMORY, why);
	case SQLITE_FULL:
		return reason_give(why, STATUS_IO,
				   "%s: disk full: rows written before are "
				   "kept; free some space, then --resume",
				   ledger->path);
	case SQLITE_READONLY:
	case SQLITE_CANTOPEN:
	case SQLITE_PERM:
		return reason_give(
			why, STATUS_IO,
			"%s: cannot be written here (%s): the folder "
			"must exist and be writable",
			ledger->path, number ? strerror(number) : "read-only");
	case SQLITE_IOERR:
		return reason_give(
			why, STATUS_IO,
			"%s: %s (%s): rows written before are kept",
			ledger->path, sqlite3_errmsg(ledger->database),
			number ? strerror(number) : "no cause given");
	case SQLITE_CONSTRAINT:
		return reason_give(why, STATUS_BAD_USAGE,
				   "%s: row refused (%s): its survey, corpus "
				   "and cell must be there before it",
				   ledger->path,
				   sqlite3_errmsg(ledger->database));
	default:
		return fail_reading(ledger, code, why);
	}
}

enum status ledger_execute(struct ledger *ledger, const char *sql,
			   struct reason *why)
{
	int code = sqlite3_exec(ledger->database, sql, NULL, NULL, NULL);

	if (code != SQLITE_OK)
		return ledger_fail(ledger, code, why);
	return STATUS_OK;
}

void ledger_undo(struct ledger *ledger, const char *sql)
{
	(void)sqlite3_exec(ledger->database, sql, NULL, NULL, NULL);
}

enum status ledger_transact(struct ledger *ledger,
			    enum status (*work)(struct ledger *ledger,
						const void *context,
						struct reason *why),
			    const void *context, struct reason *why)
{
	enum status status;

	/* Immediate: a second writer waits here and not half-way through. */
	TRY(ledger_execute(ledger, "BEGIN IMMEDIATE", why));
	status = work(ledger, context, why);
	if (status == STATUS_OK)
		status = ledger_execute(ledger, "COMMIT", why);
	/* A full disk has rolled back by itself; the error is not news. */
	if (status != STATUS_OK)
		ledger_undo(ledger, "ROLLBACK");
	return status;
}

void query_init(struct query *query, struct ledger *ledger, const char *sql,
		const char *what, struct reason *why)
{
	size_t i = 0;
	int code;

	*query = (struct query){.ledger = ledger, .what = what, .why = why};
	while (i < STATEMENTS_MAX - 1 && ledger->sql[i] &&
	       ledger->sql[i] != sql)
		i++;
	if (ledger->sql[i] != sql) {
		(void)sqlite3_finalize(ledger->statements[i]);
		ledger->sql[i] = NULL;
		code = sqlite3_prepare_v3(ledger->database, sql, -1,
					  SQLITE_PREPARE_PERSISTENT,
					  &ledger->statements[i], NULL);
		if (code != SQLITE_OK) {
			query->status = ledger_fail(ledger, code, why);
			return;
		}
		ledger->sql[i] = sql;
	}
	query->statement = ledger->statements[i];
	query->next = 1;
}

static void bound(struct query *query, int code)
{
	if (code != SQLITE_OK)
		query->status = ledger_fail(query->ledger, code, query->why);
	query->next++;
}

void query_bind_int(struct query *query, int64_t value)
{
	if (query->status == STATUS_OK)
		bound(query,
		      sqlite3_bind_int64(query->statement, query->next, value));
}

void query_bind_count(struct query *query, uint64_t value)
{
	query_bind_int(query, (int64_t)value);
}

void query_bind_real(struct query *query, double value)
{
	if (query->status == STATUS_OK)
		bound(query, sqlite3_bind_double(query->statement, query->next,
						 value));
}

void query_bind_text(struct query *query, const char *text)
{
	if (query->status == STATUS_OK)
		bound(query, sqlite3_bind_text(query->statement, query->next,
					       text ? text : "", -1,
					       SQLITE_TRANSIENT));
}

void query_bind_null(struct query *query)
{
	if (query->status == STATUS_OK)
		bound(query, sqlite3_bind_null(query->statement, query->next));
}

void query_bind_blocks(struct query *query, const void *words, size_t count)
{
	const uint64_t *word = words;
	uint8_t *bytes = NULL;

	if (query->status != STATUS_OK)
		return;
	query->status = ledger_memory(query->ledger,
				      memory_new(count, 8, &bytes), query->why);
	if (query->status != STATUS_OK)
		return;
	for (size_t i = 0; i < count; i++) {
		for (unsigned b = 0; b < 8; b++)
			bytes[8 * i + b] = (uint8_t)(word[i] >> 8 * b);
	}
	bound(query, sqlite3_bind_blob64(query->statement, query->next, bytes,
					 8 * count, SQLITE_TRANSIENT));
	memory_free(bytes);
}

enum status query_run(struct query *query)
{
	bool row = true;

	while (row && query->status == STATUS_OK) {
		enum status status = query_step(query, &row);

		if (status != STATUS_OK)
			break;
	}
	return query_end(query);
}

enum status query_step(struct query *query, bool *row)
{
	int code;

	if (query->status != STATUS_OK)
		return query->status;
	code = sqlite3_step(query->statement);
	query->next = 0;
	if (code == SQLITE_ROW || code == SQLITE_DONE)
		*row = code == SQLITE_ROW;
	else
		query->status = ledger_fail(query->ledger, code, query->why);
	return query->status;
}

enum status query_end(struct query *query)
{
	if (query->statement) {
		(void)sqlite3_reset(query->statement);
		(void)sqlite3_clear_bindings(query->statement);
	}
	return query->status;
}
