/* The facts that an estimator finds on a corpus: whole numbers only. */
#ifndef COST_FINDINGS_H
#define COST_FINDINGS_H

#include "cost/costs.h"

#define FINDING_ORDERS_MAX 32
#define FINDING_NOTES_MAX 40

/*
 * The reference: its row, and a number that counts up with every change of the
 * lengths it gives, so that floors of two versions are never compared.
 */
#define REFERENCE_NAME "mix"
#define REFERENCE_VERSION "2"

/*
 * Counts of the grams of one order over a set of start positions. With N
 * positions and counts c_i: distinct = number of i; once, twice = number of
 * c_i equal to 1 and 2; the three sums are over i, in Q16:
 *   plugin    sum c log2 c              H = log2 N - plugin / N
 *   grassberger sum c G(c) / ln 2       (Grassberger 2003)
 *   psi       sum c psi(c) / ln 2       (Chao, Wang, Jost 2013, first part)
 */
struct gram_counts {
	uint64_t positions; /* N */
	uint64_t distinct, once, twice;
	int64_t plugin_q16, grassberger_q16, psi_q16;
};

/* Order k: over all n cyclic positions, and over the two halves of them. */
struct order_counts {
	unsigned order; /* k, from 1 */
	struct gram_counts all;
	struct gram_counts half[2]; /* starts below n / 2, and the rest */
};

/*
 * Bits at one setting of an estimator: a code's length, or n times an n-gram
 * estimate of h_k with the bits that each block's symbols contribute. For
 * ngram the costs are plug-in; corrections are made right of the ledger.
 */
struct series {
	unsigned order; /* k for ngram and crossfit; the order chosen by a code
			 */
	struct costs costs;
};

/* A further whole number worth keeping: the stride found, a share in ppm. */
struct note {
	char key[24];
	int64_t value;
};

struct findings {
	struct series *series; /* owned */
	size_t series_count;
	struct order_counts *orders; /* owned; ngram only */
	size_t order_count;
	struct note notes[FINDING_NOTES_MAX];
	size_t note_count;
};

/* Zeroed series and orders; each series' costs still to be made. */
MUST_USE enum status findings_init(struct findings *findings,
				   size_t series_count, size_t order_count);
void findings_release(struct findings *findings);
/* Adds a note; past FINDING_NOTES_MAX it is a bug of the caller (assert). */
void findings_note(struct findings *findings, const char *key, int64_t value);
/* The note's value through *value; false where there is none. */
int findings_find(const struct findings *findings, const char *key,
		  int64_t *value);

#endif
