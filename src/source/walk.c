#include "source/walk.h"

void walk_init(struct walk *walk, int64_t centre, uint32_t sides, uint32_t pull)
{
	uint32_t values[WEIGHTS_MAX] = {0};

	/* The sum of the dice and the pull, which is 0 or 1: a convolution. */
	for (uint32_t a = 0; a < sides; a++) {
		for (uint32_t b = 0; b < sides; b++) {
			values[a + b] += 256 - pull;
			values[a + b + 1] += pull;
		}
	}
	walk->centre = centre;
	walk->middle = sides - 1;
	weights_init(&walk->step, values, 2 * sides);
}

int64_t walk_next(const struct walk *walk, int64_t reading,
		  struct random_stream *random)
{
	int64_t step = (int64_t)weights_draw(&walk->step, random) -
		       (int64_t)walk->middle;

	return reading < walk->centre ? reading + step : reading - step;
}
