/* Grams numbered as they turn up, one length at a time. */
#ifndef ESTIMATE_DIRICHLET_GRAMS_H
#define ESTIMATE_DIRICHLET_GRAMS_H

#include "base/memory.h"

#include <string.h>

/* A gram: the number of the gram without its last symbol, that symbol, and how
 * often it was seen. */
struct gram {
	uint32_t shorter, symbol, count;
};

/*
 * A hash table with linear probing over the grams of one length. Numbers rise
 * from 1 and go on rising when it is emptied, so slots left over from before
 * tell themselves and nothing needs to be cleared.
 */
struct gram_table {
	struct gram *grams; /* owned; gram number first + i is grams[i] */
	size_t room;        /* grams that fit */
	uint32_t first;     /* number of grams[0] */
	uint32_t next;      /* number of the next new gram */
	uint32_t limit;     /* next when there is no more room */
	uint32_t *slots;    /* owned; numbers, 0 or stale below first */
	unsigned shift;     /* 64 - log2 of the number of slots */
};

MUST_USE enum status gram_table_init(struct gram_table *table);
void gram_table_release(struct gram_table *table);

/* Empties it; numbers go on. */
void gram_table_restart(struct gram_table *table);
/* Empties it for grams of another length; numbers begin again. */
void gram_table_renew(struct gram_table *table);

/* Makes more room; due when next has reached limit. STATUS_NO_MEMORY. */
MUST_USE enum status gram_table_grow(struct gram_table *table);

static inline size_t gram_slot(const struct gram_table *table, uint32_t shorter,
			       uint32_t symbol)
{
	/* 2^64 over the golden ratio: Knuth, volume 3, 6.4 */
	const uint64_t factor = UINT64_C(0x9e3779b97f4a7c15);
	uint64_t key = (uint64_t)shorter << 32 | symbol;

	/* brings the upper half down, where the product spreads it */
	key ^= key >> 31;
	return (size_t)((key * factor) >> table->shift);
}

/*
 * Counts a gram: returns its number and how often it was seen before through
 * *before. next is below limit.
 */
static inline uint32_t gram_count(struct gram_table *table, uint32_t shorter,
				  uint32_t symbol, uint32_t *before)
{
	size_t mask = ((size_t)1 << (64 - table->shift)) - 1;
	size_t at = gram_slot(table, shorter, symbol);
	struct gram *gram;

	for (; table->slots[at] >= table->first; at = (at + 1) & mask) {
		gram = &table->grams[table->slots[at] - table->first];
		if (gram->shorter == shorter && gram->symbol == symbol) {
			*before = gram->count++;
			return table->slots[at];
		}
	}
	table->slots[at] = table->next;
	table->grams[table->next - table->first] =
		(struct gram){shorter, symbol, 1};
	*before = 0;
	return table->next++;
}

#endif
