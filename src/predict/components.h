/* The models under the mixer: what each says of a bit, and how it learns. */
#ifndef PREDICT_COMPONENTS_H
#define PREDICT_COMPONENTS_H

#include "predict/parts.h"

/* A trend moves by 1/128 of its error; larger and smaller cost .1%. */
#define TREND_SHIFT 8
/* An empty history's trend begins every byte here: it says next to nothing. */
#define TREND_HALF (1U << (TREND_BITS - 1))
#define MATCH_LIMIT 1020
#define LANE_LIMIT 255
/* Slow, for data in which nothing but the frequencies is to be had. */
#define ORDER0_LIMIT 255

/*
 * The two inputs of a bit history: the probability of what follows it in the
 * logistic domain, and as it is.
 */
ALWAYS_INLINE int16_t trend_logit(const struct predict_tables *tables,
				  uint32_t trend)
{
	return tables->stretch[trend >> (TREND_BITS - 12)];
}

ALWAYS_INLINE int16_t trend_share(uint32_t trend)
{
	return (int16_t)((int32_t)(trend >> (TREND_BITS - 11)) - 1024);
}

ALWAYS_INLINE uint32_t trend_moved(uint32_t trend, unsigned bit)
{
	int32_t error = trend_target(bit) - (int32_t)trend;

	return trend + (uint32_t)(error >> TREND_SHIFT);
}

/* Rows of the final stages: by the last byte, and by the last two. */
ALWAYS_INLINE size_t stage_row(const struct view *view, unsigned i,
			       unsigned partial)
{
	if (i == 0)
		return (view->last * 256U + partial) % STAGE_ROWS;
	return (view->hash[1] >> 16 ^ partial * 0x9e35U) % STAGE_ROWS;
}

/* The slot of a context at the beginning of a byte, and in its middle. */
ALWAYS_INLINE void place_begin(struct place *place, uint8_t *lines,
			       unsigned lines_log2, uint32_t hash)
{
	place->line = lines + (size_t)(hash >> (32 - lines_log2)) * LINE_BYTES;
	place->tag = (uint8_t)hash;
	place->slot = slot_find(place->line, place->tag);
}

ALWAYS_INLINE void place_middle(struct place *place, unsigned nibble)
{
	place->slot =
		slot_find(place->line, slot_second_tag(place->tag, nibble));
}

/* A 16-bit probability that moves by a fixed share. */
ALWAYS_INLINE void direct_update(uint16_t *p, unsigned bit, unsigned shift)
{
	int32_t target = bit ? 65535 : 0;

	*p = (uint16_t)(*p + ((target - *p) >> shift));
}

/* The match's inputs: its bit, by how often such a match was right. */
ALWAYS_INLINE void match_inputs(const struct predict_tables *tables,
				uint32_t cell, unsigned step, unsigned expected,
				int16_t *inputs)
{
	int32_t known = -(int32_t)(step != 0);
	int32_t sign = expected ? 1 : -1;
	unsigned p = cell_p16(cell);

	inputs[0] = (int16_t)((tables->stretch[p >> 4] * sign) & known);
	inputs[1] = (int16_t)(((((int32_t)p - 32768) >> 5) * sign) & known);
}

/* The step of match i while the bits so far are its byte's, else 0. */
ALWAYS_INLINE unsigned match_holds(const struct view *view, unsigned i,
				   unsigned partial, unsigned bit,
				   bool lane_failed)
{
	if ((view->expected[i] | 256U) >> (8 - bit) != partial)
		return 0;
	if (i == 0 && lane_failed)
		return MATCH_STEPS - 1;
	return view->match_step[i];
}

#endif
