/*
 * The predictor run over bytes that are all at hand. Nothing differs from the
 * way through one decision after another but the order of work: a chunk's
 * contexts are taken first and their lines called for, then every context goes
 * over the chunk by itself, then the mixer. What a model says of a bit depends
 * on nothing that comes after it, nor on the mixer.
 */
#include "predict/predictor.h"

#include "predict/steps.h"

/* A chunk under way. */
struct chunk {
	const uint8_t *bytes;
	size_t count;
	struct view *views;
	uint8_t active[CHUNK]; /* bytes that are coded bit by bit */
	bool lane_failed[CHUNK];
	size_t actives;
};

/* How far ahead of the past its match table is called for. */
#define WARM 24

/* Takes the views of the bytes at hand, and calls for their lines. */
static void look_ahead(struct predictor *p, size_t from, size_t end,
		       struct view *views)
{
	struct past *past = &p->past;
	const uint8_t *bytes = past->bytes;
	size_t to = from + CHUNK < end ? from + CHUNK : end;

	for (size_t i = from; i < to; i++) {
		struct view *view = views + (i - from);

		if (past->at < i)
			past_push(past);
		past_look(past, view);
		if (i + WARM < end)
			past_warm(past, bytes, i + WARM);
		if (view->lane && view->expected[0] == bytes[i])
			continue;
		for (unsigned k = 0; k < p->contexts; k++)
			__builtin_prefetch(
				context_lines(p, k) +
					(size_t)(view->hash[k] >>
						 (32 - p->lines_log2)) *
						LINE_BYTES,
				1);
	}
}

/* Decides the lanes; what is left goes bit by bit. */
static void run_lanes(struct predictor *p, struct chunk *chunk)
{
	chunk->actives = 0;
	for (size_t i = 0; i < chunk->count; i++) {
		const struct view *view = &chunk->views[i];
		unsigned hit = view->expected[0] == chunk->bytes[i];

		chunk->lane_failed[i] = false;
		if (view->lane) {
			unsigned p16 = lane_p16(p, view);

			tally_add(&p->tally, hit ? p16 : 65536 - p16);
			lane_update(p, view, hit);
			if (hit)
				continue;
			chunk->lane_failed[i] = true;
		}
		chunk->active[chunk->actives++] = (uint8_t)i;
	}
}

/* Two contexts side by side, for the processor has room for both. */
struct duo {
	int32_t *trend[2];
	uint8_t *slot[2];
};

static inline void run_nibble(const struct predict_tables *tables,
			      const struct duo *duo, unsigned nibble,
			      int16_t *inputs, size_t width)
{
	unsigned node = 1;

	for (unsigned bit = 0; bit < 4; bit++) {
		unsigned value = nibble >> (3 - bit) & 1;

		history_inputs(tables, duo->trend[0], duo->slot[0][node],
			       inputs);
		history_inputs(tables, duo->trend[1], duo->slot[1][node],
			       inputs + 2);
		history_update(tables, duo->trend[0], &duo->slot[0][node],
			       value);
		history_update(tables, duo->trend[1], &duo->slot[1][node],
			       value);
		node = node * 2 + value;
		inputs += width;
	}
}

/* Contexts k and k + 1 over the whole chunk. */
static void run_duo(struct predictor *p, const struct chunk *chunk, unsigned k)
{
	const struct predict_tables *tables = &p->mixer.tables;
	size_t width = p->mixer.inputs;
	int16_t *inputs = p->chunk_inputs + 2 * k;
	uint8_t *lines[2] = {context_lines(p, k), context_lines(p, k + 1)};
	struct duo duo = {.trend = {p->trend[k], p->trend[k + 1]}};
	struct place place[2];

	for (size_t i = 0; i < chunk->actives; i++) {
		unsigned at = chunk->active[i], byte = chunk->bytes[at];
		const uint32_t *hash = &chunk->views[at].hash[k];

		for (unsigned j = 0; j < 2; j++) {
			place_begin(&place[j], lines[j], p->lines_log2,
				    hash[j]);
			duo.slot[j] = place[j].slot;
		}
		run_nibble(tables, &duo, byte >> 4, inputs, width);
		inputs += 4 * width;
		for (unsigned j = 0; j < 2; j++) {
			place_middle(&place[j], byte >> 4);
			duo.slot[j] = place[j].slot;
		}
		run_nibble(tables, &duo, byte & 15, inputs, width);
		inputs += 4 * width;
	}
}

static void run_common(struct predictor *p, const struct chunk *chunk)
{
	size_t width = p->mixer.inputs;
	int16_t *inputs = p->chunk_inputs + width - COMMON;

	for (size_t i = 0; i < chunk->actives; i++) {
		unsigned at = chunk->active[i], byte = chunk->bytes[at];
		const struct view *view = &chunk->views[at];
		bool failed = chunk->lane_failed[at];
		unsigned partial = 1;

		for (unsigned bit = 0; bit < 8; bit++) {
			unsigned value = byte >> (7 - bit) & 1;

			common_inputs(p, view, partial, bit, failed, inputs);
			common_update(p, view, partial, bit, failed, value);
			partial = partial * 2 + value;
			inputs += width;
		}
	}
}

static void run_chunk(struct predictor *p, struct chunk *chunk)
{
	size_t width = p->mixer.inputs;

	run_lanes(p, chunk);
	for (unsigned k = 0; k < p->contexts; k += 2)
		run_duo(p, chunk, k);
	run_common(p, chunk);
	for (size_t i = 0; i < chunk->actives; i++) {
		unsigned at = chunk->active[i];

		p->lanes->byte(&p->mixer, &chunk->views[at], chunk->bytes[at],
			       chunk->lane_failed[at],
			       p->chunk_inputs + i * 8 * width, &p->tally);
	}
}

int64_t predictor_measure_q32(struct predictor *p, size_t count)
{
	int64_t before = tally_q32(&p->tally);
	size_t from = p->past.at + p->pending, end = from + count;
	unsigned turn = 0;

	if (p->plan.family == FAMILY_FLAT) {
		p->past.at = end - 1;
		p->pending = true;
		return (int64_t)(8 * count) << 32;
	}
	if (!count)
		return 0;
	look_ahead(p, from, end, p->views);
	for (size_t at = from; at < end; at += CHUNK) {
		struct chunk chunk = {.bytes = p->past.bytes + at};

		chunk.count = end - at < CHUNK ? end - at : CHUNK;
		chunk.views = p->views + turn * CHUNK;
		turn ^= 1;
		if (at + CHUNK < end)
			look_ahead(p, at + CHUNK, end,
				   p->views + turn * CHUNK);
		run_chunk(p, &chunk);
	}
	p->begun = false;
	p->pending = true;
	return tally_q32(&p->tally) - before;
}
