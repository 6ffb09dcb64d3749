/*
 * The mixer's arithmetic, included once by each instruction set's file, which
 * defines lanes_dot and lanes_train before.
 */
#ifndef PREDICT_MIXING_H
#define PREDICT_MIXING_H

#include "predict/components.h"

/*
 * Steps of the weights, in 2^-10 of error times input: four times as large at
 * first, as far as the decisions seen are few.
 */
#define RATE_LAST 40
#define RATE_MORE 120
#define LEARNING_END (1U << 20)

/* Entries of the final stages move by 1/64 of their error. */
#define STAGE_RATE 6
#define STAGE_ROUND 63U

ALWAYS_INLINE int32_t logit_clip(int32_t x)
{
	if (x > LOGIT_MAX)
		return LOGIT_MAX;
	return x < -LOGIT_MAX ? -LOGIT_MAX : x;
}

/* Error of a 16-bit probability, in -65535..65535. */
ALWAYS_INLINE int32_t error_of(unsigned p, unsigned bit)
{
	return (int32_t)(bit << 16) - (int32_t)p;
}

ALWAYS_INLINE unsigned stage_predict(struct mixer *mixer, struct mixing *mixing,
				     unsigned i, size_t row)
{
	unsigned at = (unsigned)(mixing->x + STAGE_STEP * (STAGE_USED / 2));
	unsigned low = at / STAGE_STEP, part = at % STAGE_STEP;
	uint16_t *entry = &mixer->stage[i][row * STAGE_ROOM + low];

	mixing->stage[i] = entry;
	mixing->nearer[i] = part >= STAGE_STEP / 2;
	return (entry[0] * (STAGE_STEP - part) + entry[1] * part) / STAGE_STEP;
}

/* Rounded away, so that it gets to the ends. */
ALWAYS_INLINE void stage_update(struct mixing *mixing, unsigned i, unsigned bit)
{
	uint16_t *entry = mixing->stage[i] + mixing->nearer[i];
	unsigned p = *entry;

	*entry = (uint16_t)(bit ? p + ((65535 - p + STAGE_ROUND) >> STAGE_RATE)
				: p - ((p + STAGE_ROUND) >> STAGE_RATE));
}

/* Set i with the weights of a row of it. */
ALWAYS_INLINE int64_t set_predict(struct mixer *mixer, struct mixing *mixing,
				  unsigned i, size_t row, unsigned inputs)
{
	int16_t *weights =
		mixer->weights + (i * (size_t)SET_ROWS + row) * inputs;
	int32_t dot = lanes_dot(mixing->inputs, weights, inputs) >> 14;

	dot = logit_clip(dot);
	mixing->weights[i] = weights;
	mixing->dot[i] = dot;
	mixing->p[i] = mixer->tables.squash[dot + LOGIT_MAX];
	return (int64_t)dot * mixing->final[i];
}

ALWAYS_INLINE void set_update(struct mixer *mixer, struct mixing *mixing,
			      unsigned i, unsigned bit, unsigned inputs)
{
	int32_t step = (error_of(mixing->p[i], bit) * mixer->rate) >> 10;
	int32_t error = error_of(mixing->p_final, bit) >> 3;

	mixing->final[i] += (mixing->dot[i] * error) >> 13;
	lanes_train(mixing->inputs, mixing->weights[i], inputs, (int16_t)step);
}

/* By the match (none, short, long, doubtful), contexts seen, and bit. */
ALWAYS_INLINE unsigned match_row(const struct selection *at)
{
	unsigned kind = at->step == 0 ? 0 : at->step < 16 ? 1 : 2;
	/* Of 28 contexts every second counts. */
	unsigned hits = at->view->hits > 14 ? 14 + (at->view->hits > 21)
					    : at->view->hits;

	kind += at->step > 27 ? 1 : 0;
	return (kind * 16 + hits) * 4 + (at->bit >> 1);
}

ALWAYS_INLINE unsigned mix_predict(struct mixer *mixer,
				   const struct selection *at,
				   struct mixing *mixing, unsigned inputs)
{
	unsigned match = match_row(at);
	int64_t sum;
	unsigned p0, p1, p;

	mixing->final = mixer->final[match];
	sum = set_predict(mixer, mixing, 0, at->partial, inputs);
	sum += set_predict(mixer, mixing, 1, match, inputs);
	sum += set_predict(mixer, mixing, 2, at->view->select[2], inputs);
	mixing->x = logit_clip((int32_t)(sum >> 16));
	mixing->p_final = mixer->tables.squash[mixing->x + LOGIT_MAX];
	p0 = stage_predict(mixer, mixing, 0,
			   stage_row(at->view, 0, at->partial));
	p1 = stage_predict(mixer, mixing, 1,
			   stage_row(at->view, 1, at->partial));
	p = (mixing->p_final + p0 + 2 * p1 + 2) >> 2;
	return p < 1 ? 1 : p > 65535 ? 65535 : p;
}

ALWAYS_INLINE void mix_update(struct mixer *mixer, struct mixing *mixing,
			      unsigned bit, unsigned inputs)
{
	set_update(mixer, mixing, 0, bit, inputs);
	set_update(mixer, mixing, 1, bit, inputs);
	set_update(mixer, mixing, 2, bit, inputs);
	stage_update(mixing, 0, bit);
	stage_update(mixing, 1, bit);
	if (mixer->seen < LEARNING_END && mixer->seen++ % 64 == 0)
		mixer->rate = RATE_LAST + (int32_t)(RATE_MORE * 16384 /
						    (16384 + mixer->seen));
}

/* All eight bits of a byte, given the inputs of each. */
ALWAYS_INLINE void mix_byte(struct mixer *mixer, const struct view *view,
			    unsigned byte, bool lane_failed,
			    const int16_t *inputs, struct tally *tally,
			    unsigned width)
{
	struct selection at = {.view = view, .partial = 1};
	struct mixing mixing;

	for (at.bit = 0; at.bit < 8; at.bit++) {
		unsigned bit = byte >> (7 - at.bit) & 1, p;

		at.step = match_holds(view, 0, at.partial, at.bit, lane_failed);
		/* The byte is not the expected one: nothing left to say. */
		if (lane_failed && at.bit == 7 && at.step)
			break;
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
