/* Sources of known entropy rate: generator and exact rate side by side. */
#ifndef SOURCE_SOURCE_H
#define SOURCE_SOURCE_H

#include "base/status.h"

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

/* Takes the bytes of a source piece by piece, in order. */
struct source_sink {
	/* Any status but STATUS_OK ends the source and is handed through. */
	enum status (*take)(void *state, const uint8_t *bytes, size_t length);
	void *state; /* borrowed */
};

struct source_stream; /* source/bytestream.h */

/* A row: what it is, its rate, its generator. */
struct source {
	const char *name;
	const char *summary;      /* one line for people */
	const char *publication;  /* where the rate formula comes from */
	const char *symbols;      /* symbol kind, as a set file names it */
	const char *records;      /* "lines", a number of bytes, or NULL */
	uint64_t default_symbols; /* a size that shows its structure */
	bool rate_exact;          /* false: the rate is a stated bound */
	/*
	 * Entropy rate in bits per symbol, from the integer probabilities that
	 * the generator draws by; an error below 1e-12. Never fails on memory.
	 */
	double (*bits_per_symbol)(void);
	/* Writes to the stream until it is full. Call source_write instead. */
	void (*generate)(struct source_stream *stream, uint64_t seed);
};

/* All rows in the order they are shown, ended by NULL. */
extern const struct source *const sources[];

/* NULL where there is no such row. */
const struct source *source_find(const char *name);

/*
 * Hands exactly `symbols` symbols (bytes, for every row so far) to the sink:
 * the same ones on every machine for one name, number and seed, and a longer
 * run begins with the shorter one. The last record is cut where the number
 * ends inside it. Returns what the sink returned.
 */
MUST_USE enum status source_write(const struct source *source, uint64_t symbols,
				  uint64_t seed,
				  const struct source_sink *sink);

/* The same into memory of the caller; cannot fail. */
void source_fill(const struct source *source, size_t symbols, uint64_t seed,
		 uint8_t *bytes);

#endif
