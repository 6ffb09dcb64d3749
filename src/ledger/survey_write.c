#include "ledger/ledger.h"

#include <stdio.h>
#include <string.h>

#include "ledger/statement.h"

/* Machines differ in times only: their name stands beside the times. */
static void read_host(char *host, int room)
{
	FILE *file = fopen("/proc/sys/kernel/hostname", "r");

	host[0] = '\0';
	if (!file)
		return;
	if (fgets(host, room, file))
		host[strcspn(host, "\n")] = '\0';
	(void)fclose(file);
}

struct begin {
	struct survey *survey;
	const char *plan;
};

static enum status next_id(struct ledger *ledger, int64_t *id,
			   struct reason *why)
{
	struct query query;
	bool row = false;

	query_init(&query, ledger, "SELECT ifnull(max(id), 0) + 1 FROM survey",
		   "survey", why);
	if (query_step(&query, &row) == STATUS_OK && row)
		*id = query_int(&query);
	return query_end(&query);
}

static enum status insert_survey(struct ledger *ledger,
				 const struct begin *begin, struct reason *why)
{
	const struct survey *survey = begin->survey;
	struct query query;

	query_init(&query, ledger,
		   "INSERT INTO survey"
		   " VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?)",
		   "survey", why);
	query_bind_int(&query, survey->id);
	query_bind_text(&query, begin->plan);
	query_bind_text(&query, survey->set_name);
	query_bind_text(&query, survey->program);
	query_bind_count(&query, survey->seed);
	query_bind_count(&query, survey->orders);
	query_bind_real(&query, survey->gap_limit);
	query_bind_text(&query, survey->yardstick);
	query_bind_real(&query, survey->tolerance);
	query_bind_real(&query, survey->speed_tolerance);
	return query_run(&query);
}

static enum status insert_run(struct ledger *ledger,
			      const struct survey *survey, struct reason *why)
{
	char host[LEDGER_NAME_BYTES];
	struct query query;

	read_host(host, (int)sizeof(host));
	query_init(&query, ledger,
		   "INSERT INTO run VALUES "
		   "(?, ?, strftime('%Y-%m-%dT%H:%M:%SZ', 'now'), NULL, ?)",
		   "run", why);
	query_bind_int(&query, survey->id);
	query_bind_text(&query, host);
	query_bind_text(&query, survey->set_path);
	return query_run(&query);
}

static enum status insert_libraries(struct ledger *ledger,
				    const struct survey *survey,
				    struct reason *why)
{
	for (size_t i = 0; i < survey->library_count; i++) {
		struct query query;

		query_init(&query, ledger,
			   "INSERT INTO library VALUES (?, ?, ?, ?)", "library",
			   why);
		query_bind_int(&query, survey->id);
		query_bind_count(&query, i);
		query_bind_text(&query, survey->libraries[i].name);
		query_bind_text(&query, survey->libraries[i].version);
		TRY(query_run(&query));
	}
	return STATUS_OK;
}

static enum status begin_rows(struct ledger *ledger, const void *context,
			      struct reason *why)
{
	const struct begin *begin = context;

	TRY(next_id(ledger, &begin->survey->id, why));
	TRY(insert_survey(ledger, begin, why));
	TRY(insert_run(ledger, begin->survey, why));
	return insert_libraries(ledger, begin->survey, why);
}

enum status ledger_begin(struct ledger *ledger, struct survey *survey,
			 const char *plan_digest, struct reason *why)
{
	struct begin begin = {.survey = survey, .plan = plan_digest};
	int64_t before = survey->id;
	enum status status = ledger_transact(ledger, begin_rows, &begin, why);

	if (status != STATUS_OK)
		survey->id = before;
	return status;
}

enum status ledger_resume(struct ledger *ledger, const char *plan_digest,
			  int64_t *id, struct reason *why)
{
	struct query query;
	int64_t found = 0;
	bool row = false;

	query_init(
		&query, ledger,
		"SELECT max(s.id) FROM survey s JOIN run r ON r.survey = s.id"
		" WHERE s.plan = ? AND r.finished IS NULL",
		"survey", why);
	query_bind_text(&query, plan_digest);
	if (query_step(&query, &row) == STATUS_OK && row)
		found = query_int(&query);
	TRY(query_end(&query));
	if (!found)
		return reason_give(why, STATUS_NOT_FOUND,
				   "%s: no unfinished survey of this set, seed "
				   "and selection: run without --resume",
				   ledger->path);
	*id = found;
	return STATUS_OK;
}

static enum status finish_row(struct ledger *ledger, const void *context,
			      struct reason *why)
{
	int64_t survey = *(const int64_t *)context;
	struct query query;

	query_init(&query, ledger,
		   "UPDATE run SET finished = "
		   "strftime('%Y-%m-%dT%H:%M:%SZ', 'now') WHERE survey = ?",
		   "run", why);
	query_bind_int(&query, survey);
	TRY(query_run(&query));
	if (sqlite3_changes(ledger->database) == 0)
		return reason_give(why, STATUS_NOT_FOUND,
				   "%s: there is no survey %lld", ledger->path,
				   (long long)survey);
	return STATUS_OK;
}

enum status ledger_finish(struct ledger *ledger, int64_t survey,
			  struct reason *why)
{
	return ledger_transact(ledger, finish_row, &survey, why);
}
