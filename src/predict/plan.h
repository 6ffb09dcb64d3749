/* The choices that a predictor is built from; a decoder is told them. */
#ifndef PREDICT_PLAN_H
#define PREDICT_PLAN_H

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

/* Which family of contexts is used beside the common ones. */
enum predict_family {
	FAMILY_PROSE,	/* words */
	FAMILY_LINES,	/* text of lines and fields */
	FAMILY_BINARY,	/* code, tables, mixed content */
	FAMILY_RECORDS, /* fixed stride */
	FAMILY_IMAGE,	/* bytes in rows of stride */
	FAMILY_SOUND,	/* 16-bit samples */
	FAMILY_BASES,	/* nucleotides, one letter a byte */
	FAMILY_FLAT,	/* nothing to learn: every byte costs 8 bits */
	FAMILY_COUNT
};

enum predict_strength { STRENGTH_NIGHTLY, STRENGTH_DEEP };

#define STRIDE_MAX 4096

struct predict_plan {
	enum predict_strength strength;
	enum predict_family family;
	unsigned stride; /* 1..STRIDE_MAX; 1 where the family has none */
	unsigned phase;	 /* offset of the first record, below stride */
	size_t bytes;	 /* length of what is predicted: sizes the tables */
};

#endif
