/* From counts of grams to entropies in bits, corrected for what was unseen. */
#ifndef ESTIMATE_CORRECTIONS_H
#define ESTIMATE_CORRECTIONS_H

#include "cost/findings.h"

/*
 * Entropies H_k in bits of a distribution sampled N times, m outcomes seen, f1
 * once and f2 twice. Derived from facts, hence real numbers and never a fact.
 */
struct corrected {
	double plugin;       /* log2 N - (1/N) sum c log2 c */
	double miller_madow; /* plugin + (m - 1) / (2 N ln 2); Miller 1955 */
	/* log2 N - (1/N) sum c G(c) / ln 2, cut to 0 … ceiling;
	 * Grassberger 2003 (physics/0307138) */
	double grassberger;
	/* (psi(N) - (1/N) sum c psi(c)) / ln 2 + unseen part;
	 * Chao, Wang, Jost 2013 */
	double chao_wang_jost;
};

/*
 * counts->positions >= 1. ceiling_bits is k log2 A, the most that k symbols can
 * carry; only the Grassberger value, which can exceed it on tiny samples, is
 * cut. Every result is finite.
 */
void corrected_from_counts(const struct gram_counts *counts,
			   double ceiling_bits, struct corrected *corrected);

/*
 * The conditional entropies h_k = H_k - H_{k-1}, field by field; shorter NULL
 * stands for k = 1. A correction can push a difference below 0: it becomes 0.
 */
struct corrected corrected_difference(const struct corrected *longer,
				      const struct corrected *shorter);

/* Share of the probability that was seen: 1 - f1 / N; Good 1953. */
double coverage_good_turing(const struct gram_counts *counts);

/* 1 - (f1/N) (N-1) f1 / ((N-1) f1 + 2 f2); Chao and Jost 2012. */
double coverage_chao_jost(const struct gram_counts *counts);

/*
 * Outcomes that exist, seen or not, at least: m + f1 (f1 - 1) / (2 (f2 + 1)),
 * the bias-corrected form of Chao 1984, defined without any seen twice.
 */
double support_chao1(const struct gram_counts *counts);

/*
 * sum over r >= positions of (1 - a)^(r - positions + 1) / r, for 0 < a <= 1:
 * the cancellation-free form of the unseen part of Chao, Wang and Jost.
 * Relative error below 1e-11 for positions up to 2^53.
 */
double unseen_tail(double positions, double a);

#endif
