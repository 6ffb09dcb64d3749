/* Table 1: entropy-rate estimators, one row each. */
#ifndef ESTIMATE_ESTIMATOR_H
#define ESTIMATE_ESTIMATOR_H

#include "cost/findings.h"
#include "symbols/sequence.h"

#include <stdbool.h>

struct suffix; /* suffix/suffix.h */

/* Which way a row errs against the entropy rate. */
enum leaning { LEANS_ABOVE, LEANS_NONE, LEANS_UNKNOWN };

/* Everything an estimator may look at. All borrowed. */
struct estimate_input {
	const struct sequence *sequence;
	const struct cuts *cuts;     /* blocks 0: make no block bits */
	const struct suffix *suffix; /* NULL unless the row needs it */
	unsigned orders;             /* K: highest gram order, 1 to 32 */
	size_t page_bytes; /* code rows: restart every so many canonical
			      bytes; 0 is one stream */
	unsigned threads;  /* a row may use so many; never fewer bits */
};

struct estimator {
	const char *name;
	const char *summary; /* one line for people */
	const char *source;  /* the publication */
	enum leaning leans;
	bool is_code; /* bits a decoder could live on */
	bool needs_suffix;
	bool reads_words; /* runs on the kind word */
	bool deep;        /* only where asked for by name */
	/*
	 * Only for page layouts that some cell has a dictionary for, and no
	 * code of the corpus: a decoder of one page lives on others.
	 */
	bool warm;
	double work; /* relative CPU a byte, for progress and scheduling */
	/*
	 * Fills findings (released by the caller). STATUS_TOO_SHORT with a
	 * reason is a normal answer; STATUS_NO_MEMORY, STATUS_CANCELLED.
	 */
	enum status (*measure)(const struct estimate_input *input,
			       struct findings *findings, struct reason *why);
};

/* All rows in the order they are shown, ended by NULL. */
extern const struct estimator *const estimators[];

/* NULL where there is no such row. */
const struct estimator *estimator_find(const char *name);

#endif
