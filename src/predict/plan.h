/* The choices that a predictor is built from; a decoder is told them. */
#ifndef PREDICT_PLAN_H
#define PREDICT_PLAN_H

#include "base/status.h"

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

/* Which family of contexts is used beside the common ones. */
enum predict_family {
	FAMILY_PROSE,   /* words */
	FAMILY_LINES,   /* text of lines and fields */
	FAMILY_BINARY,  /* code, tables, mixed content */
	FAMILY_RECORDS, /* fixed stride */
	FAMILY_FIELDS,  /* records of numbers, coded as differences */
	FAMILY_IMAGE,   /* bytes in rows of stride */
	FAMILY_BASES,   /* nucleotides, one letter a byte */
	FAMILY_FLAT,    /* nothing to learn: every byte costs 8 bits */
	FAMILY_COUNT
};

enum predict_strength { STRENGTH_NIGHTLY, STRENGTH_DEEP };

#define STRIDE_MAX 4096

/* What a column of FAMILY_FIELDS is coded less. */
enum column_base {
	COLUMN_PLAIN, /* nothing */
	COLUMN_ABOVE, /* the byte in the record before */
	COLUMN_CARRY, /* that and the carry of the byte to the left */
	COLUMN_BASES
};

#define COLUMNS_MAX 64

struct predict_plan {
	enum predict_strength strength;
	enum predict_family family;
	unsigned stride; /* 1..STRIDE_MAX; 1 where the family has none */
	uint8_t column[COLUMNS_MAX]; /* of FAMILY_FIELDS: enum column_base */
	size_t bytes; /* length of what is predicted: sizes the tables */
};

/* Bits that tell a decoder family and stride, in Q32. */
int64_t plan_charge_q32(const struct predict_plan *plan);

/*
 * Looks at the bytes for the family and stride that predict them best, by
 * statistics of lags and by trials on samples; page_bytes as in
 * estimate/estimator.h. record_bytes: a declared record width, or 0.
 * STATUS_NO_MEMORY.
 */
struct plan_request {
	const uint8_t *bytes;
	size_t count;
	size_t page_bytes;
	size_t record_bytes;
	enum predict_strength strength;
};
MUST_USE enum status plan_choose(const struct plan_request *request,
				 struct predict_plan *plan);

/* Sets the columns of a plan of FAMILY_FIELDS from the bytes
 * (contexts_fields.c). */
void fields_choose(struct predict_plan *plan, const uint8_t *bytes,
		   size_t count);

/* The lag of 2..most at which bytes most often equal each other (lags.c). */
unsigned lag_find(const uint8_t *bytes, size_t count, unsigned most);

#endif
