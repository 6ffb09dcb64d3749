/* The frozen list of sources that calibration is judged on. */
#ifndef VERDICT_CALIBRATION_LIST_H
#define VERDICT_CALIBRATION_LIST_H

#include <stdbool.h>
#include <stddef.h>

struct calibration_source {
	const char *source; /* a row of source/source.h */
	const char *family;
	/* Grams at which estimators are read: 1 + the memory of a chain, or
	 * an order too high on purpose where the memory has no end. */
	unsigned order;
	bool finite_memory; /* exact at that order */
	bool hidden;        /* states are not seen */
	bool drifting;      /* must raise the flag; its coverage is printed
			       but not promised */
};

extern const struct calibration_source calibration_sources[];
extern const size_t calibration_source_count;

#endif
