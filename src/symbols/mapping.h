/* How each kind of symbol is mapped; seen by this room only. */
#ifndef SYMBOLS_MAPPING_H
#define SYMBOLS_MAPPING_H

#include "symbols/sequence.h"

/* One row a kind, indexed by enum symbol_kind. */
struct mapping {
	const char *name;
	unsigned symbol_bytes; /* canonical bytes a symbol; a bit: its byte's;
				  0: they differ */
	uint64_t alphabet;     /* 0: whatever is seen */
	/*
	 * Fills canonical, n, codes, code_width, code_count, distinct and
	 * starts. What it owned when it failed the caller releases. Statuses as
	 * sequence_init; bytes is not empty and a multiple of symbol_bytes.
	 */
	enum status (*map)(struct sequence *sequence, struct slice bytes,
			   struct reason *why);
};

extern const struct mapping mappings[SYMBOL_KIND_COUNT];

enum status map_byte(struct sequence *sequence, struct slice bytes,
		     struct reason *why);
enum status map_bit(struct sequence *sequence, struct slice bytes,
		    struct reason *why);
enum status map_u16le(struct sequence *sequence, struct slice bytes,
		      struct reason *why);
enum status map_u16be(struct sequence *sequence, struct slice bytes,
		      struct reason *why);
enum status map_u32le(struct sequence *sequence, struct slice bytes,
		      struct reason *why);
enum status map_nucleotide(struct sequence *sequence, struct slice bytes,
			   struct reason *why);
enum status map_letters27(struct sequence *sequence, struct slice bytes,
			  struct reason *why);
enum status map_codepoint(struct sequence *sequence, struct slice bytes,
			  struct reason *why);
enum status map_word(struct sequence *sequence, struct slice bytes,
		     struct reason *why);

/* Sets canonical and codes to the same bytes, each byte its own code. */
void map_as_bytes(struct sequence *sequence, const uint8_t *bytes, size_t n);

/* Line number, from 1, of the byte at offset. */
size_t line_of(struct slice bytes, size_t offset);

#endif
