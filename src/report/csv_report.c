#include "report/formats.h"

#include <stdio.h>

#include "ledger/outcome.h"
#include "report/clean.h"
#include "report/figures.h"
#include "report/paper.h"
#include "report/stream.h"

/*
 * One flat table (RFC 4180): the first column says what the row is about, and
 * columns that do not apply are empty. Columns are added at the end only.
 */
/* clang-format off */
#define COLUMNS(X) \
	X(row) X(corpus) X(symbols) X(n) X(name) X(level) X(layout) \
	X(order) X(status) X(reason) X(bits_per_symbol) X(low) X(high) \
	X(interval_reason) X(leans) X(is_code) X(gap) X(gap_low) \
	X(gap_high) X(gap_percent) X(restart) X(family) X(effort) \
	X(framing) X(bytes) X(bits_per_record) X(efficiency) \
	X(effective_order) X(flush_cost) X(encode_mb_per_s) \
	X(decode_mb_per_s) X(encode_memory_bytes) X(decode_memory_bytes) \
	X(lossless) X(H_bits_per_gram) X(h_plugin) X(h_corrected) \
	X(h_cwj) X(h_crossfit) X(coverage) X(distinct) X(trusted) \
	X(sha256) X(storage) X(stored_bytes) X(dictionary_bytes) \
	X(dictionary_own) X(dictionary_won) X(encode_spread) \
	X(decode_spread) X(timing_noisy)
/* clang-format on */

#define AS_CONSTANT(name) CSV_##name,
#define AS_TEXT(name) #name,

enum csv_column { COLUMNS(AS_CONSTANT) CSV_COLUMN_COUNT };

static const char *const titles[] = {COLUMNS(AS_TEXT)};

/* Fields of a row: a borrowed text, or a number of its own. */
struct csv_row {
	const char *texts[CSV_COLUMN_COUNT];
	struct figure numbers[CSV_COLUMN_COUNT];
};

static void set_text(struct csv_row *row, enum csv_column column,
		     const char *text)
{
	row->texts[column] = text;
}

static void set_bool(struct csv_row *row, enum csv_column column, bool value)
{
	row->texts[column] = value ? "true" : "false";
}

static void set_count(struct csv_row *row, enum csv_column column, bool known,
		      uint64_t count)
{
	if (known)
		(void)snprintf(row->numbers[column].text,
			       sizeof(row->numbers[column].text), "%llu",
			       (unsigned long long)count);
}

static void set_real(struct csv_row *row, enum csv_column column, bool known,
		     double value)
{
	if (known && value - value == 0)
		(void)snprintf(row->numbers[column].text,
			       sizeof(row->numbers[column].text), "%.10g",
			       value);
}

static void set_interval(struct csv_row *row, bool known,
			 const struct interval *interval)
{
	set_real(row, CSV_low, known && interval->known, interval->low);
	set_real(row, CSV_high, known && interval->known, interval->high);
	if (!interval->known)
		set_text(row, CSV_interval_reason, interval->reason);
}

static void emit(FILE *out, const struct csv_row *row)
{
	char field[4 * REASON_BYTES + 8];

	for (unsigned i = 0; i < CSV_COLUMN_COUNT; i++) {
		const char *text =
			row->texts[i] ? row->texts[i] : row->numbers[i].text;

		(void)clean_csv(text, field, sizeof(field));
		(void)fprintf(out, "%s%s", i ? "," : "", field);
	}
	(void)fputs("\r\n", out);
}

static struct csv_row start_row(const char *kind,
				const struct corpus_view *view)
{
	struct csv_row row = {0};

	set_text(&row, CSV_row, kind);
	set_text(&row, CSV_corpus, view->fact->name);
	set_text(&row, CSV_symbols, symbol_kind_name(view->fact->kind));
	set_count(&row, CSV_n, true, view->fact->n);
	return row;
}

static void corpus_line(FILE *out, const struct corpus_view *view)
{
	struct csv_row row = start_row("corpus", view);

	set_text(&row, CSV_status, outcome_name(view->fact->outcome));
	set_text(&row, CSV_reason, view->fact->reason);
	set_count(&row, CSV_bytes, true, view->fact->file_bytes);
	set_count(&row, CSV_distinct, true, view->fact->distinct);
	set_count(&row, CSV_order, true, view->trusted_order);
	set_text(&row, CSV_sha256, view->fact->sha256);
	emit(out, &row);
}

static void order_line(FILE *out, const struct corpus_view *view,
		       const struct order_row *order)
{
	struct csv_row row = start_row("order", view);

	set_count(&row, CSV_order, true, order->order);
	set_real(&row, CSV_H_bits_per_gram, true, order->H);
	set_real(&row, CSV_h_plugin, true, order->h_plugin);
	set_real(&row, CSV_h_corrected, true, order->h_corrected);
	set_real(&row, CSV_h_cwj, true, order->h_cwj);
	set_real(&row, CSV_h_crossfit, order->has_crossfit, order->h_crossfit);
	set_real(&row, CSV_coverage, true, order->coverage);
	set_count(&row, CSV_distinct, true, order->distinct);
	set_bool(&row, CSV_trusted, order->trusted);
	emit(out, &row);
}

static void estimate_line(FILE *out, const struct corpus_view *view,
			  const struct estimate_row *estimate)
{
	struct csv_row row = start_row("estimate", view);
	const struct method_fact *fact = estimate->fact;

	set_text(&row, CSV_name, fact->method);
	if (fact->page_bytes == 0)
		set_text(&row, CSV_layout, "whole");
	set_count(&row, CSV_layout, fact->page_bytes > 0, fact->page_bytes);
	set_count(&row, CSV_order, estimate->known && estimate->order,
		  estimate->order);
	set_text(&row, CSV_status, outcome_name(fact->outcome));
	set_text(&row, CSV_reason, fact->reason);
	set_real(&row, CSV_bits_per_symbol, estimate->known,
		 estimate->bits_per_symbol);
	set_interval(&row, estimate->known, &estimate->interval);
	set_text(&row, CSV_leans,
		 estimate->leans ? estimate->leans : "unknown");
	set_bool(&row, CSV_is_code, estimate->is_code);
	emit(out, &row);
}

static void floor_line(FILE *out, const struct corpus_view *view)
{
	struct csv_row row = start_row("floor", view);
	const struct floor_row *floor = &view->floor;

	set_text(&row, CSV_name, floor->known ? floor->held_by : "");
	set_text(&row, CSV_status, floor->known ? "done" : "declined");
	set_real(&row, CSV_bits_per_symbol, floor->known,
		 floor->bits_per_symbol);
	set_interval(&row, floor->known, &floor->interval);
	if (floor->known && floor->by_codec)
		set_text(&row, CSV_reason, "held by a codec");
	emit(out, &row);
}

static void bracket_line(FILE *out, const struct corpus_view *view)
{
	struct csv_row row = start_row("bracket", view);
	const struct bracket_row *bracket = &view->bracket;

	set_text(&row, CSV_name, bracket->known ? bracket->upper_by : "");
	set_count(&row, CSV_order, bracket->known, bracket->order);
	set_text(&row, CSV_status, bracket->known ? "done" : "declined");
	set_text(&row, CSV_reason, bracket->known ? "" : bracket->reason);
	set_real(&row, CSV_low, bracket->known && !bracket->open_below,
		 bracket->low);
	set_real(&row, CSV_high, bracket->known, bracket->high);
	if (bracket->known && bracket->open_below)
		set_text(&row, CSV_reason, "open below");
	if (bracket->known && bracket->not_calibrated)
		set_text(&row, CSV_interval_reason, "not calibrated");
	emit(out, &row);
}

static void set_gap(struct csv_row *row, const struct cell_row *cell)
{
	const struct interval *gap = &cell->gap_interval;
	const struct gap_stack *stack = &cell->stack;
	bool stacked = cell->known && stack->known;

	set_real(row, CSV_gap, cell->known, cell->gap);
	set_real(row, CSV_gap_low, cell->known && gap->known, gap->low);
	set_real(row, CSV_gap_high, cell->known && gap->known, gap->high);
	set_real(row, CSV_gap_percent, cell->known && cell->has_percent,
		 cell->gap_percent);
	set_real(row, CSV_restart, stacked, stack->restart);
	set_real(row, CSV_family, stacked, stack->family);
	set_real(row, CSV_effort, stacked, stack->effort);
	set_real(row, CSV_framing, stacked, stack->framing);
}

static void set_costs(struct csv_row *row, const struct cell_row *cell)
{
	const struct cell_facts *facts = &cell->fact->facts;
	uint64_t encode_memory = cell_encode_memory(cell->fact);
	uint64_t decode_memory = cell_decode_memory(cell->fact);
	bool known = cell->known;
	bool timed = known && cell->fact->timed;

	set_count(row, CSV_bytes, known, facts->bytes);
	set_real(row, CSV_bits_per_record, known && cell->has_record,
		 cell->bits_per_record);
	set_real(row, CSV_efficiency, known, cell->efficiency);
	set_count(row, CSV_effective_order, known && cell->effective_order,
		  cell->effective_order);
	set_real(row, CSV_flush_cost, known && facts->flushed.blocks,
		 cell->flush_cost);
	set_real(row, CSV_encode_mb_per_s, timed && cell->encode_mb_per_s > 0,
		 cell->encode_mb_per_s);
	set_real(row, CSV_decode_mb_per_s, timed && cell->decode_mb_per_s > 0,
		 cell->decode_mb_per_s);
	set_count(row, CSV_encode_memory_bytes,
		  known && encode_memory != CELL_MEMORY_UNKNOWN, encode_memory);
	set_count(row, CSV_decode_memory_bytes,
		  known && decode_memory != CELL_MEMORY_UNKNOWN, decode_memory);
	set_bool(row, CSV_lossless, facts->lossless != 0);
}

static void set_extras(struct csv_row *row, const struct cell_row *cell)
{
	const struct cell_facts *facts = &cell->fact->facts;
	const struct dictionary_row *dictionary = &cell->dictionary;
	bool known = cell->known, timed = known && cell->fact->timed;

	set_real(row, CSV_storage,
		 known && cell->stack.known && cell->stack.has_storage,
		 cell->stack.storage);
	set_count(row, CSV_stored_bytes, known && facts->storage_unit,
		  facts->stored_bytes);
	set_count(row, CSV_dictionary_bytes, known && dictionary->has,
		  facts->dictionary_bytes);
	set_real(row, CSV_dictionary_own, known && dictionary->known,
		 dictionary->own);
	set_real(row, CSV_dictionary_won, known && dictionary->known,
		 dictionary->won);
	set_real(row, CSV_encode_spread, timed,
		 cell->fact->timing.encode_spread);
	set_real(row, CSV_decode_spread, timed,
		 cell->fact->timing.decode_spread);
	if (timed)
		set_bool(row, CSV_timing_noisy, cell->timing_noisy);
}

static void cell_line(FILE *out, const struct corpus_view *view,
		      const struct cell_row *cell)
{
	struct csv_row row = start_row("cell", view);
	const struct cell_fact *fact = cell->fact;

	set_text(&row, CSV_name, fact->key.codec);
	set_text(&row, CSV_level, fact->key.level);
	set_text(&row, CSV_layout, fact->key.layout);
	set_text(&row, CSV_status,
		 cell_failed(fact) ? "failed" : outcome_name(fact->outcome));
	set_text(&row, CSV_reason, fact->reason);
	set_real(&row, CSV_bits_per_symbol, cell->known, cell->bits_per_symbol);
	set_interval(&row, cell->known, &cell->interval);
	set_gap(&row, cell);
	set_costs(&row, cell);
	set_extras(&row, cell);
	emit(out, &row);
}

static void corpus_lines(FILE *out, const struct corpus_view *view)
{
	corpus_line(out, view);
	if (view->fact->outcome != OUTCOME_DONE)
		return;
	for (size_t i = 0; i < view->order_count; i++)
		order_line(out, view, &view->orders[i]);
	for (size_t i = 0; i < view->estimate_count; i++)
		estimate_line(out, view, &view->estimates[i]);
	floor_line(out, view);
	bracket_line(out, view);
	for (size_t i = 0; i < view->cell_count; i++)
		cell_line(out, view, &view->cells[i]);
}

static enum status csv_write(FILE *out, const struct analysis *analysis,
			     struct reason *why)
{
	struct csv_row header = {0};

	for (unsigned i = 0; i < CSV_COLUMN_COUNT; i++)
		set_text(&header, (enum csv_column)i, titles[i]);
	emit(out, &header);
	for (size_t i = 0; i < analysis->corpus_count; i++)
		corpus_lines(out, &analysis->corpora[i]);
	return report_finish(out, STATUS_OK, why);
}

const struct report_format report_csv = {
	.name = "csv",
	.summary = "one flat table (RFC 4180) of every figure",
	.write = csv_write,
};
