/*
 * The mixer's arithmetic, included once by each instruction set's file, which
 * defines lanes_dot and lanes_train before.
 */
#ifndef PREDICT_MIXING_H
#define PREDICT_MIXING_H

#include "predict/components.h"

static inline int32_t logit_clip(int32_t x)
{
	if (x > LOGIT_MAX)
		return LOGIT_MAX;
	return x < -LOGIT_MAX ? -LOGIT_MAX : x;
}

/* Error of a 16-bit probability, in -65535..65535. */
static inline int32_t error_of(unsigned p, unsigned bit)
{
	return (int32_t)(bit << 16) - (int32_t)p;
}

static inline void stage_predict(struct mixer *mixer, struct mixing *mixing,
				 unsigned i, unsigned row, unsigned *p)
{
	unsigned at = (unsigned)(mixing->x + STAGE_STEP * (STAGE_ROOM / 2));
	unsigned low = at / STAGE_STEP, part = at % STAGE_STEP;
	uint32_t *entry = &mixer->stage[i][row * STAGE_ROOM + low];
	uint64_t sum = (uint64_t)entry[0] * (STAGE_STEP - part) +
		       (uint64_t)entry[1] * part;

	mixing->stage[i] = entry;
	mixing->nearer[i] = part >= STAGE_STEP / 2;
	*p = (unsigned)(sum / STAGE_STEP >> 16);
}

static inline void stage_update(struct mixing *mixing, unsigned i,
				unsigned bit)
{
	uint32_t *entry = mixing->stage[i] + mixing->nearer[i];

	if (bit)
		*entry += (UINT32_MAX - *entry) >> 6;
	else
		*entry -= *entry >> 6;
}

static inline void select_weights(struct mixer *mixer,
				  const struct selection *at,
				  struct mixing *mixing)
{
	size_t inputs = mixer->inputs;
	size_t row1 = SET_ROWS + at->step * 8 + at->bit;
	size_t row2 = 2 * SET_ROWS + at->view->select[2];

	mixing->weights[0] = mixer->weights + at->partial * inputs;
	mixing->weights[1] = mixer->weights + row1 * inputs;
	mixing->weights[2] = mixer->weights + row2 * inputs;
	mixing->final = mixer->final[at->step * 8 + at->bit];
}

static inline unsigned mix_predict(struct mixer *mixer,
				   const struct selection *at,
				   struct mixing *mixing, unsigned inputs)
{
	const struct predict_tables *tables = &mixer->tables;
	unsigned row = (at->view->last * 3U + at->partial * 5U) % STAGE_ROWS;
	int64_t sum = 0;
	unsigned p0, p1, p;

	select_weights(mixer, at, mixing);
	for (unsigned i = 0; i < SETS; i++) {
		mixing->dot[i] = logit_clip(
			lanes_dot(mixing->inputs, mixing->weights[i], inputs) >>
			14);
		mixing->p[i] = tables->squash[mixing->dot[i] + LOGIT_MAX];
		sum += (int64_t)mixing->dot[i] * mixing->final[i];
	}
	mixing->x = logit_clip((int32_t)(sum >> 16));
	mixing->p_final = tables->squash[mixing->x + LOGIT_MAX];
	stage_predict(mixer, mixing, 0, at->partial, &p0);
	stage_predict(mixer, mixing, 1, row, &p1);
	p = (2 * mixing->p_final + p0 + p1 + 2) >> 2;
	p = p < 1 ? 1 : p > 65535 ? 65535 : p;
	mixing->p_out = p;
	return p;
}

static inline void mix_update(struct mixer *mixer, struct mixing *mixing,
			      unsigned bit, unsigned inputs)
{
	/* Large steps at first: 4 times, falling to 1. */
	int32_t rate = 40 + (int32_t)(120 * 2048 / (2048 + mixer->seen));
	int32_t error = error_of(mixing->p_final, bit);

	if (mixer->seen < 1 << 20)
		mixer->seen++;
	for (unsigned i = 0; i < SETS; i++) {
		int32_t step = (error_of(mixing->p[i], bit) * rate) >> 10;

		mixing->final[i] += (mixing->dot[i] * (error >> 3)) >> 13;
		lanes_train(mixing->inputs, mixing->weights[i], inputs,
			    (int16_t)step);
	}
	stage_update(mixing, 0, bit);
	stage_update(mixing, 1, bit);
}

/* All eight bits of a byte, given the inputs of each. */
static inline void mix_byte(struct mixer *mixer, const struct view *view,
			    unsigned byte, bool lane_failed,
			    const int16_t *inputs, struct tally *tally,
			    unsigned width)
{
	struct selection at = {.view = view, .partial = 1};
	struct mixing mixing;

	for (at.bit = 0; at.bit < 8; at.bit++) {
		unsigned bit = byte >> (7 - at.bit) & 1, p;

		at.step = match_holds(view, 0, at.partial, at.bit,
				      lane_failed);
		mixing.inputs = inputs + (size_t)at.bit * width;
		p = mix_predict(mixer, &at, &mixing, width);
		tally_add(tally, bit ? p : 65536 - p);
		mix_update(mixer, &mixing, bit, width);
		at.partial = at.partial * 2 + bit;
	}
}

static unsigned LANES_PREDICT(struct mixer *mixer, const struct selection *at,
			      struct mixing *mixing)
{
	return mix_predict(mixer, at, mixing, mixer->inputs);
}

static void LANES_UPDATE(struct mixer *mixer, struct mixing *mixing,
			 unsigned bit)
{
	mix_update(mixer, mixing, bit, mixer->inputs);
}

/* The widths are spelt out so that the loops are unrolled. */
static void LANES_BYTE(struct mixer *mixer, const struct view *view,
		       unsigned byte, bool lane_failed, const int16_t *inputs,
		       struct tally *tally)
{
	if (mixer->inputs == INPUTS_NIGHTLY)
		mix_byte(mixer, view, byte, lane_failed, inputs, tally,
			 INPUTS_NIGHTLY);
	else
		mix_byte(mixer, view, byte, lane_failed, inputs, tally,
			 INPUTS_DEEP);
}

#endif
