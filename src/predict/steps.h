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

ALWAYS_INLINE uint8_t *context_lines(struct predictor *p, unsigned i)
{
	return p->lines + ((size_t)i << p->lines_log2) * LINE_BYTES;
}

ALWAYS_INLINE unsigned lane_p16(const struct predictor *p,
				const struct view *view)
{
	unsigned step = view->match_step[0];
	unsigned p16 = cell_p16(p->lane_cell[step][view->expected[0]]);

	return p16 < 1 ? 1 : p16;
}

ALWAYS_INLINE void lane_update(struct predictor *p, const struct view *view,
			       unsigned hit)
{
	uint32_t *cell = &p->lane_cell[view->match_step[0]][view->expected[0]];

	*cell = cell_update(&p->mixer.tables, *cell, hit, LANE_LIMIT);
}

/* The inputs that are no bit histories: COMMON of them. */
ALWAYS_INLINE void common_inputs(struct predictor *p, const struct view *view,
				 unsigned partial, unsigned bit,
				 bool lane_failed, int16_t *inputs)
{
	const struct predict_tables *tables = &p->mixer.tables;
	int16_t second[2] = {0, 0};

	inputs[0] = tables->stretch[p->order0[partial] >> 4];
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

	direct_update(&p->order0[partial], value, 5);
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
