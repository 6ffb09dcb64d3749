/* What a gram seen c times adds to the sums over counts, in whole numbers. */
#ifndef ESTIMATE_NGRAM_TABLES_H
#define ESTIMATE_NGRAM_TABLES_H

#include "base/log2.h"
#include "base/status.h"

/*
 * Logarithms of a count c >= 1: log2 c in Q32, rounded, as block bits use it;
 * psi(c) / ln 2 and Grassberger's G(c) / ln 2 in Q56, error below 2^-48.
 */
struct count_logs {
	int64_t plain_q32, psi_q56, grassberger_q56;
};

/*
 * Counts below this are looked up and counted. Small, so that the tables of a
 * short corpus stay small beside it; large enough that few grams are beyond.
 */
#define COUNT_LOGS_TABLED 512

/* COUNT_LOGS_TABLED entries, that of 0 zero; the caller frees. */
MUST_USE enum status count_logs_table(struct count_logs **table);

/*
 * By the series for large arguments; c >= COUNT_LOGS_TABLED.
 * psi: Abramowitz and Stegun 6.3.18. G: Grassberger 2003 (physics/0307138).
 */
struct count_logs count_logs_large(uint64_t c);

#endif
