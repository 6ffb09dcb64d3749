/*
 * The predictor run over bytes that are all at hand. Nothing differs from the
 * way through one decision after another but the order of work: a chunk's
 * contexts are taken first and their lines called for, then every context goes
 * over the chunk by itself, then the mixer. What a model says of a bit depends
 * on nothing that comes after it, nor on the mixer.
 */
#include "predict/predictor.h"

#include "predict/bases.h"
#include "predict/steps.h"

/* A chunk under way. */
struct chunk {
	uint8_t bytes[CHUNK]; /* less their bases */
	size_t count;
	struct view *views;
	uint8_t active[CHUNK]; /* bytes that are coded bit by bit */
	bool lane_failed[CHUNK];
	size_t actives;
};

/* How far ahead of the past its match table is called for. */
#define WARM 24
/* Bytes of a chunk by which the final stages' rows are called for. */
#define AHEAD 2

/* Calls for the rows of the final stages that a byte's bits go through. */
static void warm_stages(const struct predictor *p, const struct view *view,
			unsigned byte)
{
	for (unsigned bit = 0; bit < 8; bit++) {
		unsigned partial = (byte | 256) >> (8 - bit);

		for (unsigned i = 0; i < 2; i++)
			__builtin_prefetch(
				&p->mixer.stage[i][stage_row(view, i, partial) *
						   STAGE_ROOM],
				1);
	}
}

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
		if (view->lane &&
		    view->expected[0] == (uint8_t)(bytes[i] - view->base))
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
			unsigned p16 = lane_predict(p, view);

			tally_add(&p->tally, hit ? p16 : 65536 - p16);
			lane_update(p, view, hit);
			if (hit)
				continue;
			chunk->lane_failed[i] = true;
		}
		chunk->active[chunk->actives++] = (uint8_t)i;
	}
}

/* One bit of one context, written so that nothing is read twice. */
ALWAYS_INLINE void run_bit(const struct predict_tables *tables,
			   uint32_t *restrict trends, uint8_t *restrict history,
			   unsigned value, int16_t *restrict inputs)
{
	unsigned old = *history;
	uint32_t trend = trends[old];

	inputs[0] = trend_logit(tables, trend);
	inputs[1] = trend_share(trend);
	trends[old] = trend_moved(trend, value);
	*history = tables->next[old][value];
}

/* The slots of two contexts, for the processor has room for both. */
struct duo {
	uint32_t *trend_a, *trend_b;
	uint8_t *a, *b;
};

/* Bit 0..3 of a nibble. */
ALWAYS_INLINE void run_bits(const struct predict_tables *tables,
			    const struct duo *duo, unsigned nibble,
			    unsigned bit, int16_t *inputs)
{
	unsigned node = (nibble | 16) >> (4 - bit);
	unsigned value = nibble >> (3 - bit) & 1;

	run_bit(tables, duo->trend_a, duo->a + node, value, inputs);
	run_bit(tables, duo->trend_b, duo->b + node, value, inputs + 2);
}

ALWAYS_INLINE void run_nibble(const struct predict_tables *tables,
			      const struct duo *duo, unsigned nibble,
			      int16_t *inputs, size_t width)
{
	run_bits(tables, duo, nibble, 0, inputs);
	run_bits(tables, duo, nibble, 1, inputs + width);
	run_bits(tables, duo, nibble, 2, inputs + 2 * width);
	run_bits(tables, duo, nibble, 3, inputs + 3 * width);
}

/* Contexts k and k + 1 over the whole chunk. */
ALWAYS_INLINE void run_duo(struct predictor *p, const struct chunk *chunk,
			   unsigned k, size_t width)
{
	const struct predict_tables *tables = &p->mixer.tables;
	int16_t *inputs = p->chunk_inputs + 2 * k;
	uint8_t *lines = context_lines(p, k);
	uint8_t *lines_b = context_lines(p, k + 1);
	struct duo duo = {.trend_a = p->trend[k], .trend_b = p->trend[k + 1]};
	unsigned lines_log2 = p->lines_log2;
	size_t actives = chunk->actives;

	for (size_t i = 0; i < actives; i++) {
		unsigned at = chunk->active[i], byte = chunk->bytes[at];
		struct view *view = &chunk->views[at];
		const uint32_t *hash = &view->hash[k];
		struct place a, b;

		duo.trend_a[0] = duo.trend_b[0] = TREND_HALF;
		place_begin(&a, lines, lines_log2, hash[0]);
		place_begin(&b, lines_b, lines_log2, hash[1]);
		duo.a = a.slot;
		duo.b = b.slot;
		view->hits = (uint8_t)(view->hits + (a.slot[1] != 0) +
				       (b.slot[1] != 0));
		run_nibble(tables, &duo, byte >> 4, inputs, width);
		inputs += 4 * width;
		place_middle(&a, byte >> 4);
		place_middle(&b, byte >> 4);
		duo.a = a.slot;
		duo.b = b.slot;
		run_nibble(tables, &duo, byte & 15, inputs, width);
		inputs += 4 * width;
	}
}

/* One match over the eight bits of a byte, while it holds. */
ALWAYS_INLINE void run_match(struct predictor *p, const struct view *view,
			     unsigned i, unsigned byte, bool failed,
			     int16_t *inputs, size_t width)
{
	const struct predict_tables *tables = &p->mixer.tables;
	unsigned step = match_holds(view, i, 1, 0, failed), bit = 0;

	for (bool holds = step != 0; bit < 8; bit++) {
		unsigned value = byte >> (7 - bit) & 1;
		unsigned expected = view->expected[i] >> (7 - bit) & 1;
		int16_t both[2] = {0, 0};

		if (holds) {
			uint32_t *cell = &p->match_cell[i][step];

			match_inputs(tables, *cell, step, expected, both);
			*cell = cell_update(tables, *cell, expected == value,
					    MATCH_LIMIT);
			holds = expected == value;
		}
		inputs[0] = both[0];
		if (i == 0)
			inputs[1] = both[1];
		inputs += width;
	}
}

ALWAYS_INLINE void run_common(struct predictor *p, const struct chunk *chunk,
			      size_t width)
{
	const int16_t *stretch = p->mixer.tables.stretch;
	/* Without a second match its input is 0 from the beginning. */
	bool second = p->past.match[1].table != NULL;
	int16_t *inputs = p->chunk_inputs + width - COMMON;

	for (size_t i = 0; i < chunk->actives; i++) {
		unsigned at = chunk->active[i], byte = chunk->bytes[at];
		const struct view *view = &chunk->views[at];
		uint16_t *order1 = p->order1 + (view->last << 8);
		bool failed = chunk->lane_failed[at];

		run_match(p, view, 0, byte, failed, inputs + 2, width);
		if (second)
			run_match(p, view, 1, byte, failed, inputs + 4, width);
		for (unsigned bit = 0; bit < 8; bit++) {
			unsigned partial = (byte | 256) >> (8 - bit);
			unsigned value = byte >> (7 - bit) & 1;

			inputs[0] = stretch[p->order0[partial] >> 4];
			inputs[1] = stretch[order1[partial] >> 4];
			inputs[5] = 256;
			direct_update(&p->order0[partial], value, 5);
			direct_update(&order1[partial], value, 5);
			inputs += width;
		}
	}
}

/* The widths are spelt out; apart, so that each has the registers it needs. */
NEVER_INLINE static void duo_nightly(struct predictor *p,
				     const struct chunk *chunk, unsigned k)
{
	run_duo(p, chunk, k, INPUTS_NIGHTLY);
}

NEVER_INLINE static void duo_deep(struct predictor *p,
				  const struct chunk *chunk, unsigned k)
{
	run_duo(p, chunk, k, INPUTS_DEEP);
}

NEVER_INLINE static void common_nightly(struct predictor *p,
					const struct chunk *chunk)
{
	run_common(p, chunk, INPUTS_NIGHTLY);
}

NEVER_INLINE static void common_deep(struct predictor *p,
				     const struct chunk *chunk)
{
	run_common(p, chunk, INPUTS_DEEP);
}

static void run_chunk(struct predictor *p, struct chunk *chunk)
{
	size_t width = p->mixer.inputs;
	bool deep = width == INPUTS_DEEP;

	run_lanes(p, chunk);
	for (unsigned k = 0; k < p->contexts; k += 2)
		deep ? duo_deep(p, chunk, k) : duo_nightly(p, chunk, k);
	deep ? common_deep(p, chunk) : common_nightly(p, chunk);
	for (size_t i = 0; i < AHEAD && i < chunk->actives; i++)
		warm_stages(p, &chunk->views[chunk->active[i]],
			    chunk->bytes[chunk->active[i]]);
	for (size_t i = 0; i < chunk->actives; i++) {
		unsigned at = chunk->active[i];

		if (i + AHEAD < chunk->actives) {
			unsigned next = chunk->active[i + AHEAD];

			warm_stages(p, &chunk->views[next], chunk->bytes[next]);
		}
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

	if (p->bases)
		return bases_measure_q32(p->bases, count);
	if (p->plan.family == FAMILY_FLAT) {
		p->past.at = end - 1;
		p->pending = true;
		return (int64_t)(8 * count) << 32;
	}
	if (!count)
		return 0;
	look_ahead(p, from, end, p->views);
	for (size_t at = from; at < end; at += CHUNK) {
		struct chunk chunk;

		chunk.count = end - at < CHUNK ? end - at : CHUNK;
		chunk.views = p->views + turn * CHUNK;
		for (size_t i = 0; i < chunk.count; i++)
			chunk.bytes[i] = (uint8_t)(p->past.bytes[at + i] -
						   chunk.views[i].base);
		turn ^= 1;
		if (at + CHUNK < end)
			look_ahead(p, at + CHUNK, end, p->views + turn * CHUNK);
		run_chunk(p, &chunk);
	}
	p->begun = false;
	p->pending = true;
	return tally_q32(&p->tally) - before;
}
