/*
 * The predictor run over bytes that are all at hand. Nothing differs from the
 * way through one decision after another but the order of work: a chunk's
 * contexts are taken first and their lines called for, then every context goes
 * over the chunk by itself, then the mixer. What a model says of a bit depends
 * on nothing that comes after it, nor on the mixer.
 */
#include "predict/predictor.h"

#include "predict/bases.h"
#include "predict/journal.h"
#include "predict/passes.h"
#include "predict/steps.h"

/* How far ahead of the past its match table is called for. */
#define WARM 24
/* Bytes of a chunk by which the final stages' rows are called for. */
#define AHEAD 2
/* Fewer bytes are not worth a second thread. */
#define PAIR_LEAST 2048

/* Calls for the rows of the final stages that a byte's bits go through. */
ALWAYS_INLINE void warm_stages(const struct predictor *p,
			       const struct view *view, unsigned byte)
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

void passes_look(struct predictor *p, struct chunk *chunk, size_t from,
		 size_t end, unsigned contexts)
{
	struct past *past = &p->past;
	const uint8_t *bytes = past->bytes;

	chunk->count = from + CHUNK < end ? CHUNK : end - from;
	for (size_t i = 0; i < chunk->count; i++) {
		struct view *view = &chunk->views[i];

		if (past->at < from + i) {
			if (p->journal)
				journal_matches(p->journal, p);
			past_push(past);
		}
		past_look(past, view);
		chunk->bytes[i] = (uint8_t)(bytes[from + i] - view->base);
		if (from + i + WARM < end)
			past_warm(past, bytes, from + i + WARM);
		warm_byte(p, chunk, i, 0, contexts);
	}
	if (p->journal)
		journal_lines(p->journal, p, chunk);
}

/* Decides the lanes; what is left goes bit by bit. */
void passes_lanes(struct predictor *p, struct chunk *chunk)
{
	chunk->actives = 0;
	for (size_t i = 0; i < chunk->count; i++) {
		const struct view *view = &chunk->views[i];
		unsigned hit = view->expected[0] == chunk->bytes[i];

		chunk->lane_failed[i] = false;
		if (view->lane) {
			unsigned p16 = lane_predict(p, view);

			tally_add(&p->lane_tally, hit ? p16 : 65536 - p16);
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
	int16_t *inputs = chunk->inputs + 2 * k;
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
	int16_t *inputs = chunk->inputs + width - COMMON;

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

			inputs[0] = stretch[p->order0[partial] >> 20];
			inputs[1] = stretch[order1[partial] >> 4];
			inputs[5] = 256;
			p->order0[partial] = cell_update(&p->mixer.tables,
							 p->order0[partial],
							 value, ORDER0_LIMIT);
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

void passes_contexts(struct predictor *p, struct chunk *chunk, unsigned from,
		     unsigned to)
{
	bool deep = p->mixer.inputs == INPUTS_DEEP;

	for (unsigned k = from; k < to; k += 2)
		deep ? duo_deep(p, chunk, k) : duo_nightly(p, chunk, k);
}

/* Calls for the final stages of an active byte, where there is one. */
ALWAYS_INLINE void warm_active(const struct predictor *p,
			       const struct chunk *chunk, size_t i)
{
	if (i < chunk->actives)
		warm_stages(p, &chunk->views[chunk->active[i]],
			    chunk->bytes[chunk->active[i]]);
}

void passes_mix(struct predictor *p, struct chunk *chunk)
{
	size_t width = p->mixer.inputs;

	width == INPUTS_DEEP ? common_deep(p, chunk) : common_nightly(p, chunk);
	for (size_t i = 0; i < AHEAD; i++)
		warm_active(p, chunk, i);
	for (size_t i = 0; i < chunk->actives; i++) {
		unsigned at = chunk->active[i];

		warm_active(p, chunk, i + AHEAD);
		p->lanes->byte(&p->mixer, &chunk->views[at], chunk->bytes[at],
			       chunk->lane_failed[at],
			       chunk->inputs + i * 8 * width, &p->tally);
	}
}

/* One chunk is looked at while that before it is under way. */
static void run_alone(struct predictor *p, size_t from, size_t end)
{
	struct chunk chunk[2] = {
		{.views = p->views, .inputs = p->chunk_inputs},
		{.views = p->views + CHUNK, .inputs = p->chunk_inputs}};
	unsigned turn = 0;

	passes_look(p, &chunk[0], from, end, p->contexts);
	for (size_t at = from; at < end; at += CHUNK, turn ^= 1) {
		if (at + CHUNK < end) {
			passes_look(p, &chunk[turn ^ 1], at + CHUNK, end,
				    p->contexts);
		}
		passes_lanes(p, &chunk[turn]);
		passes_contexts(p, &chunk[turn], 0, p->contexts);
		passes_mix(p, &chunk[turn]);
	}
}

static int64_t both_tallies(const struct predictor *p)
{
	return tally_q32(&p->tally) + tally_q32(&p->lane_tally);
}

int64_t predictor_measure_q32(struct predictor *p, size_t count)
{
	int64_t before = both_tallies(p);
	size_t from = p->past.at + p->pending, end = from + count;

	if (p->bases)
		return bases_measure_q32(p->bases, count);
	if (p->plan.family == FAMILY_FLAT) {
		p->past.at = end - 1;
		p->pending = true;
		return (int64_t)(8 * count) << 32;
	}
	if (!count)
		return 0;
	if (p->threads < 2 || p->journal || count < PAIR_LEAST ||
	    pair_run(p, from, end) != STATUS_OK)
		run_alone(p, from, end);
	p->begun = false;
	p->pending = true;
	return both_tallies(p) - before;
}
