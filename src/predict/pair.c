/*
 * Two threads: one looks, decides the lanes and takes the first contexts, the
 * other takes the rest and mixes. Nothing is touched by both but a ring of
 * chunks, so the bits are those of one thread.
 */
#include "predict/passes.h"

#include "base/memory.h"

#include <pthread.h>
#include <sched.h>
#include <stdatomic.h>

#define RING 64
/* Looks at the other's progress before the processor is given away. */
#define SPINS 512

struct ring {
	struct chunk chunk[RING];
	struct view *views;
	int16_t *inputs;
	struct predictor *predictor;
	size_t from, end;
	unsigned split; /* contexts of the first thread */
	_Alignas(64) atomic_size_t filled;
	_Alignas(64) atomic_size_t emptied;
};

static void wait_above(const atomic_size_t *progress, size_t most)
{
	unsigned spins = 0;

	while (atomic_load_explicit(progress, memory_order_acquire) <= most) {
		if (++spins % SPINS == 0)
			sched_yield();
	}
}

static void *fill(void *argument)
{
	struct ring *ring = argument;
	struct predictor *p = ring->predictor;
	struct chunk *before = NULL;
	size_t number = 0;

	for (size_t at = ring->from;; at += CHUNK) {
		struct chunk *chunk = &ring->chunk[number % RING];

		if (at < ring->end) {
			if (number >= RING)
				wait_above(&ring->emptied, number - RING);
			passes_look(p, chunk, at, ring->end, ring->split);
			number++;
		}
		if (before) {
			passes_lanes(p, before);
			passes_contexts(p, before, 0, ring->split);
			atomic_fetch_add_explicit(&ring->filled, 1,
						  memory_order_release);
		}
		if (at >= ring->end)
			return NULL;
		before = chunk;
	}
}

static void empty(struct ring *ring)
{
	struct predictor *p = ring->predictor;
	size_t number = 0;

	for (size_t at = ring->from; at < ring->end; at += CHUNK, number++) {
		struct chunk *chunk = &ring->chunk[number % RING];

		wait_above(&ring->filled, number);
		for (size_t i = 0; i < chunk->count; i++)
			warm_byte(p, chunk, i, ring->split, p->contexts);
		passes_contexts(p, chunk, ring->split, p->contexts);
		passes_mix(p, chunk);
		atomic_fetch_add_explicit(&ring->emptied, 1,
					  memory_order_release);
	}
}

static MUST_USE enum status ring_init(struct ring *ring, struct predictor *p)
{
	size_t inputs = (size_t)CHUNK * 8 * p->mixer.inputs;

	TRY(memory_new((size_t)RING * CHUNK, sizeof(*ring->views),
		       &ring->views));
	TRY(memory_new_lines(RING * inputs, sizeof(*ring->inputs),
			     &ring->inputs));
	for (size_t i = 0; i < RING; i++) {
		ring->chunk[i].views = ring->views + i * CHUNK;
		ring->chunk[i].inputs = ring->inputs + i * inputs;
	}
	ring->predictor = p;
	/* The mixer is about as much work as two thirds of the contexts. */
	ring->split = (p->contexts * 5 / 6 + 1) & ~1U;
	atomic_init(&ring->filled, 0);
	atomic_init(&ring->emptied, 0);
	return STATUS_OK;
}

static void ring_free(struct ring *ring)
{
	memory_free(ring->views);
	memory_free(ring->inputs);
	memory_free(ring);
}

enum status pair_run(struct predictor *p, size_t from, size_t end)
{
	struct ring *ring;
	pthread_t thread;

	TRY(memory_new_lines(1, sizeof(*ring), &ring));
	if (ring_init(ring, p) != STATUS_OK) {
		ring_free(ring);
		return STATUS_NO_MEMORY;
	}
	ring->from = from;
	ring->end = end;
	if (pthread_create(&thread, NULL, fill, ring) != 0) {
		ring_free(ring);
		return STATUS_NO_MEMORY;
	}
	empty(ring);
	(void)pthread_join(thread, NULL);
	ring_free(ring);
	return STATUS_OK;
}
