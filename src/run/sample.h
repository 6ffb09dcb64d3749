/* One sample of a source, measured as a survey would measure a corpus. */
#ifndef RUN_SAMPLE_H
#define RUN_SAMPLE_H

#include "gap/trial.h"
#include "source/model.h"

struct sample_rules {
	const char *name;                 /* of the source; borrowed */
	const struct source_model *model; /* borrowed; of bytes */
	uint64_t symbols;
	uint64_t seed;
	unsigned orders; /* K counted */
	unsigned order;  /* at which estimators are read */
	bool codes;      /* run the slow codes too (gap/trial.h) */
	bool gap;        /* run zlib 9 */
};

/*
 * Draws the sample, runs ngram, crossfit, the quick code rows and what else is
 * asked for on it and reads off what they show. A row that declines is left
 * out.
 */
MUST_USE enum status sample_measure(const struct sample_rules *rules,
				    struct trial *trial, struct reason *why);

#endif
