/* The predictor's cells: adaptive probabilities and slots of bit histories. */
#ifndef PREDICT_CELLS_H
#define PREDICT_CELLS_H

#include "predict/tables.h"

#include <string.h>

/*
 * An adaptive probability of a one: 22 bits of it over 10 bits of count. It
 * moves by 1 / (count + 3/2) of the error, the count ending at a limit below
 * RATE_ROOM.
 */
ALWAYS_INLINE uint32_t cell_half(void)
{
	return UINT32_C(1) << 31;
}

ALWAYS_INLINE unsigned cell_p16(uint32_t cell)
{
	return cell >> 16;
}

ALWAYS_INLINE uint32_t cell_update(const struct predict_tables *tables,
				   uint32_t cell, unsigned bit, unsigned limit)
{
	unsigned count = cell & 1023;
	int64_t p = (int64_t)(cell >> 10);
	int64_t target = bit ? (1 << 22) - 1 : 0;

	p += ((target - p) * tables->rate[count]) >> 16;
	return (uint32_t)p << 10 | (count < limit ? count + 1 : count);
}

/*
 * What a bit history is followed by: a probability of a one out of
 * 2^TREND_BITS that moves by a fixed share of the error.
 */
ALWAYS_INLINE int32_t trend_target(unsigned bit)
{
	return (int32_t)(bit << TREND_BITS) - (int32_t)bit;
}

/*
 * A line of 64 bytes holds four slots, each the 15 bit histories of one nibble
 * in one context; bytes 0 to 3 are tags that tell the slots apart. Both
 * nibbles of a byte context look in the same line, so a context costs one
 * cache line a byte.
 */
#define LINE_BYTES 64
#define LINE_SLOTS 4
#define SLOT_CELLS 15

/* Tag of the second nibble's slot; differs from the first one's. */
ALWAYS_INLINE uint8_t slot_second_tag(uint8_t tag, unsigned nibble)
{
	uint8_t second = (uint8_t)(tag * 5U + (16 + nibble) * 0x3bU);

	return second == tag ? (uint8_t)(second ^ 0x80) : second;
}

/*
 * The slot with this tag, made empty in the place of the least used one where
 * the line has none. Node n of 1..15 is at the returned address plus n.
 */
ALWAYS_INLINE uint8_t *slot_find(uint8_t *line, uint8_t tag)
{
	uint32_t tags, differ, zero, least, other;
	uint8_t *cells = line + LINE_SLOTS;
	unsigned slot;

	/* One load; spelt out so that the order is the same everywhere. */
	tags = line[0] | (uint32_t)line[1] << 8 | (uint32_t)line[2] << 16 |
	       (uint32_t)line[3] << 24;
	differ = tags ^ tag * UINT32_C(0x01010101);
	zero = (differ - UINT32_C(0x01010101)) & ~differ & UINT32_C(0x80808080);
	if (zero) {
		slot = (unsigned)__builtin_ctz(zero) >> 3;
		return cells - 1 + SLOT_CELLS * slot;
	}
	/* Histories are numbered by age; the slot's number breaks ties. */
	least = cells[0] * 4U;
	other = cells[SLOT_CELLS] * 4U + 1;
	least = other < least ? other : least;
	other = cells[2 * SLOT_CELLS] * 4U + 2;
	least = other < least ? other : least;
	other = cells[3 * SLOT_CELLS] * 4U + 3;
	least = other < least ? other : least;
	slot = least & 3;
	line[slot] = tag;
	cells += SLOT_CELLS * slot;
	/* Two overlapping stores of eight bytes. */
	memset(cells, 0, 8);
	memset(cells + SLOT_CELLS - 8, 0, 8);
	return cells - 1;
}

#endif
