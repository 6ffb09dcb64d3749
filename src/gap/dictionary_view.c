#include "gap/dictionary_view.h"

#include <string.h>

/* The same codec, level and pages, without the dictionary. */
static const struct cell_fact *find_plain(const struct corpus_fact *fact,
					  const struct cell_fact *cell)
{
	const char *mark = strstr(cell->key.level, CELL_DICTIONARY);
	size_t length = mark ? (size_t)(mark - cell->key.level) : 0;

	for (size_t i = 0; mark && i < fact->cell_count; i++) {
		const struct cell_fact *other = &fact->cells[i];

		if (cell_is_sound(other) && cell_same_codec(other, cell) &&
		    other->page_bytes == cell->page_bytes &&
		    strlen(other->key.level) == length &&
		    memcmp(other->key.level, cell->key.level, length) == 0)
			return other;
	}
	return NULL;
}

/* Bits per symbol of a row of table 1 at a layout; false: not measured. */
static bool bits_of(const struct corpus_fact *fact, const char *method,
		    size_t page_bytes, double *bits)
{
	for (size_t i = 0; i < fact->method_count; i++) {
		const struct method_fact *row = &fact->methods[i];

		if (strcmp(row->method, method) != 0 ||
		    row->page_bytes != page_bytes ||
		    row->outcome != OUTCOME_DONE || !row->findings.series_count)
			continue;
		*bits = bits_from_q16(
				row->findings.series[0].costs.headline_q16) /
			(double)fact->n;
		return true;
	}
	return false;
}

enum status dictionary_find(const struct ground *ground,
			    const struct cell_fact *cell,
			    struct dictionary_row *row)
{
	const struct corpus_fact *fact = ground->fact;
	const struct cell_fact *plain = find_plain(fact, cell);
	struct dictionary_row made = {.has = cell->facts.dictionary_bytes > 0};
	struct contribution with, without;

	if (!made.has || !plain) {
		*row = made;
		return STATUS_OK;
	}
	made.known = true;
	made.own = 8 * (double)cell->facts.dictionary_bytes / (double)fact->n;
	with = contribution_of_cell(cell, 8 * (double)cell->facts.bytes);
	without = contribution_of_cell(plain, 8 * (double)plain->facts.bytes);
	made.won = (without.total_bits - with.total_bits) / (double)fact->n;
	made.warm_known =
		bits_of(fact, REFERENCE_WARM, cell->page_bytes, &made.warm) &&
		bits_of(fact, REFERENCE_COLD, cell->page_bytes, &made.cold);
	TRY(ground_interval(ground, &without, &with, &made.won_interval, NULL));
	*row = made;
	return STATUS_OK;
}
