/* Readings that wander about a mean, with an entropy that does not depend on
 * where they are. */
#ifndef SOURCE_WALK_H
#define SOURCE_WALK_H

#include "source/weights.h"

/*
 * A step of 2 dice, minus their mean, plus (while the reading lies below the
 * centre) or minus (else) a pull of one unit in `pull` of 256 cases: a second,
 * independent draw. The step's distribution above the centre is the mirror
 * image of the one below, so every step has the same entropy and the rate of
 * the walk is the entropy of one step exactly, whatever its position.
 */
struct walk {
	int64_t centre;
	struct weights step; /* item i: a step of i - middle towards centre */
	uint32_t middle;
};

/* sides 1 to 120, pull 0 to 255. */
void walk_init(struct walk *walk, int64_t centre, uint32_t sides,
	       uint32_t pull);
/* The reading after this one. */
int64_t walk_next(const struct walk *walk, int64_t reading,
		  struct random_stream *random);

#endif
