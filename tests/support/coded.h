/* Rows of table 1 run on sequences made by hand. */
#ifndef SUPPORT_CODED_H
#define SUPPORT_CODED_H

#include "cost/findings.h"
#include "estimate/dirichlet_lengths.h"
#include "symbols/sequence.h"

/*
 * n codes of one byte, borrowed, of an alphabet of so many symbols, which may
 * exceed 256; canonical is codes.
 */
struct sequence coded_sequence(const uint8_t *codes, size_t n,
			       uint64_t alphabet);

/* How a row is run; all zero: one stream, no blocks, orders 1. */
struct coded_run {
	const char *row;
	const struct cuts *cuts; /* NULL: without blocks */
	size_t page_bytes;
	unsigned orders;
};

/* What the row finds, or the test fails. */
struct findings coded_findings(struct coded_run run,
			       const struct sequence *sequence);

/* Bits of the Dirichlet code at one context length, nothing charged. */
double coded_dirichlet(const struct sequence *sequence, size_t page_bytes,
		       unsigned context_symbols,
		       enum dirichlet_alphabet alphabet);

#endif
