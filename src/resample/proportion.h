/* A share of hits among trials, and how sure it is. */
#ifndef RESAMPLE_PROPORTION_H
#define RESAMPLE_PROPORTION_H

#include <stddef.h>

struct proportion {
	size_t hits, trials;
	double value;     /* hits / trials; 0 without trials */
	double low, high; /* Wilson 1927; 0 and 1 without trials */
};

/* confidence: two-sided, above 0 and below 1. */
struct proportion proportion_of(size_t hits, size_t trials, double confidence);

#endif
