/* A chunk's way through the predictor when all of its bytes are at hand. */
#ifndef PREDICT_PASSES_H
#define PREDICT_PASSES_H

#include "predict/parts.h"

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
 * passes_look      the past: views of the bytes from..end, CHUNK at most
 * passes_lanes     the lanes and their tally
 * passes_contexts  contexts from..to, even numbers
 * passes_mix       the common inputs, the mixer and its tally
 */
void passes_look(struct predictor *p, struct chunk *chunk, size_t from,
		 size_t end);
void passes_lanes(struct predictor *p, struct chunk *chunk);
void passes_contexts(struct predictor *p, struct chunk *chunk, unsigned from,
		     unsigned to);
void passes_mix(struct predictor *p, struct chunk *chunk);

/* Calls for the lines of contexts from..to. */
void passes_warm(const struct predictor *p, const struct chunk *chunk,
		 unsigned from, unsigned to);

/*
 * The bytes from..end on two threads, this one and another (pair.c).
 * STATUS_NO_MEMORY: no thread or room for one, nothing is done.
 */
MUST_USE enum status pair_run(struct predictor *p, size_t from, size_t end);

#endif
