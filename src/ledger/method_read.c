#include "ledger/read.h"

#include "base/memory.h"

#define OF_METHOD                                                        \
	" WHERE survey = ? AND corpus = ? AND method = ? AND page_bytes" \
	" = ?"

static void expect(struct query *query, size_t wanted)
{
	if (query_count(query) != wanted)
		query_damaged(query, "rows are missing");
}

static enum status read_series(const struct owner *owner)
{
	struct findings *findings = &owner->method->findings;
	struct query query;
	bool row = false;

	query_init(&query, owner->ledger,
		   "SELECT place, gram_order, headline_q16, block_q16"
		   " FROM series" OF_METHOD " ORDER BY place",
		   "series", owner->why);
	bind_owner(&query, owner);
	for (size_t i = 0; i < findings->series_count; i++) {
		struct series *series = &findings->series[i];

		if (query_step(&query, &row) != STATUS_OK || !row)
			break;
		expect(&query, i);
		series->order =
			(unsigned)query_small(&query, FINDING_ORDERS_MAX);
		series->costs.headline_q16 = query_int(&query);
		query_blocks(&query, owner->corpus->blocks,
			     &series->costs.block_q16, &series->costs.blocks);
	}
	return query_end(&query);
}

static void read_gram(struct query *query, struct order_counts *order,
		      size_t part)
{
	struct gram_counts *gram = part ? &order->half[part - 1] : &order->all;

	order->order = (unsigned)query_small(query, FINDING_ORDERS_MAX);
	gram->positions = query_count(query);
	gram->distinct = query_count(query);
	gram->once = query_count(query);
	gram->twice = query_count(query);
	gram->plugin_q16 = query_int(query);
	gram->grassberger_q16 = query_int(query);
	gram->psi_q16 = query_int(query);
}

static enum status read_grams(const struct owner *owner)
{
	struct findings *findings = &owner->method->findings;
	struct query query;
	bool row = false;

	query_init(&query, owner->ledger,
		   "SELECT place, part, gram_order, positions, distinct_grams,"
		   " once, twice, plugin_q16, grassberger_q16, psi_q16"
		   " FROM gram" OF_METHOD " ORDER BY place, part",
		   "gram", owner->why);
	bind_owner(&query, owner);
	for (size_t i = 0; i < 3 * findings->order_count; i++) {
		if (query_step(&query, &row) != STATUS_OK || !row)
			break;
		expect(&query, i / 3);
		expect(&query, i % 3);
		read_gram(&query, &findings->orders[i / 3], i % 3);
	}
	return query_end(&query);
}

static enum status read_notes(const struct owner *owner)
{
	struct findings *findings = &owner->method->findings;
	struct query query;
	bool row = false;

	query_init(&query, owner->ledger,
		   "SELECT key, value FROM note" OF_METHOD " ORDER BY place",
		   "note", owner->why);
	bind_owner(&query, owner);
	while (query_step(&query, &row) == STATUS_OK && row) {
		struct note *note = &findings->notes[findings->note_count];

		if (findings->note_count == FINDING_NOTES_MAX) {
			query.next = 1;
			query_damaged(&query, "too many notes");
			break;
		}
		query_text(&query, note->key, sizeof(note->key));
		note->value = query_int(&query);
		findings->note_count++;
	}
	return query_end(&query);
}

static enum status read_findings(const struct owner *owner)
{
	size_t series = 0;
	size_t grams = 0;

	TRY(read_row_count(owner, "SELECT count(*) FROM series" OF_METHOD,
			   "series", &series));
	TRY(read_row_count(owner, "SELECT count(*) FROM gram" OF_METHOD, "gram",
			   &grams));
	if (grams % 3)
		return reason_give(owner->why, STATUS_LEDGER,
				   "%s: damaged: grams of %s are missing",
				   owner->ledger->path, owner->corpus->name);
	TRY(findings_init(&owner->method->findings, series, grams / 3));
	TRY(read_series(owner));
	TRY(read_grams(owner));
	return read_notes(owner);
}

static enum status read_heads(const struct owner *owner)
{
	struct corpus_fact *corpus = owner->corpus;
	struct query query;
	bool row = false;

	query_init(&query, owner->ledger,
		   "SELECT method, page_bytes, outcome, reason FROM method"
		   " WHERE survey = ? AND corpus = ?"
		   " ORDER BY place, method, page_bytes",
		   "method", owner->why);
	bind_owner(&query, owner);
	for (size_t i = 0; i < corpus->method_count; i++) {
		struct method_fact *method = &corpus->methods[i];

		if (query_step(&query, &row) != STATUS_OK || !row)
			break;
		query_text(&query, method->method, LEDGER_NAME_BYTES);
		method->page_bytes = query_small(&query, SIZE_MAX);
		method->outcome = query_outcome(&query);
		query_text_new(&query, &method->reason);
	}
	return query_end(&query);
}

enum status read_methods(struct owner owner)
{
	struct corpus_fact *corpus = owner.corpus;
	size_t count = 0;

	TRY(read_row_count(&owner,
			   "SELECT count(*) FROM method WHERE survey = ?"
			   " AND corpus = ?",
			   "method", &count));
	TRY(memory_new_zeroed(count, sizeof(*corpus->methods),
			      &corpus->methods));
	corpus->method_count = count;
	TRY(read_heads(&owner));
	for (size_t i = 0; i < count; i++) {
		owner.method = &corpus->methods[i];
		TRY(read_findings(&owner));
	}
	return STATUS_OK;
}
