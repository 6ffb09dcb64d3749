/* Sequences made by hand, and their cyclic grams counted the slow way. */
#ifndef SUPPORT_GRAMS_H
#define SUPPORT_GRAMS_H

#include "cost/findings.h"
#include "symbols/sequence.h"

/* Of n codes of width bytes, borrowed; alphabet and code_count 256^width. */
struct sequence grams_sequence(const uint8_t *codes, size_t n, unsigned width);

/* Blocks as even as they come, none empty; release with free(cuts.symbol). */
struct cuts grams_cuts(size_t n, size_t blocks);

/*
 * count[s], for all n starts s: how many starts from first to last - 1 show
 * the same cyclic k-gram as s (0 <= k). By sorting all grams with qsort.
 */
void grams_count(const struct sequence *sequence, unsigned k, size_t first,
		 size_t last, uint64_t *count);

/* What the row ngram finds at orders 1 to K; cuts NULL: without blocks. */
struct findings grams_findings(const struct sequence *sequence, unsigned orders,
			       const struct cuts *cuts);

/* Text-like bytes: words of a seeded vocabulary, drawn unevenly. */
void grams_pseudo_text(uint8_t *bytes, size_t n, uint64_t seed);

/* The first n letters (0, 1) of the Fibonacci and the Thue-Morse word. */
void grams_fibonacci(uint8_t *bytes, size_t n);
void grams_thue_morse(uint8_t *bytes, size_t n);

/* A cyclic binary de Bruijn word of order k: 2^k letters. */
void grams_de_bruijn(uint8_t *bytes, unsigned k);

#endif
