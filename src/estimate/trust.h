/* Up to which order the counted grams can be believed. */
#ifndef ESTIMATE_TRUST_H
#define ESTIMATE_TRUST_H

#include "estimate/corrections.h"

#include <stddef.h>

/*
 * The tests an order must pass, as must every order below it. eps = 0.01 bit;
 * N positions, h_k conditional entropies; thresholds as measured on sources of
 * known rate.
 */
enum trust_test {
	TRUST_ALL_PASSED, /* no order given fails */
	TRUST_POSITIONS,  /* at least 100 positions */
	TRUST_COVERAGE,   /* f1 / N <= eps */
	TRUST_AGREEMENT,  /* Grassberger within 2 eps of Chao-Wang-Jost, and
			     at most 5 eps above plug-in */
	TRUST_SUPPORT,    /* (Chao1_k - Chao1_{k-1}) / (2 N ln 2) <= 5 eps */
	TRUST_STABILITY,  /* mean h_k of the two halves within 2 eps of h_k */
	TRUST_CROSSFIT,   /* cross-fit minus plug-in <= .139 of their mean */
	TRUST_CORRECTION, /* |Grassberger - Miller-Madow| <= .0051 of the
			     former */
	TRUST_TEST_COUNT
};

/* One or two plain words: "coverage". Never NULL. */
const char *trust_test_name(enum trust_test test);

struct trust {
	unsigned order;         /* the highest believed, 0 if none is */
	enum trust_test failed; /* the first that order + 1 fails, in the order
				   above */
	/*
	 * The stability test failed although both halves cover their grams:
	 * the data drifts, more of it would not help.
	 */
	int drifts;
};

/*
 * orders[0 … count-1] are orders 1 … count of one sequence with an alphabet of
 * so many symbols. crossfit[k - 1] is h_k in bits by cross-fitting; NULL leaves
 * that test out. The two relative tests also pass below a thousandth of a bit,
 * where a ratio means nothing.
 */
struct trust trust_judge(const struct order_counts *orders, size_t count,
			 uint64_t alphabet, const double *crossfit);

#endif
