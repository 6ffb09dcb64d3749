#include "ledger/ledger.h"

#include "ledger/outcome.h"
#include "ledger/statement.h"

/* What one put was asked to write. */
struct put {
	int64_t survey;
	const char *corpus;
	size_t place;
	const void *fact;
};

/* The key that the rows of one estimator share. */
static void bind_method_key(struct query *query, const struct put *put)
{
	const struct method_fact *method = put->fact;

	query_bind_int(query, put->survey);
	query_bind_text(query, put->corpus);
	query_bind_text(query, method->method);
	query_bind_count(query, method->page_bytes);
}

/* An upsert: replacing the row would take the rows under it along. */
static const char corpus_sql[] =
	"INSERT INTO corpus (survey, name, place, outcome, reason, symbols,"
	" file_bytes, canonical_bytes, n, distinct_symbols, alphabet, records,"
	" sha256, licence, origin, known_rate, rolling, block_symbols,"
	" block_bytes) VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, "
	"?, ?, ?)"
	" ON CONFLICT DO UPDATE SET place = excluded.place,"
	" outcome = excluded.outcome, reason = excluded.reason,"
	" symbols = excluded.symbols, file_bytes = excluded.file_bytes,"
	" canonical_bytes = excluded.canonical_bytes, n = excluded.n,"
	" distinct_symbols = excluded.distinct_symbols,"
	" alphabet = excluded.alphabet, records = excluded.records,"
	" sha256 = excluded.sha256, licence = excluded.licence,"
	" origin = excluded.origin, known_rate = excluded.known_rate,"
	" rolling = excluded.rolling,"
	" block_symbols = excluded.block_symbols,"
	" block_bytes = excluded.block_bytes";

static enum status corpus_row(struct ledger *ledger, const void *context,
			      struct reason *why)
{
	const struct put *put = context;
	const struct corpus_fact *corpus = put->fact;
	struct query query;

	query_init(&query, ledger, corpus_sql, "corpus", why);
	query_bind_int(&query, put->survey);
	query_bind_text(&query, corpus->name);
	query_bind_count(&query, put->place);
	query_bind_text(&query, outcome_name(corpus->outcome));
	query_bind_text(&query, corpus->reason);
	query_bind_text(&query, symbol_kind_name(corpus->kind));
	query_bind_count(&query, corpus->file_bytes);
	query_bind_count(&query, corpus->canonical_bytes);
	query_bind_count(&query, corpus->n);
	query_bind_count(&query, corpus->distinct);
	query_bind_count(&query, corpus->alphabet);
	query_bind_count(&query, corpus->records);
	query_bind_text(&query, corpus->sha256);
	query_bind_text(&query, corpus->licence);
	query_bind_text(&query, corpus->origin);
	if (corpus->rate_known)
		query_bind_real(&query, corpus->known_rate);
	else
		query_bind_null(&query);
	query_bind_count(&query, corpus->rolling);
	query_bind_blocks(&query, corpus->block_symbols, corpus->blocks);
	query_bind_blocks(&query, corpus->block_bytes, corpus->blocks);
	return query_run(&query);
}

enum status ledger_put_corpus(struct ledger *ledger, int64_t survey,
			      size_t place, const struct corpus_fact *corpus,
			      struct reason *why)
{
	struct put put = {survey, corpus->name, place, corpus};

	return ledger_transact(ledger, corpus_row, &put, why);
}

static enum status series_rows(struct ledger *ledger, const struct put *put,
			       struct reason *why)
{
	const struct method_fact *method = put->fact;

	for (size_t i = 0; i < method->findings.series_count; i++) {
		const struct series *series = &method->findings.series[i];
		struct query query;

		query_init(&query, ledger,
			   "INSERT INTO series VALUES (?, ?, ?, ?, ?, ?, ?, ?)",
			   "series", why);
		bind_method_key(&query, put);
		query_bind_count(&query, i);
		query_bind_count(&query, series->order);
		query_bind_int(&query, series->costs.headline_q16);
		query_bind_blocks(&query, series->costs.block_q16,
				  series->costs.blocks);
		TRY(query_run(&query));
	}
	return STATUS_OK;
}

static enum status gram_row(struct ledger *ledger, const struct put *put,
			    size_t place, size_t part, struct reason *why)
{
	const struct method_fact *method = put->fact;
	const struct order_counts *order = &method->findings.orders[place];
	const struct gram_counts *gram =
		part ? &order->half[part - 1] : &order->all;
	struct query query;

	query_init(
		&query, ledger,
		"INSERT INTO gram VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?,"
		" ?, ?)",
		"gram", why);
	bind_method_key(&query, put);
	query_bind_count(&query, place);
	query_bind_count(&query, part);
	query_bind_count(&query, order->order);
	query_bind_count(&query, gram->positions);
	query_bind_count(&query, gram->distinct);
	query_bind_count(&query, gram->once);
	query_bind_count(&query, gram->twice);
	query_bind_int(&query, gram->plugin_q16);
	query_bind_int(&query, gram->grassberger_q16);
	query_bind_int(&query, gram->psi_q16);
	return query_run(&query);
}

static enum status note_rows(struct ledger *ledger, const struct put *put,
			     struct reason *why)
{
	const struct method_fact *method = put->fact;

	for (size_t i = 0; i < method->findings.note_count; i++) {
		const struct note *note = &method->findings.notes[i];
		struct query query;

		query_init(&query, ledger,
			   "INSERT INTO note VALUES (?, ?, ?, ?, ?, ?, ?)",
			   "note", why);
		bind_method_key(&query, put);
		query_bind_count(&query, i);
		query_bind_text(&query, note->key);
		query_bind_int(&query, note->value);
		TRY(query_run(&query));
	}
	return STATUS_OK;
}

static enum status method_row(struct ledger *ledger, const struct put *put,
			      struct reason *why)
{
	const struct method_fact *method = put->fact;
	struct query query;

	query_init(&query, ledger,
		   "DELETE FROM method WHERE survey = ? AND corpus = ?"
		   " AND method = ? AND page_bytes = ?",
		   "method", why);
	bind_method_key(&query, put);
	TRY(query_run(&query));
	query_init(&query, ledger,
		   "INSERT INTO method VALUES (?, ?, ?, ?, ?, ?, ?)", "method",
		   why);
	bind_method_key(&query, put);
	query_bind_count(&query, put->place);
	query_bind_text(&query, outcome_name(method->outcome));
	query_bind_text(&query, method->reason);
	return query_run(&query);
}

static enum status method_rows(struct ledger *ledger, const void *context,
			       struct reason *why)
{
	const struct put *put = context;
	const struct method_fact *method = put->fact;

	TRY(method_row(ledger, put, why));
	TRY(series_rows(ledger, put, why));
	for (size_t i = 0; i < method->findings.order_count; i++) {
		for (size_t part = 0; part < 3; part++)
			TRY(gram_row(ledger, put, i, part, why));
	}
	return note_rows(ledger, put, why);
}

enum status ledger_put_method(struct ledger *ledger, int64_t survey,
			      const char *corpus, size_t place,
			      const struct method_fact *method,
			      struct reason *why)
{
	struct put put = {survey, corpus, place, method};

	return ledger_transact(ledger, method_rows, &put, why);
}
