#include "ledger/ledger.h"

#include <stdio.h>
#include <string.h>

#include "base/memory.h"
#include "ledger/statement.h"

/* Tables that parts have rows in, each after the one that it refers to. */
static const struct merged_table {
	const char *name;
	int key_columns; /* after survey: name a row in messages */
	bool is_fact;    /* equal in all parts that hold the row */
} tables[] = {
	{"corpus", 1, true},  {"method", 3, true}, {"series", 3, true},
	{"gram", 3, true},    {"note", 3, true},   {"cell", 4, true},
	{"timing", 4, false},
};

#define TABLE_COUNT (sizeof(tables) / sizeof(tables[0]))
/* The longest statement has the columns of a table three times. */
#define COLUMNS_BYTES 512
#define SQL_BYTES (4 * COLUMNS_BYTES)
#define PLAN_BYTES 256

/* A part's newest survey, and what all parts must have in common. */
struct part {
	const char *path;
	struct survey survey;
	char plan[PLAN_BYTES];
};

struct copy {
	const struct merged_table *table;
	char columns[COLUMNS_BYTES]; /* all but survey, joined by commas */
	int64_t from, to;            /* surveys */
	const char *path;            /* of the part */
};

static enum status read_plan(struct ledger *ledger, struct part *part,
			     struct reason *why)
{
	struct query query;
	bool row = false;

	query_init(&query, ledger, "SELECT plan FROM survey WHERE id = ?",
		   "survey", why);
	query_bind_int(&query, part->survey.id);
	if (query_step(&query, &row) == STATUS_OK && row)
		query_text(&query, part->plan, sizeof(part->plan));
	return query_end(&query);
}

/* Reads the part whole: a damaged one is found before anything is copied. */
static enum status part_init(struct part *part, const char *path,
			     struct reason *why)
{
	struct ledger *ledger = NULL;
	enum status status;

	*part = (struct part){.path = path};
	TRY(ledger_open(path, LEDGER_READ, &ledger, why));
	status = ledger_read(ledger, 0, &part->survey, why);
	if (status == STATUS_OK)
		status = read_plan(ledger, part, why);
	ledger_close(ledger);
	if (status == STATUS_OK && !part->survey.finished)
		status = reason_give(why, STATUS_MISMATCH,
				     "%s: survey %lld is not finished: run it "
				     "to its end with --resume, then merge",
				     path, (long long)part->survey.id);
	return status;
}

static bool same_libraries(const struct survey *a, const struct survey *b)
{
	if (a->library_count != b->library_count)
		return false;
	for (size_t i = 0; i < a->library_count; i++) {
		if (strcmp(a->libraries[i].name, b->libraries[i].name) != 0 ||
		    strcmp(a->libraries[i].version, b->libraries[i].version) !=
			    0)
			return false;
	}
	return true;
}

/* What differs, in words; NULL when the two belong together. */
static const char *plan_difference(const struct part *a, const struct part *b)
{
	if (strcmp(a->survey.set_name, b->survey.set_name) != 0)
		return "set name";
	if (strcmp(a->survey.program, b->survey.program) != 0)
		return "program version";
	if (a->survey.seed != b->survey.seed)
		return "seed";
	if (a->survey.orders != b->survey.orders)
		return "number of orders";
	if (!same_libraries(&a->survey, &b->survey))
		return "library versions";
	if (strcmp(a->plan, b->plan) != 0)
		return "set file or selection";
	return NULL;
}

static enum status check_part(const struct part *first, const struct part *part,
			      struct reason *why)
{
	const char *difference = plan_difference(first, part);

	if (!difference)
		return STATUS_OK;
	return reason_give(why, STATUS_MISMATCH,
			   "%s: %s differs from that of %s: parts must come "
			   "from the same set file, program and options but "
			   "--part",
			   part->path, difference, first->path);
}

/* SQL made here is not a literal, so that it stays out of the kept ones. */
static enum status run_copy(struct ledger *ledger, const struct copy *copy,
			    const char *sql, struct reason *why)
{
	sqlite3_stmt *statement = NULL;
	char row[512] = "";
	size_t used = 0;
	int code =
		sqlite3_prepare_v2(ledger->database, sql, -1, &statement, NULL);

	if (code == SQLITE_OK)
		code = sqlite3_bind_int64(statement, 1, copy->from);
	if (code == SQLITE_OK)
		code = sqlite3_bind_int64(statement, 2, copy->to);
	if (code == SQLITE_OK)
		code = sqlite3_step(statement);
	for (int i = 0; code == SQLITE_ROW && i < copy->table->key_columns;
	     i++) {
		used += (size_t)snprintf(
			row + used, sizeof(row) - used, " %s",
			(const char *)sqlite3_column_text(statement, i));
		if (used >= sizeof(row))
			used = sizeof(row) - 1;
	}
	(void)sqlite3_finalize(statement);
	if (code == SQLITE_ROW)
		return reason_give(why, STATUS_MISMATCH,
				   "%s: %s%s differs from an earlier part: "
				   "measure the parts with the same build and "
				   "data",
				   copy->path, copy->table->name, row);
	return code == SQLITE_DONE ? STATUS_OK : ledger_fail(ledger, code, why);
}

static enum status read_columns(struct ledger *ledger, struct copy *copy,
				struct reason *why)
{
	struct query query;
	bool row = false;

	query_init(&query, ledger,
		   "SELECT group_concat(name) FROM pragma_table_info(?)"
		   " WHERE name <> 'survey'",
		   "table", why);
	query_bind_text(&query, copy->table->name);
	if (query_step(&query, &row) == STATUS_OK && row)
		query_text(&query, copy->columns, sizeof(copy->columns));
	return query_end(&query);
}

static enum status copy_table(struct ledger *ledger, struct copy *copy,
			      struct reason *why)
{
	const char *name = copy->table->name;
	char sql[SQL_BYTES];

	TRY(read_columns(ledger, copy, why));
	(void)snprintf(sql, sizeof(sql),
		       "INSERT OR IGNORE INTO main.%s (survey, %s)"
		       " SELECT ?2, %s FROM part.%s WHERE survey = ?1",
		       name, copy->columns, copy->columns, name);
	TRY(run_copy(ledger, copy, sql, why));
	if (!copy->table->is_fact)
		return STATUS_OK;
	/* A row that was there before stayed: it must be the same one. */
	(void)snprintf(sql, sizeof(sql),
		       "SELECT %s FROM part.%s WHERE survey = ?1 EXCEPT"
		       " SELECT %s FROM main.%s WHERE survey = ?2",
		       copy->columns, name, copy->columns, name);
	return run_copy(ledger, copy, sql, why);
}

static enum status copy_rows(struct ledger *ledger, const void *context,
			     struct reason *why)
{
	struct copy copy = *(const struct copy *)context;

	for (size_t i = 0; i < TABLE_COUNT; i++) {
		copy.table = &tables[i];
		TRY(copy_table(ledger, &copy, why));
	}
	return STATUS_OK;
}

static enum status attach(struct ledger *ledger, const char *path,
			  struct reason *why)
{
	struct query query;
	char *plain = sqlite3_mprintf("%s%s", path[0] == '/' ? "" : "./", path);

	if (!plain)
		return reason_give(why, STATUS_NO_MEMORY, "%s: out of memory",
				   path);
	query_init(&query, ledger, "ATTACH ? AS part", "part", why);
	query_bind_text(&query, plain);
	sqlite3_free(plain);
	TRY(query_run(&query));
	if (strcmp(sqlite3_db_filename(ledger->database, "main"),
		   sqlite3_db_filename(ledger->database, "part")) != 0)
		return STATUS_OK;
	ledger_undo(ledger, "DETACH part");
	return reason_give(why, STATUS_BAD_USAGE,
			   "%s: a ledger cannot be merged into itself", path);
}

static enum status copy_part(struct ledger *ledger, const struct part *part,
			     int64_t id, struct reason *why)
{
	struct copy copy = {
		.from = part->survey.id, .to = id, .path = part->path};
	enum status status;

	TRY(attach(ledger, part->path, why));
	status = ledger_transact(ledger, copy_rows, &copy, why);
	ledger_undo(ledger, "DETACH part");
	return status;
}

static enum status delete_survey(struct ledger *ledger, const void *context,
				 struct reason *why)
{
	struct query query;

	query_init(&query, ledger, "DELETE FROM survey WHERE id = ?", "survey",
		   why);
	query_bind_int(&query, *(const int64_t *)context);
	return query_run(&query);
}

/* Half a survey is worse than none; whether this works is no news. */
static void discard(struct ledger *ledger, int64_t survey)
{
	enum status status =
		ledger_transact(ledger, delete_survey, &survey, NULL);

	(void)status;
}

static enum status copy_parts(struct ledger *ledger, const struct part *parts,
			      size_t count, int64_t *id, struct reason *why)
{
	/* A plan for ledger_begin, which owns nothing of the part's. */
	struct survey plan = parts[0].survey;
	enum status status = STATUS_OK;
	int64_t survey;

	for (size_t i = 1; i < count; i++)
		TRY(check_part(&parts[0], &parts[i], why));
	TRY(ledger_begin(ledger, &plan, parts[0].plan, why));
	survey = plan.id;
	for (size_t i = 0; i < count && status == STATUS_OK; i++)
		status = copy_part(ledger, &parts[i], survey, why);
	if (status == STATUS_OK)
		status = ledger_finish(ledger, survey, why);
	if (status == STATUS_OK)
		*id = survey;
	else
		discard(ledger, survey);
	return status;
}

enum status ledger_merge(struct ledger *ledger, const char *const *parts,
			 size_t part_count, int64_t *id, struct reason *why)
{
	struct part *read = NULL;
	enum status status;
	size_t done = 0;

	if (part_count == 0)
		return reason_give(why, STATUS_BAD_USAGE,
				   "no parts to merge: name at least one "
				   "ledger");
	status = ledger_memory(
		ledger, memory_new_zeroed(part_count, sizeof(*read), &read),
		why);
	while (done < part_count && status == STATUS_OK) {
		status = part_init(&read[done], parts[done], why);
		done++;
	}
	if (status == STATUS_OK)
		status = copy_parts(ledger, read, part_count, id, why);
	for (size_t i = 0; i < done; i++)
		survey_release(&read[i].survey);
	memory_free(read);
	return status;
}
