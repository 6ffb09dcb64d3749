/* Made-up data of every kind that the predictor has a family for. */
#ifndef SUPPORT_SAMPLES_H
#define SUPPORT_SAMPLES_H

#include <stddef.h>
#include <stdint.h>

enum sample_kind {
	SAMPLE_PROSE,
	SAMPLE_CYRILLIC, /* UTF-8 of two bytes a letter */
	SAMPLE_TABLE,    /* lines of fields */
	SAMPLE_CODE,     /* four-byte instructions and tables */
	SAMPLE_RECORDS,  /* 12 bytes: counter, random walk, flag, checksum */
	SAMPLE_IMAGE,    /* 64 bytes a row */
	SAMPLE_SOUND,    /* 16-bit samples */
	SAMPLE_BASES,    /* A C G T with repeats of both strands */
	SAMPLE_RANDOM,
	SAMPLE_ZEROS,
	SAMPLE_REPEATS, /* long copies of earlier parts */
	SAMPLE_KINDS
};

extern const char *const sample_names[SAMPLE_KINDS];

/* Fills count bytes; equal for equal kind, seed and count. */
void sample_fill(enum sample_kind kind, uint64_t seed, uint8_t *bytes,
		 size_t count);

#endif
