#include "predict/tables.h"

#include <stdbool.h>
#include <stddef.h>

/*
 * A bit history in one byte: up to EXACT bits it is the very string; beyond
 * that the counts of zeros and ones and the last bit. Where one count exceeds
 * two, an opposite bit takes part of it away, which favours the recent past
 * (nonstationary counts as in Mahoney's reports on context mixing).
 */
#define EXACT 4
#define HISTORIES 255

struct history {
	uint8_t zeros, ones;
	uint8_t tail; /* the string while short, then the last bit */
};

/* How large the larger count may be, by the smaller one. */
static const uint8_t larger_max[] = {60, 30, 16, 10, 8, 6};

/* What is left of a count when the opposite bit comes. */
static uint8_t discounted(uint8_t count)
{
	static const uint8_t kept[] = {0, 1, 2, 2, 3, 3, 3, 4, 4,
				       4, 4, 4, 4, 5, 5, 5, 5, 5};

	return count < sizeof(kept) ? kept[count] : 6;
}

static bool same(const struct history *a, const struct history *b)
{
	return a->zeros == b->zeros && a->ones == b->ones && a->tail == b->tail;
}

/* Number of a history in the list, which holds count; count if absent. */
static size_t find(const struct history *list, size_t count,
		   const struct history *wanted)
{
	size_t i = 0;

	while (i < count && !same(&list[i], wanted))
		i++;
	return i;
}

static struct history after(struct history h, unsigned bit)
{
	uint8_t *seen = bit ? &h.ones : &h.zeros;
	uint8_t *other = bit ? &h.zeros : &h.ones;
	unsigned total = h.zeros + (unsigned)h.ones;
	uint8_t less, more;

	(*seen)++;
	if (total < EXACT) {
		h.tail = (uint8_t)(total + 1 < EXACT + 1 ? h.tail * 2 + bit
							 : bit);
		return h;
	}
	*other = discounted(*other);
	h.tail = (uint8_t)bit;
	less = *seen < *other ? *seen : *other;
	more = *seen < *other ? *other : *seen;
	if (less < sizeof(larger_max) && more <= larger_max[less])
		return h;
	/* Out of room: the count seen stays where it was. */
	(*seen)--;
	return h;
}

/* Initial probability of a one, with half a count more for the last bit. */
static uint32_t first_guess(const struct history *h)
{
	unsigned total = h->zeros + (unsigned)h->ones;
	uint64_t ones = 10U * h->ones + 4, all = 10U * total + 8;

	if (total) {
		ones += (h->tail & 1) ? 5 : 0;
		all += 5;
	}
	return (uint32_t)((ones << TREND_BITS) / all);
}

void history_build(struct predict_tables *tables)
{
	struct history list[256] = {{0}};
	size_t count = 1;

	/* Breadth first, so that numbers rise with the bits seen. */
	for (size_t i = 0; i < count; i++) {
		for (unsigned bit = 0; bit < 2; bit++) {
			struct history h = after(list[i], bit);
			size_t at = find(list, count, &h);

			if (at == count && count <= HISTORIES)
				list[count++] = h;
			tables->next[i][bit] = (uint8_t)(at < count ? at : i);
		}
		tables->start[i] = first_guess(&list[i]);
	}
}
