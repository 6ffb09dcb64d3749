/* Sources of known entropy rate: the generator and the rate side by side. */
#ifndef SOURCE_SOURCE_H
#define SOURCE_SOURCE_H

#include "base/memory.h"
#include "base/status.h"
#include "symbols/sequence.h"

/*
 * A named source. Equal (name, symbols, seed) give equal bytes on every
 * machine: draws compare whole numbers, and the rate is worked out from the
 * same whole numbers. All rows are read as bytes.
 */
struct source {
	const char *name;
	const char *summary; /* one line for people */
	enum symbol_kind kind;
	uint64_t symbols; /* default length */
	/*
	 * Exact entropy rate in bits per symbol: the formula stands beside the
	 * generator. STATUS_NO_MEMORY.
	 */
	enum status (*rate)(double *bits_per_symbol);
	/* Appends symbols of it to out. STATUS_NO_MEMORY. */
	enum status (*make)(uint64_t symbols, uint64_t seed, struct buffer *out,
			    struct reason *why);
};

/* All rows in the order they are shown, ended by NULL. */
extern const struct source *const sources[];
/* NULL where there is no such row. */
const struct source *source_find(const char *name);

#endif
