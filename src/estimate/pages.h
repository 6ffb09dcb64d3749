/* Where a code row starts afresh: pages of canonical bytes. */
#ifndef ESTIMATE_PAGES_H
#define ESTIMATE_PAGES_H

#include "symbols/sequence.h"

/* The first symbol that begins at this byte or later; n if none does. */
static inline size_t symbol_from(const struct sequence *sequence, size_t byte)
{
	size_t low = 0, high = sequence->n;

	while (low < high) {
		size_t middle = low + (high - low) / 2;

		if (sequence_byte_of(sequence, middle) < byte)
			low = middle + 1;
		else
			high = middle;
	}
	return low;
}

/* Where the page of symbol i ends, as a symbol; page_bytes 0 is one page. A
 * symbol belongs to the page of its first byte. */
static inline size_t page_end(const struct sequence *sequence,
			      size_t page_bytes, size_t i)
{
	size_t page;

	if (page_bytes == 0)
		return sequence->n;
	page = sequence_byte_of(sequence, i) / page_bytes;
	return symbol_from(sequence, (page + 1) * page_bytes);
}

#endif
