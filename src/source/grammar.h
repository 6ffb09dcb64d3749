/* Text drawn from a table of phrases, with the exact entropy and length. */
#ifndef SOURCE_GRAMMAR_H
#define SOURCE_GRAMMAR_H

#include "source/bytestream.h"
#include "source/weights.h"

#define GRAMMAR_PHRASES_MAX 64

/*
 * A phrase is one of its choices, "one|two|the <noun>", where <noun> names a
 * phrase further up in the table. The choice of rank r (from 0) weighs
 * floor(5040 / (r + 2)), or all weigh the same.
 */
struct phrase {
	const char *name;
	const char *choices;
	bool even;
};

struct grammar_phrase {
	struct weights weights;
	uint16_t starts[WEIGHTS_MAX]; /* of each choice in the text */
	double bits, bytes;           /* entropy and mean length of a phrase */
};

struct grammar {
	const struct phrase *phrases; /* borrowed */
	uint32_t count;               /* 1 to GRAMMAR_PHRASES_MAX */
	struct grammar_phrase compiled[GRAMMAR_PHRASES_MAX];
};

/*
 * bits of a phrase = H(choice) + sum p (bits of the phrases it refers to), and
 * bytes likewise: the entropy of the derivation, which is that of the text if
 * no text has two derivations.
 */
void grammar_init(struct grammar *grammar, const struct phrase *phrases,
		  uint32_t count);
/* Writes one text of the last phrase of the table. */
void grammar_write(const struct grammar *grammar, struct source_stream *stream,
		   struct random_stream *random);

#endif
