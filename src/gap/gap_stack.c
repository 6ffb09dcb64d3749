#include "gap/cell_view.h"

#include <string.h>

/*
 * Lowest payload of the cell's codec at its layout; itself if alone. What a
 * dictionary wins or loses is then seen in the effort of the cell that has it.
 */
static const struct cell_fact *best_level(const struct corpus_fact *fact,
					  const struct cell_fact *cell)
{
	const struct cell_fact *best = NULL;

	for (size_t i = 0; i < fact->cell_count; i++) {
		const struct cell_fact *other = &fact->cells[i];

		if (cell_is_sound(other) && cell_same_codec(other, cell) &&
		    other->page_bytes == cell->page_bytes &&
		    !other->facts.dictionary_bytes &&
		    (!best ||
		     cell_payload_bits(other) < cell_payload_bits(best)))
			best = other;
	}
	return best ? best : cell;
}

/* The lengths that the terms lie between, from the lowest to the cell's. */
struct rungs {
	const struct length *whole, *here; /* F and F_P */
	struct length best, own;           /* payload of the codec */
};

static struct length length_of_cell(const struct cell_fact *cell)
{
	return (struct length){
		.cell = cell,
		.page_bytes = cell->page_bytes,
		.contribution =
			contribution_of_cell(cell, cell_payload_bits(cell)),
	};
}

/* The same run: what lies between is nothing, whatever the data. */
static bool same_run(const struct length *a, const struct length *b)
{
	return a->method == b->method && a->cell == b->cell;
}

/* upper - lower, paired block by block. */
static enum status term(const struct ground *ground, const struct length *upper,
			const struct length *lower, double *bits_per_symbol,
			struct interval *interval)
{
	double bits =
		upper->contribution.total_bits - lower->contribution.total_bits;

	*bits_per_symbol = bits / (double)ground->fact->n;
	if (same_run(upper, lower)) {
		*interval = interval_exact(ground, 0);
		return STATUS_OK;
	}
	return ground_interval(ground, &upper->contribution,
			       &lower->contribution, interval, NULL);
}

static enum status fill(const struct ground *ground, const struct rungs *rungs,
			struct gap_stack *stack)
{
	const struct cell_fact *cell = rungs->own.cell;
	double n = (double)ground->fact->n;

	stack->known = true;
	stack->floor = rungs->whole->contribution.total_bits / n;
	stack->framing = 8 * (double)cell->facts.framing_bytes / n;
	stack->framing_interval = interval_exact(ground, stack->framing);
	stack->has_storage = cell->facts.storage_unit > 0;
	if (stack->has_storage)
		stack->storage = 8 *
				 ((double)cell->facts.stored_bytes -
				  (double)cell->facts.bytes) /
				 n;
	TRY(term(ground, rungs->here, rungs->whole, &stack->restart,
		 &stack->restart_interval));
	TRY(term(ground, &rungs->best, rungs->here, &stack->family,
		 &stack->family_interval));
	return term(ground, &rungs->own, &rungs->best, &stack->effort,
		    &stack->effort_interval);
}

enum status gap_stack_find(const struct ground *ground,
			   const struct lengths *lengths,
			   const struct cell_fact *cell,
			   struct gap_stack *stack)
{
	const struct cell_fact *best = best_level(ground->fact, cell);
	const struct rungs rungs = {
		.whole = lengths_lowest(lengths, 0),
		.here = lengths_lowest(lengths, cell->page_bytes),
		.best = length_of_cell(best),
		.own = length_of_cell(cell),
	};
	struct gap_stack made = {0};

	memcpy(made.best_level, best->key.level, sizeof(made.best_level));
	/*
	 * Without a reference restarted at the same pages, what restarting
	 * costs would be booked as the codec's own weakness.
	 */
	if (rungs.whole && rungs.here &&
	    lengths_has_method(lengths, cell->page_bytes))
		TRY(fill(ground, &rungs, &made));
	*stack = made;
	return STATUS_OK;
}
