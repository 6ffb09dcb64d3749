#include "gap/cell_view.h"

#include <stdio.h>

#include "base/memory.h"
#include "gap/dictionary_view.h"

/* Below so many bits a symbol, a ratio to the floor says nothing. */
#define PERCENT_FLOOR_LEAST 0.001

static double speed(const struct corpus_fact *fact, bool timed, double seconds)
{
	if (!timed || !(seconds > 0))
		return 0;
	return (double)fact->canonical_bytes / seconds / 1e6;
}

static unsigned effective_order(const struct corpus_view *view, double payload)
{
	for (size_t i = 0; i < view->order_count; i++) {
		const struct order_row *row = &view->orders[i];

		if (row->trusted && row->h_corrected <= payload)
			return row->order;
	}
	return 0;
}

static void fill_speeds(const struct corpus_fact *fact,
			const struct cell_fact *cell, struct cell_row *row)
{
	const struct cell_timing *timing = &cell->timing;

	row->encode_mb_per_s =
		speed(fact, cell->timed, timing->encode_cpu_seconds);
	row->decode_mb_per_s =
		speed(fact, cell->timed, timing->decode_cpu_seconds);
	row->encode_wall_mb_per_s =
		speed(fact, cell->timed, timing->encode_wall_seconds);
	row->decode_wall_mb_per_s =
		speed(fact, cell->timed, timing->decode_wall_seconds);
	row->timing_noisy =
		cell->timed && (timing->encode_spread > TIMING_SPREAD_MOST ||
				timing->decode_spread > TIMING_SPREAD_MOST);
}

static void fill_figures(const struct corpus_view *view, struct cell_row *row)
{
	const struct corpus_fact *fact = view->fact;
	const struct cell_fact *cell = row->fact;
	double n = (double)fact->n, bits = 8 * (double)cell->facts.bytes;

	row->bits_per_symbol = bits / n;
	row->payload_bits_per_symbol = cell_payload_bits(cell) / n;
	row->flush_cost = cell_flush_cost(&cell->facts);
	row->effective_order =
		effective_order(view, row->payload_bits_per_symbol);
	row->has_record = fact->records > 0;
	if (row->has_record)
		row->bits_per_record = bits / (double)fact->records;
	fill_speeds(fact, cell, row);
}

static void fill_against_floor(const struct floor_row *floor,
			       struct cell_row *row)
{
	if (!floor->known)
		return;
	row->gap = row->bits_per_symbol - floor->bits_per_symbol;
	row->has_percent = floor->bits_per_symbol >= PERCENT_FLOOR_LEAST;
	if (row->has_percent)
		row->gap_percent = 100 * row->gap / floor->bits_per_symbol;
	if (row->bits_per_symbol > 0)
		row->efficiency = floor->bits_per_symbol / row->bits_per_symbol;
}

static enum status fill_intervals(const struct ground *ground,
				  const struct length *floor,
				  struct cell_row *row)
{
	const struct cell_fact *cell = row->fact;
	struct contribution achieved =
		contribution_of_cell(cell, 8 * (double)cell->facts.bytes);

	TRY(ground_interval(ground, &achieved, NULL, &row->interval, NULL));
	if (!floor) {
		row->gap_interval = interval_none("no floor to measure from");
		return STATUS_OK;
	}
	/* Its own payload: only framing is between them, whatever the data. */
	if (floor->cell == cell) {
		row->gap_interval = interval_exact(ground, row->gap);
		return STATUS_OK;
	}
	return ground_interval(ground, &achieved, &floor->contribution,
			       &row->gap_interval, NULL);
}

static enum status fill(const struct corpus_view *view,
			const struct ground *ground,
			const struct lengths *lengths, struct cell_row *row)
{
	row->known = cell_is_sound(row->fact);
	if (!row->known) {
		row->interval = interval_none("%.190s", row->fact->reason);
		row->gap_interval = row->interval;
		return STATUS_OK;
	}
	fill_figures(view, row);
	fill_against_floor(&view->floor, row);
	TRY(gap_stack_find(ground, lengths, row->fact, &row->stack));
	TRY(dictionary_find(ground, row->fact, &row->dictionary));
	return fill_intervals(ground, lengths_lowest(lengths, 0), row);
}

enum status cells_init(struct corpus_view *view, const struct ground *ground,
		       const struct lengths *lengths)
{
	const struct corpus_fact *fact = view->fact;

	TRY(memory_new_zeroed(fact->cell_count, sizeof(*view->cells),
			      &view->cells));
	view->cell_count = fact->cell_count;
	for (size_t i = 0; i < fact->cell_count; i++) {
		view->cells[i].fact = &fact->cells[i];
		TRY(fill(view, ground, lengths, &view->cells[i]));
	}
	return STATUS_OK;
}
