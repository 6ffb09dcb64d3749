/* The last bases of both strands, and the repeats that they follow. */
#ifndef PREDICT_STRANDS_H
#define PREDICT_STRANDS_H

#include "base/status.h"

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

/* The last 32 bases, latest lowest, and the same on the other strand. */
struct strands {
	uint64_t forward;
	uint64_t reverse; /* oldest lowest, complemented */
};

/* 0..3 for A, C, G, T; 3 - base is the complement. */
static inline unsigned base_code(uint8_t letter)
{
	return letter == 'A' ? 0 : letter == 'C' ? 1 : letter == 'G' ? 2 : 3;
}

static inline void strands_push(struct strands *strands, unsigned base)
{
	strands->forward = strands->forward << 2 | base;
	strands->reverse = strands->reverse >> 2 | (uint64_t)(3 - base) << 62;
}

/* The last order bases as a number; those of the other strand. */
static inline uint64_t strands_context(const struct strands *strands,
				       unsigned order)
{
	return strands->forward & (~UINT64_C(0) >> (64 - 2 * order));
}

static inline uint64_t strands_opposite(const struct strands *strands,
					unsigned order)
{
	return strands->reverse >> (64 - 2 * order);
}

/* A repeat of one strand that is being followed. */
struct repeat {
	size_t at;        /* position expected to come (as its complement) */
	bool going;       /* at is valid */
	bool opposite;    /* at falls, and complements are expected */
	unsigned length;  /* bases that agreed since the last failure */
	uint32_t history; /* the last 16 outcomes, 1 a failure */
};

/* Where contexts of REPEAT_ORDER bases have ended before. */
#define REPEAT_ORDER 20

struct repeats {
	/* owned; position after the context (0: none) over a check of it */
	uint64_t *table;
	unsigned log2;
	struct repeat repeat[2]; /* the same strand, the other */
};

MUST_USE enum status repeats_init(struct repeats *repeats, size_t bytes);
void repeats_release(struct repeats *repeats);
void repeats_restart(struct repeats *repeats);
/*
 * Takes in the base before position at (of bytes, all below at known), which
 * strands has taken in already.
 */
void repeats_push(struct repeats *repeats, const struct strands *strands,
		  const uint8_t *bytes, size_t at);
/* The base that repeat i expects, 0..3, or 4. */
unsigned repeats_expected(const struct repeats *repeats, unsigned i,
			  const uint8_t *bytes);
/* How a repeat stands, 0 (none) to REPEAT_STEPS - 1. */
#define REPEAT_STEPS 32
unsigned repeats_step(const struct repeats *repeats, unsigned i);
/* Warms the cache for a push with these strands. */
void repeats_warm(const struct repeats *repeats, const struct strands *strands);

/* True where every byte is one of A, C, G, T. */
bool bases_only(const uint8_t *bytes, size_t count);

#endif
