/* Drift inside short resampling blocks: a finer series of the same losses. */
#ifndef ESTIMATE_NGRAM_DRIFT_H
#define ESTIMATE_NGRAM_DRIFT_H

#include "cost/findings.h"
#include "symbols/sequence.h"

/* Blocks of fewer symbols than this are looked into. */
#define DRIFT_BLOCK_SYMBOLS 4096

/*
 * Into how many parts each block is cut for the finer series: a power of two,
 * at most 8, each part of 200 symbols or more; 1 for no finer series: without
 * blocks, in longer blocks, and where fixed records would beat with the cuts.
 */
size_t drift_parts(const struct sequence *sequence, const struct cuts *cuts);

/* Every block of cuts in so many parts. Only symbol is set of the result. */
MUST_USE enum status drift_cuts_init(const struct cuts *cuts, size_t parts,
				     struct cuts *fine);

/*
 * Lag-1 correlation, in millionths, rounded towards 0, of the parts' bits less
 * the mean times their symbols; sum_q32 by part. 0 for a constant series. The
 * divisor is the whole sum of squares, so that it is at most 1.
 */
MUST_USE enum status drift_lag1_ppm(const struct cuts *fine,
				    const int64_t *sum_q32, int64_t *ppm);

/* The notes in which ngram keeps it: of an order, and how many parts. */
void drift_note(struct findings *findings, unsigned order, int64_t ppm);
void drift_note_parts(struct findings *findings, size_t parts);
/* false: no finer series was made. */
bool drift_find(const struct findings *findings, unsigned order, double *lag1,
		double *parts);

#endif
