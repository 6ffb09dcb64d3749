#include "verdict/pairing.h"

#include <stdio.h>
#include <string.h>

#include "cost/findings.h"

static const struct length *reference(const struct lengths *lengths)
{
	for (size_t i = 0; i < lengths->count; i++) {
		const struct length *row = &lengths->rows[i];

		if (row->method && !row->page_bytes &&
		    strcmp(row->method->method, REFERENCE_NAME) == 0)
			return row;
	}
	return NULL;
}

static bool is_yardstick(const struct pairing *pairing,
			 const struct cell_fact *cell)
{
	return !pairing->yardstick || pairing->yardstick == cell;
}

enum status pairing_find(const struct pairing *pairing,
			 const struct cell_fact *cell,
			 struct baseline_pair *pair)
{
	struct contribution achieved =
		contribution_of_cell(cell, 8 * (double)cell->facts.bytes);
	const struct length *floor = reference(pairing->lengths);
	struct contribution other;
	struct interval interval;

	*pair = (struct baseline_pair){.known = false};
	if (!is_yardstick(pairing, cell)) {
		const struct cell_fact *yardstick = pairing->yardstick;

		other = contribution_of_cell(
			yardstick, 8 * (double)yardstick->facts.bytes);
		(void)snprintf(pair->against, sizeof(pair->against), "%s",
			       cell_words(&yardstick->key).text);
	} else if (floor) {
		other = floor->contribution;
		(void)snprintf(pair->against, sizeof(pair->against), "%s",
			       REFERENCE_NAME);
	} else {
		(void)snprintf(pair->reason, sizeof(pair->reason),
			       "the yardstick is paired with %s, which was "
			       "not run",
			       REFERENCE_NAME);
		return STATUS_OK;
	}
	TRY(ground_interval(pairing->ground, &achieved, &other, &interval,
			    NULL));
	(void)snprintf(pair->reason, sizeof(pair->reason), "%s",
		       interval.reason);
	pair->known = interval.known;
	pair->mean = (achieved.total_bits - other.total_bits) /
		     (double)pairing->ground->fact->n;
	pair->standard_error = interval.standard_error;
	pair->effective_blocks = interval.effective_blocks;
	return STATUS_OK;
}
