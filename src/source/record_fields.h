/* Fields that packed records are made of, with their rates. */
#ifndef SOURCE_RECORD_FIELDS_H
#define SOURCE_RECORD_FIELDS_H

#include "base/random.h"

#include <stdint.h>

/*
 * Entropy rate of a two-state chain that leaves one state in alpha and the
 * other in beta of `whole` cases: P(first) = beta / (alpha + beta), so
 * (beta H(alpha) + alpha H(beta)) / (alpha + beta) bits a step (Cover and
 * Thomas 2006, section 4.2).
 */
double two_state_rate(uint32_t alpha, uint32_t beta, uint32_t whole);

/*
 * Fair flips before the first head, 255 at most: 2 bits (Cover and Thomas
 * 2006, problem 2.1) less the 2^-254 that the limit costs.
 */
uint8_t flips_before_one(struct random_stream *random);

/* Little-endian. */
void put_u16le(uint8_t *bytes, uint32_t value);
void put_u32le(uint8_t *bytes, uint32_t value);

#endif
