#include "report/json_parts.h"

#include <stdio.h>

#include "ledger/outcome.h"
#include "report/json_value.h"
#include "report/paper.h"

/* name_low, name_high and name_reason of one term. */
static void put_term_interval(struct json_maker *made, const char *name,
			      bool known, const struct interval *interval)
{
	char key[32];

	(void)snprintf(key, sizeof(key), "%s_low", name);
	json_put_real(made, key, known && interval->known, interval->low);
	(void)snprintf(key, sizeof(key), "%s_high", name);
	json_put_real(made, key, known && interval->known, interval->high);
	(void)snprintf(key, sizeof(key), "%s_reason", name);
	json_put_reason(made, key, known ? interval->reason : "");
}

static json_t *stack_object(const struct cell_row *row)
{
	const struct gap_stack *stack = &row->stack;
	bool known = row->known && stack->known;
	struct json_maker made;

	json_begin(&made);
	json_put_real(&made, "floor", known, stack->floor);
	json_put_real(&made, "restart", known, stack->restart);
	json_put_real(&made, "family", known, stack->family);
	json_put_real(&made, "effort", known, stack->effort);
	json_put_real(&made, "framing", known, stack->framing);
	json_put_reason(&made, "best_level", known ? stack->best_level : "");
	put_term_interval(&made, "restart", known, &stack->restart_interval);
	put_term_interval(&made, "family", known, &stack->family_interval);
	put_term_interval(&made, "effort", known, &stack->effort_interval);
	put_term_interval(&made, "framing", known, &stack->framing_interval);
	json_put_real(&made, "storage", known && stack->has_storage,
		      stack->storage);
	return json_done(&made);
}

/* null for a cell without dictionaries. */
static json_t *dictionary_object(const struct cell_row *row)
{
	const struct dictionary_row *dictionary = &row->dictionary;
	const struct interval *won = &dictionary->won_interval;
	bool known = dictionary->known;
	struct json_maker made;

	if (!row->known || !dictionary->has)
		return json_null();
	json_begin(&made);
	json_put_count(&made, "bytes", row->fact->facts.dictionary_bytes);
	json_put_real(&made, "own", known, dictionary->own);
	json_put_real(&made, "won", known, dictionary->won);
	json_put_real(&made, "won_low", known && won->known, won->low);
	json_put_real(&made, "won_high", known && won->known, won->high);
	json_put_reason(&made, "won_reason", known ? won->reason : "");
	json_put_real(&made, "warm", dictionary->warm_known, dictionary->warm);
	json_put_real(&made, "cold", dictionary->warm_known, dictionary->cold);
	return json_done(&made);
}

static void put_timing(struct json_maker *made, const struct cell_row *row)
{
	const struct cell_timing *timing = &row->fact->timing;
	bool timed = row->known && row->fact->timed;

	json_put_known_count(made, "timing_rounds", timed, timing->rounds);
	json_put_real(made, "encode_wall_mb_per_s",
		      timed && row->encode_wall_mb_per_s > 0,
		      row->encode_wall_mb_per_s);
	json_put_real(made, "decode_wall_mb_per_s",
		      timed && row->decode_wall_mb_per_s > 0,
		      row->decode_wall_mb_per_s);
	json_put_real(made, "encode_spread", timed, timing->encode_spread);
	json_put_real(made, "decode_spread", timed, timing->decode_spread);
	json_put_bool(made, "timing_noisy", timed && row->timing_noisy);
}

static void put_sizes(struct json_maker *made, const struct cell_row *row)
{
	const struct interval *interval = &row->interval;
	const struct interval *gap = &row->gap_interval;
	bool known = row->known;

	json_put_known_count(made, "bytes", known, row->fact->facts.bytes);
	json_put_bool(made, "lossless", row->fact->facts.lossless != 0);
	json_put_real(made, "bits_per_symbol", known, row->bits_per_symbol);
	json_put_real(made, "low", known && interval->known, interval->low);
	json_put_real(made, "high", known && interval->known, interval->high);
	json_put_real(made, "gap", known, row->gap);
	json_put_real(made, "gap_low", known && gap->known, gap->low);
	json_put_real(made, "gap_high", known && gap->known, gap->high);
	json_put_real(made, "gap_percent", known && row->has_percent,
		      row->gap_percent);
	json_put(made, "stack", stack_object(row));
}

static void put_costs(struct json_maker *made, const struct cell_row *row)
{
	uint64_t encode_memory = cell_encode_memory(row->fact);
	uint64_t decode_memory = cell_decode_memory(row->fact);
	bool known = row->known;
	bool timed = known && row->fact->timed;

	json_put_real(made, "encode_mb_per_s",
		      timed && row->encode_mb_per_s > 0, row->encode_mb_per_s);
	json_put_real(made, "decode_mb_per_s",
		      timed && row->decode_mb_per_s > 0, row->decode_mb_per_s);
	json_put_known_count(made, "encode_memory_bytes",
			     known && encode_memory != CELL_MEMORY_UNKNOWN,
			     encode_memory);
	json_put_known_count(made, "decode_memory_bytes",
			     known && decode_memory != CELL_MEMORY_UNKNOWN,
			     decode_memory);
	json_put_real(made, "bits_per_record", known && row->has_record,
		      row->bits_per_record);
}

/* The interval that says why it is not there, if one does. */
static const char *interval_reason(const struct cell_row *row)
{
	return row->interval.known ? row->gap_interval.reason
				   : row->interval.reason;
}

static void put_quality(struct json_maker *made, const struct cell_row *row)
{
	const struct cell_facts *facts = &row->fact->facts;
	bool known = row->known;

	json_put_real(made, "efficiency", known, row->efficiency);
	/* null, too, where no trusted order does as well: see the next-to-last
	 * key. */
	json_put_known_count(made, "effective_order",
			     known && row->effective_order,
			     row->effective_order);
	json_put_real(made, "effective_blocks",
		      known && row->interval.effective_blocks > 0,
		      row->interval.effective_blocks);
	json_put_reason(made, "interval_reason", interval_reason(row));
	json_put_real(made, "flush_cost", known && facts->flushed.blocks,
		      row->flush_cost);
	json_put_text(made, "status",
		      cell_failed(row->fact)
			      ? outcome_name(OUTCOME_FAILED)
			      : outcome_name(row->fact->outcome));
}

json_t *json_cell(const struct corpus_view *view, const struct cell_row *row)
{
	const struct cell_fact *fact = row->fact;
	struct json_maker made;

	json_begin(&made);
	json_put_text(&made, "codec", fact->key.codec);
	json_put_text(&made, "level", fact->key.level);
	json_put_text(&made, "layout", fact->key.layout);
	put_sizes(&made, row);
	put_costs(&made, row);
	put_quality(&made, row);
	json_put_reason(&made, "reason", fact->reason);
	json_put_real(&made, "payload_bits_per_symbol", row->known,
		      row->payload_bits_per_symbol);
	json_put_bool(&made, "above_trusted_order",
		      row->known && view->trusted_order &&
			      !row->effective_order);
	json_put_known_count(&made, "framing_bytes",
			     row->known && fact->facts.framing_known,
			     fact->facts.framing_bytes);
	json_put_known_count(&made, "storage_unit",
			     row->known && fact->facts.storage_unit,
			     fact->facts.storage_unit);
	json_put_known_count(&made, "stored_bytes",
			     row->known && fact->facts.storage_unit,
			     fact->facts.stored_bytes);
	json_put(&made, "dictionary", dictionary_object(row));
	put_timing(&made, row);
	return json_done(&made);
}
