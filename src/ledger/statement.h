/* Prepared statements of an open ledger; for the files of this room only. */
#ifndef LEDGER_STATEMENT_H
#define LEDGER_STATEMENT_H

#include "base/status.h"
#include "ledger/ledger.h"

#include <sqlite3.h>
#include <stddef.h>
#include <stdint.h>

#define STATEMENTS_MAX 40

struct ledger {
	sqlite3 *database; /* owned */
	char *path;        /* owned; as given, for messages */
	bool logged;       /* rows go to a log beside the file first */
	/* Owned; kept by the address of their SQL, which is a literal. */
	const char *sql[STATEMENTS_MAX];
	sqlite3_stmt *statements[STATEMENTS_MAX];
};

/*
 * One run of a statement. Parameters are bound and columns are read from left
 * to right; the first thing that goes wrong sticks in status, so that a row is
 * one plain list. what names the row in messages.
 */
struct query {
	struct ledger *ledger;
	sqlite3_stmt *statement; /* borrowed from the ledger */
	const char *what;
	int next; /* parameter or column */
	enum status status;
	struct reason *why;
};

/* Gives "PATH: out of memory" its status; any other status passes through. */
enum status ledger_memory(const struct ledger *ledger, enum status status,
			  struct reason *why);
/* Turns SQLite's code into a status and words; code may be extended. */
enum status ledger_fail(struct ledger *ledger, int code, struct reason *why);
/* Runs SQL without parameters or rows. */
MUST_USE enum status ledger_execute(struct ledger *ledger, const char *sql,
				    struct reason *why);
/* As ledger_execute, on a way out where a second failure is no news. */
void ledger_undo(struct ledger *ledger, const char *sql);
/* Runs work inside one transaction, which is kept only if it succeeds. */
MUST_USE enum status ledger_transact(struct ledger *ledger,
				     enum status (*work)(struct ledger *ledger,
							 const void *context,
							 struct reason *why),
				     const void *context, struct reason *why);

/* Finds or prepares; failures stick in the query. sql must be a literal. */
void query_init(struct query *query, struct ledger *ledger, const char *sql,
		const char *what, struct reason *why);
void query_bind_int(struct query *query, int64_t value);
void query_bind_count(struct query *query, uint64_t value);
void query_bind_real(struct query *query, double value);
void query_bind_text(struct query *query, const char *text);
void query_bind_null(struct query *query);
/* Block numbers as a little-endian blob; count 0 is an empty one. */
void query_bind_blocks(struct query *query, const void *words, size_t count);

/* Runs to the end, rows ignored, and resets. */
MUST_USE enum status query_run(struct query *query);
/* Steps to the next row: *row false at the end. Starts at column 0 again. */
MUST_USE enum status query_step(struct query *query, bool *row);
/* Resets; hands out the status. Must follow a query that was stepped. */
enum status query_end(struct query *query);

int64_t query_int(struct query *query);
uint64_t query_count(struct query *query);
/* A count that must lie between 0 and limit. */
size_t query_small(struct query *query, size_t limit);
double query_real(struct query *query);
bool query_is_null(struct query *query); /* stays on the column */
void query_text(struct query *query, char *text, size_t room);
void query_text_new(struct query *query, char **text);
/*
 * Block numbers into a new array (NULL where there are none). wanted: how many
 * there must be unless none, or SIZE_MAX for any up to CUTS_BLOCKS_MAX.
 */
void query_blocks(struct query *query, size_t wanted, void *words,
		  size_t *count);
/* Marks the row damaged: words say what is wrong with it. */
void query_damaged(struct query *query, const char *words);

#endif
