#include "ledger/ledger.h"

#include <stdio.h>
#include <string.h>

#include "base/memory.h"
#include "ledger/outcome.h"
#include "ledger/read.h"

void bind_owner(struct query *query, const struct owner *owner)
{
	query_bind_int(query, owner->survey);
	if (!owner->corpus)
		return;
	query_bind_text(query, owner->corpus->name);
	if (!owner->method)
		return;
	query_bind_text(query, owner->method->method);
	query_bind_count(query, owner->method->page_bytes);
}

enum status read_row_count(const struct owner *owner, const char *sql,
			   const char *what, size_t *count)
{
	struct query query;
	bool row = false;

	query_init(&query, owner->ledger, sql, what, owner->why);
	bind_owner(&query, owner);
	if (query_step(&query, &row) == STATUS_OK && row)
		*count = query_small(&query, READ_ROWS_MAX);
	return query_end(&query);
}

enum outcome query_outcome(struct query *query)
{
	char name[16] = "";
	enum outcome outcome = OUTCOME_FAILED;

	query_text(query, name, sizeof(name));
	if (query->status == STATUS_OK && !outcome_parse(name, &outcome))
		query_damaged(query, "no such outcome");
	return outcome;
}

static enum symbol_kind query_kind(struct query *query)
{
	char name[16] = "";
	enum symbol_kind kind = SYMBOL_BYTE;

	query_text(query, name, sizeof(name));
	if (query->status == STATUS_OK &&
	    symbol_kind_parse(name, &kind, NULL) != STATUS_OK)
		query_damaged(query, "no such kind of symbol");
	return kind;
}

/* "3 surveys: 1 2 3", for people who asked for another one. */
static enum status fail_absent(struct ledger *ledger, int64_t id,
			       struct reason *why)
{
	char list[256] = "";
	size_t used = 0;
	int64_t *ids = NULL;
	size_t count = 0;

	TRY(ledger_list(ledger, &ids, &count, why));
	for (size_t i = 0; i < count && used + 24 < sizeof(list); i++)
		used += (size_t)snprintf(list + used, sizeof(list) - used,
					 " %lld", (long long)ids[i]);
	memory_free(ids);
	if (count == 0)
		return reason_give(why, STATUS_NOT_FOUND,
				   "%s: the ledger holds no survey yet",
				   ledger->path);
	return reason_give(why, STATUS_NOT_FOUND,
			   "%s: there is no survey %lld; it holds:%s",
			   ledger->path, (long long)id, list);
}

static enum status read_head(struct ledger *ledger, int64_t id,
			     struct survey *survey, struct reason *why)
{
	struct query query;
	bool row = false;

	query_init(&query, ledger,
		   "SELECT id, set_name, program, seed, orders, gap_limit,"
		   " yardstick, tolerance, speed_tolerance,"
		   " finished IS NOT NULL, ifnull(started, ''),"
		   " ifnull(set_path, '') FROM survey"
		   " LEFT JOIN run ON run.survey = id WHERE id ="
		   " iif(?1 = 0, (SELECT max(id) FROM survey), ?1)",
		   "survey", why);
	query_bind_int(&query, id);
	if (query_step(&query, &row) == STATUS_OK && row) {
		survey->id = query_int(&query);
		query_text(&query, survey->set_name, LEDGER_NAME_BYTES);
		query_text(&query, survey->program, LEDGER_NAME_BYTES);
		survey->seed = query_count(&query);
		survey->orders =
			(unsigned)query_small(&query, FINDING_ORDERS_MAX);
		survey->gap_limit = query_real(&query);
		query_text(&query, survey->yardstick, LEDGER_NAME_BYTES);
		survey->tolerance = query_real(&query);
		survey->speed_tolerance = query_real(&query);
		survey->finished = query_small(&query, 1) != 0;
		query_text(&query, survey->started, LEDGER_NAME_BYTES);
		query_text(&query, survey->set_path, LEDGER_PATH_BYTES);
	}
	TRY(query_end(&query));
	return row ? STATUS_OK : fail_absent(ledger, id, why);
}

static enum status read_libraries(const struct owner *owner,
				  struct survey *survey)
{
	size_t count = 0;
	struct query query;
	bool row = false;

	TRY(read_row_count(owner,
			   "SELECT count(*) FROM library WHERE survey = ?",
			   "library", &count));
	TRY(memory_new_zeroed(count, sizeof(*survey->libraries),
			      &survey->libraries));
	survey->library_count = count;
	query_init(&query, owner->ledger,
		   "SELECT name, version FROM library WHERE survey = ?"
		   " ORDER BY place",
		   "library", owner->why);
	bind_owner(&query, owner);
	for (size_t i = 0; i < count; i++) {
		struct library_fact *library = &survey->libraries[i];

		if (query_step(&query, &row) != STATUS_OK || !row)
			break;
		query_text(&query, library->name, LEDGER_NAME_BYTES);
		query_text(&query, library->version, LEDGER_NAME_BYTES);
	}
	return query_end(&query);
}

static void read_corpus(struct query *query, struct corpus_fact *corpus)
{
	size_t blocks = 0;

	query_text(query, corpus->name, LEDGER_NAME_BYTES);
	corpus->outcome = query_outcome(query);
	query_text_new(query, &corpus->reason);
	corpus->kind = query_kind(query);
	corpus->file_bytes = query_count(query);
	corpus->canonical_bytes = query_count(query);
	corpus->n = query_count(query);
	corpus->distinct = query_count(query);
	corpus->alphabet = query_count(query);
	corpus->records = query_count(query);
	query_text(query, corpus->sha256, sizeof(corpus->sha256));
	query_text(query, corpus->licence, LEDGER_NAME_BYTES);
	query_text_new(query, &corpus->origin);
	corpus->rate_known = !query_is_null(query);
	corpus->known_rate = query_real(query);
	corpus->rolling = query_small(query, 1) != 0;
	query_blocks(query, SIZE_MAX, &corpus->block_symbols, &corpus->blocks);
	query_blocks(query, SIZE_MAX, &corpus->block_bytes, &blocks);
	if (blocks != corpus->blocks)
		query_damaged(query, "not as many blocks as block_symbols");
}

static enum status read_corpora(const struct owner *owner,
				struct survey *survey)
{
	size_t count = 0;
	struct query query;
	bool row = false;

	TRY(read_row_count(owner,
			   "SELECT count(*) FROM corpus WHERE survey = ?",
			   "corpus", &count));
	TRY(memory_new_zeroed(count, sizeof(*survey->corpora),
			      &survey->corpora));
	survey->corpus_count = count;
	query_init(&query, owner->ledger,
		   "SELECT name, outcome, reason, symbols, file_bytes,"
		   " canonical_bytes, n, distinct_symbols, alphabet, records,"
		   " sha256, licence, origin, known_rate, rolling,"
		   " block_symbols, block_bytes FROM corpus WHERE survey = ?"
		   " ORDER BY place, name",
		   "corpus", owner->why);
	bind_owner(&query, owner);
	for (size_t i = 0; i < count; i++) {
		if (query_step(&query, &row) != STATUS_OK || !row)
			break;
		read_corpus(&query, &survey->corpora[i]);
	}
	return query_end(&query);
}

struct reading {
	int64_t id;
	struct survey *survey;
};

static enum status read_whole(struct ledger *ledger,
			      const struct reading *reading, struct reason *why)
{
	struct survey *survey = reading->survey;
	struct owner owner = {.ledger = ledger, .why = why};

	TRY(read_head(ledger, reading->id, survey, why));
	owner.survey = survey->id;
	TRY(read_libraries(&owner, survey));
	TRY(read_corpora(&owner, survey));
	for (size_t i = 0; i < survey->corpus_count; i++) {
		owner.corpus = &survey->corpora[i];
		TRY(read_methods(owner));
		TRY(read_cells(owner));
	}
	return STATUS_OK;
}

enum status ledger_read(struct ledger *ledger, int64_t id,
			struct survey *survey, struct reason *why)
{
	struct survey made = {0};
	struct reading reading = {id, &made};
	enum status status;

	/* One transaction: a survey still running is seen at one moment. */
	TRY(ledger_execute(ledger, "BEGIN", why));
	status = read_whole(ledger, &reading, why);
	ledger_undo(ledger, "ROLLBACK");
	if (status != STATUS_OK) {
		survey_release(&made);
		return ledger_memory(ledger, status, why);
	}
	*survey = made;
	return STATUS_OK;
}

enum status ledger_list(struct ledger *ledger, int64_t **ids, size_t *count,
			struct reason *why)
{
	struct query query;
	int64_t *made = NULL;
	size_t found = 0;
	bool row = false;

	query_init(&query, ledger, "SELECT id FROM survey ORDER BY id",
		   "survey", why);
	while (query_step(&query, &row) == STATUS_OK && row) {
		query.status = memory_resize(&made, found + 1, sizeof(*made));
		if (query.status == STATUS_OK)
			made[found++] = query_int(&query);
	}
	if (query_end(&query) == STATUS_OK && !made)
		query.status = memory_new(0, sizeof(*made), &made);
	if (query.status != STATUS_OK) {
		memory_free(made);
		return ledger_memory(ledger, query.status, why);
	}
	*ids = made;
	*count = found;
	return STATUS_OK;
}
