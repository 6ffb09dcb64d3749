#include "gap/lengths.h"

#include <stdio.h>
#include <string.h>

#include "base/memory.h"
#include "gap/headline.h"

double cell_payload_bits(const struct cell_fact *cell)
{
	return 8 *
	       ((double)cell->facts.bytes - (double)cell->facts.framing_bytes);
}

bool cell_is_sound(const struct cell_fact *cell)
{
	return cell->outcome == OUTCOME_DONE && cell->facts.lossless;
}

bool cell_same_codec(const struct cell_fact *a, const struct cell_fact *b)
{
	return strcmp(a->key.codec, b->key.codec) == 0;
}

static void add_methods(struct lengths *lengths, const struct corpus_fact *fact)
{
	for (size_t i = 0; i < fact->method_count; i++) {
		const struct method_fact *method = &fact->methods[i];
		struct length row = {.method = method,
				     .page_bytes = method->page_bytes};

		if (method_is_code(method->method) &&
		    code_contribution(method, &row.contribution, NULL))
			lengths->rows[lengths->count++] = row;
	}
}

static void add_cells(struct lengths *lengths, const struct corpus_fact *fact)
{
	for (size_t i = 0; i < fact->cell_count; i++) {
		const struct cell_fact *cell = &fact->cells[i];

		/* What it saw of other pages makes it no code of pages that
		 * start from nothing. */
		if (!cell_is_sound(cell) || cell->facts.dictionary_bytes)
			continue;
		lengths->rows[lengths->count++] = (struct length){
			.cell = cell,
			.page_bytes = cell->page_bytes,
			.contribution = contribution_of_cell(
				cell, cell_payload_bits(cell)),
		};
	}
}

enum status lengths_init(struct lengths *lengths,
			 const struct corpus_fact *fact)
{
	struct lengths made = {0};

	TRY(memory_new(fact->method_count + fact->cell_count,
		       sizeof(*made.rows), &made.rows));
	add_methods(&made, fact);
	add_cells(&made, fact);
	*lengths = made;
	return STATUS_OK;
}

void lengths_release(struct lengths *lengths)
{
	memory_free(lengths->rows);
	*lengths = (struct lengths){0};
}

const struct length *lengths_lowest(const struct lengths *lengths,
				    size_t page_bytes)
{
	const struct length *best = NULL;

	for (size_t i = 0; i < lengths->count; i++) {
		const struct length *row = &lengths->rows[i];

		if (row->page_bytes == page_bytes &&
		    (!best || row->contribution.total_bits <
				      best->contribution.total_bits))
			best = row;
	}
	return best;
}

bool lengths_has_method(const struct lengths *lengths, size_t page_bytes)
{
	for (size_t i = 0; i < lengths->count; i++) {
		if (lengths->rows[i].method &&
		    lengths->rows[i].page_bytes == page_bytes)
			return true;
	}
	return false;
}

void length_name(const struct length *length, char *name, size_t room)
{
	if (length->method)
		(void)snprintf(name, room, "%s", length->method->method);
	else
		(void)snprintf(name, room, "%s %s", length->cell->key.codec,
			       length->cell->key.level);
}

enum status floor_find(const struct lengths *lengths,
		       const struct ground *ground, struct floor_row *row)
{
	const struct length *best = lengths_lowest(lengths, 0);
	struct floor_row made = {0};

	for (size_t i = 0; i < lengths->count; i++)
		made.rows += lengths->rows[i].page_bytes == 0;
	if (!best) {
		made.interval = interval_none("no code and no codec ended well "
					      "on the whole corpus");
		*row = made;
		return STATUS_OK;
	}
	made.known = true;
	made.by_codec = best->cell != NULL;
	made.bits_per_symbol =
		best->contribution.total_bits / (double)ground->fact->n;
	length_name(best, made.held_by, sizeof(made.held_by));
	TRY(ground_interval(ground, &best->contribution, NULL, &made.interval,
			    NULL));
	*row = made;
	return STATUS_OK;
}
