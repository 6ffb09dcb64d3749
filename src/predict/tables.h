/* Integer tables of the predictor: logistic functions and bit histories. */
#ifndef PREDICT_TABLES_H
#define PREDICT_TABLES_H

#include "base/status.h"

#include <stdint.h>

/* For the inmost loops, whose constant arguments must reach them. */
#define ALWAYS_INLINE static inline __attribute__((always_inline))
#define NEVER_INLINE __attribute__((noinline))

/*
 * The logistic domain: x stands for ln(p / (1 - p)) in steps of 1/256, from
 * -LOGIT_MAX to LOGIT_MAX (12 nats: past what 16 bits of probability hold).
 */
#define LOGIT_MAX 3071
#define LOGIT_ROOM (2 * LOGIT_MAX + 1)

/* Probabilities behind bit histories are out of 2^TREND_BITS. */
#define TREND_BITS 28

/* Counts up to this many observations slow an adaptive probability down. */
#define RATE_ROOM 1024

struct predict_tables {
	/* ln(p / (1 - p)) of p = (i + 1/2) / 4096, rounded */
	int16_t stretch[4096];
	/* 65536 / (1 + e^-x) of x = i - LOGIT_MAX, in 1..65535 */
	uint16_t squash[LOGIT_ROOM];
	/* 65536 / (n + 3/2) */
	uint16_t rate[RATE_ROOM];
	/* the bit history that follows on a 0 and on a 1; 0 is empty */
	uint8_t next[256][2];
	/* probability of a one (cells.h) that a history starts with */
	uint32_t start[256];
};

/* Fills all tables; the same on every machine. */
void tables_build(struct predict_tables *tables);

/* The two tables of bit histories (history.c); part of tables_build. */
void history_build(struct predict_tables *tables);

#endif
