#include "ledger/read.h"

#include "base/memory.h"

static void read_facts(struct query *query, size_t blocks,
		       struct cell_facts *facts)
{
	facts->bytes = query_count(query);
	facts->framing_bytes = query_count(query);
	facts->framing_known = (int)query_small(query, 1);
	facts->lossless = (int)query_small(query, 1);
	facts->pages = query_count(query);
	facts->flushed_bytes = query_count(query);
	facts->flushed.headline_q16 = query_int(query);
	query_blocks(query, blocks, &facts->flushed.block_q16,
		     &facts->flushed.blocks);
	facts->encode_memory_bytes = query_count(query);
	facts->decode_memory_bytes = query_count(query);
	facts->dictionary_bytes = query_count(query);
	facts->storage_unit = query_count(query);
	facts->stored_bytes = query_count(query);
}

static void read_timing(struct query *query, struct cell_fact *cell)
{
	struct cell_timing *timing = &cell->timing;

	cell->timed = !query_is_null(query);
	timing->rounds = (unsigned)query_small(query, READ_ROWS_MAX);
	timing->encode_cpu_seconds = query_real(query);
	timing->decode_cpu_seconds = query_real(query);
	timing->encode_wall_seconds = query_real(query);
	timing->decode_wall_seconds = query_real(query);
	timing->encode_spread = query_real(query);
	timing->decode_spread = query_real(query);
	timing->encode_peak_bytes = query_count(query);
	timing->decode_peak_bytes = query_count(query);
}

static void read_cell(struct query *query, size_t blocks,
		      struct cell_fact *cell)
{
	query_text(query, cell->key.codec, CELL_NAME_BYTES);
	query_text(query, cell->key.level, CELL_NAME_BYTES);
	query_text(query, cell->key.layout, CELL_NAME_BYTES);
	cell->page_bytes = query_small(query, SIZE_MAX);
	cell->outcome = query_outcome(query);
	query_text_new(query, &cell->reason);
	read_facts(query, blocks, &cell->facts);
	read_timing(query, cell);
}

enum status read_cells(struct owner owner)
{
	struct corpus_fact *corpus = owner.corpus;
	size_t count = 0;
	struct query query;
	bool row = false;

	TRY(read_row_count(&owner,
			   "SELECT count(*) FROM cell WHERE survey = ?"
			   " AND corpus = ?",
			   "cell", &count));
	TRY(memory_new_zeroed(count, sizeof(*corpus->cells), &corpus->cells));
	corpus->cell_count = count;
	query_init(
		&query, owner.ledger,
		"SELECT codec, level, layout, page_bytes, outcome, reason,"
		" bytes, framing_bytes, framing_known, lossless, pages,"
		" flushed_bytes, flushed_q16, block_q16,"
		" encode_memory_bytes, decode_memory_bytes, dictionary_bytes,"
		" storage_unit, stored_bytes, rounds,"
		" encode_cpu_seconds, decode_cpu_seconds,"
		" encode_wall_seconds, decode_wall_seconds, encode_spread,"
		" decode_spread, encode_peak_bytes, decode_peak_bytes"
		" FROM cell LEFT JOIN timing"
		" USING (survey, corpus, codec, level, layout)"
		" WHERE survey = ? AND corpus = ?"
		" ORDER BY place, codec, level, layout",
		"cell", owner.why);
	bind_owner(&query, &owner);
	for (size_t i = 0; i < count; i++) {
		if (query_step(&query, &row) != STATUS_OK || !row)
			break;
		read_cell(&query, corpus->blocks, &corpus->cells[i]);
	}
	return query_end(&query);
}
