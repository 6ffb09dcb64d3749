/* Every decodable length measured on a corpus, and the lowest of them. */
#ifndef GAP_LENGTHS_H
#define GAP_LENGTHS_H

#include "gap/ground.h"

/* A code row or a cell's payload at one layout. */
struct length {
	const struct method_fact *method; /* borrowed; or NULL */
	const struct cell_fact *cell;     /* borrowed; or NULL */
	size_t page_bytes;
	struct contribution contribution; /* total_bits: payload */
};

struct lengths {
	struct length *rows; /* owned */
	size_t count;
};

/* 8 x (bytes less framing) of a cell that ended well. */
double cell_payload_bits(const struct cell_fact *cell);
/* A cell that decodes to what went in. */
bool cell_is_sound(const struct cell_fact *cell);
/* Two cells of one codec. */
bool cell_same_codec(const struct cell_fact *a, const struct cell_fact *b);

MUST_USE enum status lengths_init(struct lengths *lengths,
				  const struct corpus_fact *fact);
void lengths_release(struct lengths *lengths);

/* Lowest at a layout; NULL: none. Estimators win ties. */
const struct length *lengths_lowest(const struct lengths *lengths,
				    size_t page_bytes);
/* Whether an estimator was coded at that layout. */
bool lengths_has_method(const struct lengths *lengths, size_t page_bytes);
/* "mix" or "xz 9e". */
void length_name(const struct length *length, char *name, size_t room);

/* The floor: the lowest at layout whole. */
MUST_USE enum status floor_find(const struct lengths *lengths,
				const struct ground *ground,
				struct floor_row *row);

#endif
