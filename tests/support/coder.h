/* A real binary arithmetic coder around any predictor, and its decoder. */
#ifndef SUPPORT_CODER_H
#define SUPPORT_CODER_H

#include "base/memory.h"

#include <stdbool.h>

/* What coder and decoder ask of a predictor (as in predict/predictor.h). */
struct coded_model {
	void *self;
	/* forgets everything; bytes is where known bytes stand */
	void (*restart)(void *self, const uint8_t *bytes);
	unsigned (*probability)(void *self);
	unsigned (*decision)(const void *self, uint8_t byte);
	bool (*update)(void *self, unsigned decision, uint8_t *byte);
};

/*
 * Codes count bytes from a restart on and adds them to out. Carry-less coding
 * of an interval of 64 bits (after the method of Witten, Neal, Cleary 1987).
 */
void coder_encode(const struct coded_model *model, const uint8_t *bytes,
		  size_t count, struct buffer *out);

/*
 * Decodes count bytes into bytes, which the model is told of one by one. The
 * bytes not yet decoded are filled with garbage first.
 */
void coder_decode(const struct coded_model *model, const struct buffer *code,
		  uint8_t *bytes, size_t count);

#endif
