#include "ledger/ledger.h"

#include "ledger/outcome.h"
#include "ledger/statement.h"

struct put_cell {
	int64_t survey;
	const char *corpus;
	size_t place;
	const struct cell_fact *cell;
};

struct put_timing {
	int64_t survey;
	const char *corpus;
	const struct cell_key *key;
	const struct cell_timing *timing;
};

static void bind_key(struct query *query, int64_t survey, const char *corpus,
		     const struct cell_key *key)
{
	query_bind_int(query, survey);
	query_bind_text(query, corpus);
	query_bind_text(query, key->codec);
	query_bind_text(query, key->level);
	query_bind_text(query, key->layout);
}

static enum status timing_row(struct ledger *ledger, const void *context,
			      struct reason *why)
{
	const struct put_timing *put = context;
	const struct cell_timing *timing = put->timing;
	struct query query;

	/* No row refers to a timing: plain replacing is enough. */
	query_init(&query, ledger,
		   "INSERT OR REPLACE INTO timing VALUES"
		   " (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?)",
		   "timing", why);
	bind_key(&query, put->survey, put->corpus, put->key);
	query_bind_count(&query, timing->rounds);
	query_bind_real(&query, timing->encode_cpu_seconds);
	query_bind_real(&query, timing->decode_cpu_seconds);
	query_bind_real(&query, timing->encode_wall_seconds);
	query_bind_real(&query, timing->decode_wall_seconds);
	query_bind_real(&query, timing->encode_spread);
	query_bind_real(&query, timing->decode_spread);
	query_bind_count(&query, timing->encode_peak_bytes);
	query_bind_count(&query, timing->decode_peak_bytes);
	return query_run(&query);
}

enum status ledger_put_timing(struct ledger *ledger, int64_t survey,
			      const char *corpus, const struct cell_key *key,
			      const struct cell_timing *timing,
			      struct reason *why)
{
	struct put_timing put = {survey, corpus, key, timing};

	return ledger_transact(ledger, timing_row, &put, why);
}

static enum status delete_cell(struct ledger *ledger,
			       const struct put_cell *put, struct reason *why)
{
	struct query query;

	query_init(&query, ledger,
		   "DELETE FROM cell WHERE survey = ? AND corpus = ?"
		   " AND codec = ? AND level = ? AND layout = ?",
		   "cell", why);
	bind_key(&query, put->survey, put->corpus, &put->cell->key);
	return query_run(&query);
}

static enum status insert_cell(struct ledger *ledger,
			       const struct put_cell *put, struct reason *why)
{
	const struct cell_fact *cell = put->cell;
	const struct cell_facts *facts = &cell->facts;
	struct query query;

	query_init(&query, ledger,
		   "INSERT INTO cell VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?,"
		   " ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?)",
		   "cell", why);
	bind_key(&query, put->survey, put->corpus, &cell->key);
	query_bind_count(&query, put->place);
	query_bind_count(&query, cell->page_bytes);
	query_bind_text(&query, outcome_name(cell->outcome));
	query_bind_text(&query, cell->reason);
	query_bind_count(&query, facts->bytes);
	query_bind_count(&query, facts->framing_bytes);
	query_bind_int(&query, facts->framing_known != 0);
	query_bind_int(&query, facts->lossless != 0);
	query_bind_count(&query, facts->pages);
	query_bind_count(&query, facts->flushed_bytes);
	query_bind_int(&query, facts->flushed.headline_q16);
	query_bind_blocks(&query, facts->flushed.block_q16,
			  facts->flushed.blocks);
	query_bind_count(&query, facts->encode_memory_bytes);
	query_bind_count(&query, facts->decode_memory_bytes);
	query_bind_count(&query, facts->dictionary_bytes);
	query_bind_count(&query, facts->storage_unit);
	query_bind_count(&query, facts->stored_bytes);
	return query_run(&query);
}

static enum status cell_rows(struct ledger *ledger, const void *context,
			     struct reason *why)
{
	const struct put_cell *put = context;
	const struct put_timing timing = {put->survey, put->corpus,
					  &put->cell->key, &put->cell->timing};

	/* Takes an older timing along: it was of another measurement. */
	TRY(delete_cell(ledger, put, why));
	TRY(insert_cell(ledger, put, why));
	if (!put->cell->timed)
		return STATUS_OK;
	return timing_row(ledger, &timing, why);
}

enum status ledger_put_cell(struct ledger *ledger, int64_t survey,
			    const char *corpus, size_t place,
			    const struct cell_fact *cell, struct reason *why)
{
	struct put_cell put = {survey, corpus, place, cell};

	return ledger_transact(ledger, cell_rows, &put, why);
}
