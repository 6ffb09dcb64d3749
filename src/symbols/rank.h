/* Dense codes: the rank of a symbol's value among those that occur. */
#ifndef SYMBOLS_RANK_H
#define SYMBOLS_RANK_H

#include "symbols/sequence.h"

/*
 * Makes room for n codes of as few bytes as code_count ranks need and sets
 * code_width, code_count, distinct and n. STATUS_NO_MEMORY.
 */
MUST_USE enum status codes_new(struct sequence *sequence, size_t n,
			       size_t code_count);
/* Writes code i, big-endian. */
void code_put(struct sequence *sequence, size_t i, uint32_t code);

/*
 * A table over every value below range: mark those that occur, number them in
 * ascending order, then rank[value] is the code of each.
 */
struct rank_table {
	uint32_t *rank; /* owned; before numbering 1 marks a value seen */
	uint32_t range;
};

MUST_USE enum status rank_table_init(struct rank_table *table, uint32_t range);
/* Returns how many different values were marked. */
uint32_t rank_table_number(struct rank_table *table);
void rank_table_release(struct rank_table *table);

/* The values that occur, for ranges too wide for a table. */
struct rank_list {
	uint32_t *values; /* owned; ascending, each once */
	size_t count;
	uint32_t *first; /* owned; first place with upper 16 bits >= i */
};

/* Takes n values over; they are sorted in place (least digit first). */
MUST_USE enum status rank_list_take(struct rank_list *list, uint32_t *values,
				    size_t n);
/* The rank of a value that occurs. */
uint32_t rank_list_find(const struct rank_list *list, uint32_t value);
void rank_list_release(struct rank_list *list);

#endif
