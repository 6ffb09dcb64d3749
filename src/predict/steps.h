/* The steps of a byte that both ways through a predictor share. */
#ifndef PREDICT_STEPS_H
#define PREDICT_STEPS_H

#include "predict/components.h"

/* Node of a slot, 1..15, for the bits of a byte so far. */
ALWAYS_INLINE unsigned nibble_node(unsigned partial, unsigned bit)
{
	unsigned within = bit & 3;

	return (1U << within) | (partial & ((1U << within) - 1));
}

ALWAYS_INLINE uint8_t *context_lines(const struct predictor *p, unsigned i)
{
	return p->lines + ((size_t)i << p->lines_log2) * LINE_BYTES;
}

/* The probabilities that a lane's decision is made of. */
ALWAYS_INLINE void lane_cells(struct predictor *p, const struct view *view,
			      uint32_t *cells[LANE_CELLS])
{
	unsigned expected = view->expected[0];

	cells[0] = &p->lane_cell[view->match_step[0]][expected];
	for (unsigned i = 1; i < LANE_CELLS; i++) {
		uint32_t hash = view->hash[i == 1 ? 1 : 3] >> 8;

		hash = (hash + expected * 0x9e35U) % LANE_ROWS;
		cells[i] = &p->lane_row[i - 1][hash];
	}
}

/* Probability that the expected byte comes; the lane's own small mixer. */
ALWAYS_INLINE unsigned lane_predict(struct predictor *p,
				    const struct view *view)
{
	const struct predict_tables *tables = &p->mixer.tables;
	struct lane *lane = &p->lane;
	uint32_t *cells[LANE_CELLS];
	int64_t sum = 0;

	lane_cells(p, view, cells);
	for (unsigned i = 0; i < LANE_CELLS; i++) {
		lane->x[i] = tables->stretch[*cells[i] >> 20];
		sum += (int64_t)lane->x[i] * lane->weight[i];
	}
	sum >>= 16;
	sum = sum > LOGIT_MAX ? LOGIT_MAX : sum;
	sum = sum < -LOGIT_MAX ? -LOGIT_MAX : sum;
	lane->p16 = tables->squash[sum + LOGIT_MAX];
	return lane->p16;
}

ALWAYS_INLINE void lane_update(struct predictor *p, const struct view *view,
			       unsigned hit)
{
	struct lane *lane = &p->lane;
	int32_t error = (int32_t)(hit << 16) - (int32_t)lane->p16;
	uint32_t *cells[LANE_CELLS];

	lane_cells(p, view, cells);
	for (unsigned i = 0; i < LANE_CELLS; i++) {
		lane->weight[i] += (lane->x[i] * (error >> 3)) >> 12;
		*cells[i] = cell_update(&p->mixer.tables, *cells[i], hit,
					LANE_LIMIT);
	}
}

/* The inputs that are no bit histories: COMMON of them. */
ALWAYS_INLINE void common_inputs(struct predictor *p, const struct view *view,
				 unsigned partial, unsigned bit,
				 bool lane_failed, int16_t *inputs)
{
	const struct predict_tables *tables = &p->mixer.tables;
	int16_t second[2] = {0, 0};

	inputs[0] = tables->stretch[p->order0[partial] >> 20];
	inputs[1] =
		tables->stretch[p->order1[view->last * 256U + partial] >> 4];
	for (unsigned i = 0; i < 2; i++) {
		unsigned step = match_holds(view, i, partial, bit, lane_failed);
		unsigned expected = view->expected[i] >> (7 - bit) & 1;

		match_inputs(tables, p->match_cell[i][step], step, expected,
			     i ? second : inputs + 2);
	}
	inputs[4] = second[0];
	inputs[5] = 256;
}

ALWAYS_INLINE void common_update(struct predictor *p, const struct view *view,
				 unsigned partial, unsigned bit,
				 bool lane_failed, unsigned value)
{
	const struct predict_tables *tables = &p->mixer.tables;

	p->order0[partial] =
		cell_update(tables, p->order0[partial], value, ORDER0_LIMIT);
	direct_update(&p->order1[view->last * 256U + partial], value, 5);
	for (unsigned i = 0; i < 2; i++) {
		unsigned step = match_holds(view, i, partial, bit, lane_failed);
		unsigned expected = view->expected[i] >> (7 - bit) & 1;
		uint32_t *cell = &p->match_cell[i][step];

		if (step)
			*cell = cell_update(tables, *cell, expected == value,
					    MATCH_LIMIT);
	}
}

#endif
