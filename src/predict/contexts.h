/* The contexts of every family, as hashes of what is known. */
#ifndef PREDICT_CONTEXTS_H
#define PREDICT_CONTEXTS_H

#include "predict/past.h"

/* Fills hash and select for the family of the plan. */
void contexts_look(const struct past *past, struct view *view);

/* Each fills hash from 0 on and returns how many. */
unsigned contexts_prose(const struct past *past, struct view *view);
unsigned contexts_lines(const struct past *past, struct view *view);
unsigned contexts_binary(const struct past *past, struct view *view);
unsigned contexts_records(const struct past *past, struct view *view);
unsigned contexts_image(const struct past *past, struct view *view);

unsigned contexts_fields(const struct past *past, struct view *view);

/* More of them for reviews, from n on. */
unsigned contexts_deep_text(const struct past *past, struct view *view,
			    unsigned n);
unsigned contexts_deep_bytes(const struct past *past, struct view *view,
			     unsigned n);

/*
 * In the line before: the byte of the same field, 256 and more where that is
 * shorter; the byte of the same column, likewise.
 */
unsigned field_above(const struct past *past);
unsigned column_above(const struct past *past);

/*
 * The number that goes on from those above (forecast.c): prepared where a field
 * begins, compared with the byte taken in; the byte that comes, or 256.
 */
void forecast_begin(struct past *past);
void forecast_push(struct past *past, unsigned c);
unsigned forecast_byte(const struct past *past, unsigned i);

/* For FAMILY_FIELDS: takes a byte in; the base of the next one. */
void fields_push(struct past *past, uint8_t byte);
uint8_t fields_base(const struct past *past);

/* Spreads a context's value; contexts with different ids do not meet. */
static inline uint32_t context_hash(unsigned id, uint64_t value)
{
	uint64_t hash = (value + id * UINT64_C(0x9e3779b97f4a7c15)) *
			UINT64_C(0xd6e8feb86659fd93);

	hash ^= hash >> 32;
	return (uint32_t)(hash * UINT64_C(0xd6e8feb86659fd93) >> 32);
}

/* The last n bytes, 1..8, as a number. */
static inline uint64_t last_bytes(const struct past *past, unsigned n)
{
	return past->last8 & (~UINT64_C(0) >> (64 - 8 * n));
}

/* The byte n before the next one; 0 before the beginning, and for n of 0. */
static inline unsigned byte_before(const struct past *past, size_t n)
{
	return n - 1 < past->at ? past->bytes[past->at - n] : 0;
}

static inline bool is_word_byte(unsigned c)
{
	return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || c >= 128;
}

static inline bool is_field_end(unsigned c)
{
	return c == ',' || c == ';' || c == '\t' || c == '|' || c == '"' ||
	       c == '>' || c == '=';
}

#endif
