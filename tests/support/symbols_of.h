/* Sequences made from bytes written in a test. */
#ifndef SUPPORT_SYMBOLS_OF_H
#define SUPPORT_SYMBOLS_OF_H

#include "symbols/sequence.h"

/* A literal with embedded NULs as a slice, its closing NUL left out. */
#define LITERAL(text) \
	((struct slice){(const uint8_t *)(text), sizeof(text) - 1})

/* Maps bytes or fails the test; release it with sequence_release. */
struct sequence sequence_of(struct slice bytes, enum symbol_kind kind);

/* Code i of a sequence, read the slow way. */
uint32_t code_of(const struct sequence *sequence, size_t i);

/* Fails unless the codes are exactly these. */
void assert_codes(const struct sequence *sequence, const uint32_t *codes,
		  size_t count);

/* Fails unless mapping ends with this status and why holds these words. */
void assert_refused(struct slice bytes, struct symbol_rules rules,
		    enum status wanted, const char *words);

#endif
