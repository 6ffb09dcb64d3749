#include "gap/cell_view.h"

#include <string.h>

/* Lowest payload of the cell's codec at its layout; itself if alone. */
static const struct cell_fact *best_level(const struct corpus_fact *fact,
					  const struct cell_fact *cell)
{
	const struct cell_fact *best = cell;

	for (size_t i = 0; i < fact->cell_count; i++) {
		const struct cell_fact *other = &fact->cells[i];

		if (cell_is_sound(other) && cell_same_codec(other, cell) &&
		    other->page_bytes == cell->page_bytes &&
		    cell_payload_bits(other) < cell_payload_bits(best))
			best = other;
	}
	return best;
}

struct gap_stack gap_stack_of(const struct corpus_fact *fact,
			      const struct lengths *lengths,
			      const struct cell_fact *cell)
{
	const struct length *whole = lengths_lowest(lengths, 0);
	const struct length *here = lengths_lowest(lengths, cell->page_bytes);
	const struct cell_fact *best = best_level(fact, cell);
	double n = (double)fact->n, payload = cell_payload_bits(cell);
	double floor, at_layout;
	struct gap_stack stack = {0};

	memcpy(stack.best_level, best->key.level, sizeof(stack.best_level));
	/*
	 * Without a reference restarted at the same pages, what restarting
	 * costs would be booked as the codec's own weakness.
	 */
	if (!whole || !here || !lengths_has_method(lengths, cell->page_bytes))
		return stack;
	floor = whole->contribution.total_bits;
	at_layout = here->contribution.total_bits;
	stack.known = true;
	stack.floor = floor / n;
	stack.restart = (at_layout - floor) / n;
	stack.family = (cell_payload_bits(best) - at_layout) / n;
	stack.effort = (payload - cell_payload_bits(best)) / n;
	stack.framing = 8 * (double)cell->facts.framing_bytes / n;
	return stack;
}
