/* A made-up analysis of the made-up survey, figures filled in by hand. */
#ifndef SUPPORT_SAMPLE_ANALYSIS_H
#define SUPPORT_SAMPLE_ANALYSIS_H

#include "gap/analysis.h"

#include <stdio.h>

struct report_format;

/*
 * Corpus 0 has two orders; three estimates (the second declined); a floor and
 * a bracket; three cells: all known, no interval and no times, failed. Corpus
 * 1 was skipped. Tests change what they are about.
 */
struct sample_analysis {
	struct survey survey;
	struct analysis analysis;
	struct corpus_view views[2];
	struct order_row orders[2];
	struct estimate_row estimates[3];
	struct cell_row cells[3];
};

void sample_analysis_init(struct sample_analysis *sample);
void sample_analysis_release(struct sample_analysis *sample);

/* What a format writes, as text of the heap. Fails the test on any status. */
char *sample_report(const struct report_format *format,
		    const struct analysis *analysis);

#endif
