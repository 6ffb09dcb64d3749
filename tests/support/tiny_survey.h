/* Surveys of one corpus with figures chosen by the test. */
#ifndef SUPPORT_TINY_SURVEY_H
#define SUPPORT_TINY_SURVEY_H

#include "gap/analysis.h"

#define TINY_METHODS_MOST 8
#define TINY_CELLS_MOST 16

/* Bytes, alphabet 256; blocks of so many symbols. Release: survey_release. */
void tiny_survey(struct survey *survey, size_t blocks, uint64_t block_symbols);
/* A row that is done, with so many zeroed series. */
struct method_fact *tiny_method(struct survey *survey, const char *method,
				size_t series_count);
/*
 * Gives a series about bits_per_symbol, blocks scattered by +-scatter of it
 * (uniform, from the seed); the headline is the block total.
 */
void tiny_series(const struct survey *survey, struct series *series,
		 double bits_per_symbol, double scatter, uint64_t seed);
/* Gram counts of orders 1 … K of a source with 2^bits equally likely symbols,
 * counted evenly: H_k = k bits, h_k = bits. Also adds a series for each. */
struct method_fact *tiny_grams(struct survey *survey, unsigned orders,
			       unsigned bits, double scatter);
/* A sound cell, framing known; flushed like a series, at cost 1 + flush. */
struct cell_fact *tiny_cell(struct survey *survey, const char *codec,
			    const char *level, size_t page_bytes,
			    uint64_t bytes);
void tiny_flush(const struct survey *survey, struct cell_fact *cell,
		double flush, double scatter, uint64_t seed);
/* With 1999 draws at 95%; fails the running test on a failure. */
void tiny_analyse(const struct survey *survey, struct analysis *analysis);

#endif
