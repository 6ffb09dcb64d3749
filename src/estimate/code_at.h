/* The code of one symbol of a sequence, whatever its width. */
#ifndef ESTIMATE_CODE_AT_H
#define ESTIMATE_CODE_AT_H

#include "symbols/sequence.h"

/* Codes of width bytes, big-endian; i is below the number of codes. */
static inline uint32_t code_at(const uint8_t *codes, unsigned width, size_t i)
{
	const uint8_t *at = codes + i * width;
	uint32_t code = at[0];

	for (unsigned j = 1; j < width; j++)
		code = code << 8 | at[j];
	return code;
}

#endif
