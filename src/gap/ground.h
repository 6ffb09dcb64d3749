/* What every row of one corpus stands on: its blocks and their resampling. */
#ifndef GAP_GROUND_H
#define GAP_GROUND_H

#include "gap/analysis.h"
#include "resample/bootstrap.h"

struct ground {
	const struct corpus_fact *fact; /* borrowed */
	double *symbols;                /* owned; in each block */
	double *scratch;                /* owned; bits of each block */
	struct bootstrap *bootstrap;    /* owned */
};

MUST_USE enum status ground_init(struct ground *ground,
				 const struct survey *survey,
				 const struct corpus_fact *fact,
				 const struct analysis_rules *rules);
void ground_release(struct ground *ground);

/*
 * Bits of a method: their total, and how blocks share in it. The blocks need
 * not add up to the total: the difference is spread over the symbols evenly,
 * so that the interval sits on the total.
 */
struct contribution {
	const struct costs *costs; /* borrowed; blocks 0: see reason */
	double total_bits;
	/* bits^2: how much the block spread overstates the variance of the
	 * total (resample/bootstrap.h); 0 for a code. */
	double excess;
	bool learns; /* a code: its start-up is no spread */
	char reason[ANALYSIS_REASON_BYTES]; /* why there are no blocks, or "" */
};

struct contribution contribution_of_series(const struct series *series,
					   double total_bits);
/*
 * total_bits is the headline or the payload. A cell whose flushes cost over
 * 10%, or that cannot be flushed, has no blocks and a reason.
 */
struct contribution contribution_of_cell(const struct cell_fact *cell,
					 double total_bits);
/* Flushed over unflushed bytes, less 1; 0 where nothing was flushed. */
double cell_flush_cost(const struct cell_facts *facts);

/*
 * The interval of a's bits per symbol, or of a's minus b's where b is not
 * NULL: the difference series is formed first. drifts may be NULL.
 */
MUST_USE enum status ground_interval(const struct ground *ground,
				     const struct contribution *a,
				     const struct contribution *b,
				     struct interval *interval, bool *drifts);

/* An interval of no width: the same on all data of this kind. */
struct interval interval_exact(const struct ground *ground, double value);
/* A refusal; printf-style. */
struct interval interval_none(const char *format, ...)
	__attribute__((format(printf, 1, 2)));
/* Half of its width; 0 where it is not known. */
double interval_half_width(const struct interval *interval);

#endif
