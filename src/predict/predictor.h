/* The mixing predictor: probabilities of the next decision, from the past. */
#ifndef PREDICT_PREDICTOR_H
#define PREDICT_PREDICTOR_H

#include "predict/plan.h"

#include "base/status.h"

/*
 * Logistic mixing of bit-history models (Mahoney 2005; Mattern 2013) with
 * secondary estimation, in whole numbers only: the same probabilities on every
 * machine, compiler and instruction set. A byte is a row of binary decisions.
 * An encoder asks for the decision that stands for its byte, a decoder reads
 * it; both then tell the predictor:
 *
 *	do {
 *		p = predictor_probability(predictor);
 *		decision = predictor_decision(predictor, byte);    (encoder)
 *	} while (!predictor_update(predictor, decision, &byte));
 */
struct predictor;

/*
 * STATUS_NO_MEMORY. The predictor starts at the first of the bytes that
 * predictor_restart is told; call that first. plan: copied.
 */
MUST_USE enum status predictor_new(const struct predict_plan *plan,
				   struct predictor **predictor);
void predictor_free(struct predictor *predictor);

/*
 * Forgets everything. bytes is where the bytes known so far stand: when
 * predictor_update completes a byte, the caller must have it at the next place
 * before asking for another probability. Nothing beyond is read.
 */
void predictor_restart(struct predictor *predictor, const uint8_t *bytes);

/* Probability that the next decision is 1, in 1..65535 of 65536. */
unsigned predictor_probability(struct predictor *predictor);
/* The next decision of a byte, which continues the decisions made so far. */
unsigned predictor_decision(const struct predictor *predictor, uint8_t byte);
/* True when the byte is complete, which then is in *byte. */
bool predictor_update(struct predictor *predictor, unsigned decision,
		      uint8_t *byte);

/*
 * Bits in Q32 that count more bytes cost (they follow those known so far, and
 * must be there), by the same decisions and probabilities as above. Runs over
 * whole bytes only.
 */
int64_t predictor_measure_q32(struct predictor *predictor, size_t count);

/*
 * Remembers where it stands, so that predictor_rewind takes it back there:
 * pages after the same past, each as if it were the only one. Between the two
 * at most so many bytes are measured, by predictor_measure_q32 and no other
 * way. STATUS_NO_MEMORY; STATUS_BAD_USAGE: not for FAMILY_BASES and
 * FAMILY_FLAT. Forgotten by predictor_restart.
 */
MUST_USE enum status predictor_remember(struct predictor *predictor,
					size_t bytes);
void predictor_rewind(struct predictor *predictor);

/* Instruction sets: the fastest here, or plain C. Both give equal bits. */
enum predict_lanes { LANES_BEST, LANES_PLAIN };
void predictor_set_lanes(struct predictor *predictor, enum predict_lanes lanes);

/* Threads that predictor_measure_q32 may use; more than two do not help. */
void predictor_set_threads(struct predictor *predictor, unsigned threads);

#endif
