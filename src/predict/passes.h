/* A chunk's way through the predictor when all of its bytes are at hand. */
#ifndef PREDICT_PASSES_H
#define PREDICT_PASSES_H

#include "predict/steps.h"

/* A chunk under way. views and inputs are borrowed, CHUNK bytes' worth. */
struct chunk {
	struct view *views;
	int16_t *inputs;      /* CHUNK x 8 x the mixer's inputs */
	uint8_t bytes[CHUNK]; /* less their bases */
	size_t count;
	uint8_t active[CHUNK]; /* bytes that are coded bit by bit */
	bool lane_failed[CHUNK];
	size_t actives;
};

/*
 * In this order for each chunk; chunks in order of their bytes. What one
 * touches none of the others does, so that they may be any number of chunks
 * apart:
 * passes_look      the past: views of the bytes from..end, CHUNK at most; the
 *                  lines of the first contexts are called for on the way
 * passes_lanes     the lanes and their tally
 * passes_contexts  contexts from..to, even numbers
 * passes_mix       the common inputs, the mixer and its tally
 */
void passes_look(struct predictor *p, struct chunk *chunk, size_t from,
		 size_t end, unsigned contexts);
void passes_lanes(struct predictor *p, struct chunk *chunk);
void passes_contexts(struct predictor *p, struct chunk *chunk, unsigned from,
		     unsigned to);
void passes_mix(struct predictor *p, struct chunk *chunk);

/* A byte that is likely to go by without a look into the contexts. */
ALWAYS_INLINE bool in_lane(const struct chunk *chunk, size_t i)
{
	const struct view *view = &chunk->views[i];

	return view->lane && view->expected[0] == chunk->bytes[i];
}

/*
 * Calls for the lines of byte i in contexts from..to. Inline, for a function
 * that does nothing but call for lines is dropped by some compilers as one
 * without effect.
 */
ALWAYS_INLINE void warm_byte(const struct predictor *p,
			     const struct chunk *chunk, size_t i, unsigned from,
			     unsigned to)
{
	const struct view *view = &chunk->views[i];

	if (in_lane(chunk, i))
		return;
	for (unsigned k = from; k < to; k++)
		__builtin_prefetch(context_lines(p, k) +
					   (size_t)(view->hash[k] >>
						    (32 - p->lines_log2)) *
						   LINE_BYTES,
				   1);
}

/*
 * The bytes from..end on two threads, this one and another (pair.c).
 * STATUS_NO_MEMORY: no thread or room for one, nothing is done.
 */
MUST_USE enum status pair_run(struct predictor *p, size_t from, size_t end);

#endif
