/* How long do 2000 draws of 40 series of 3200 blocks take? Goal: 1 second. */
#include "resample/bootstrap.h"

#include <math.h>
#include <stdio.h>
#include <time.h>

#include "base/random.h"

#define BLOCKS 3200
#define SERIES 40

static double bits[BLOCKS], symbols[BLOCKS];

static void fill(double phi, uint64_t run)
{
	struct random_stream random;
	double x = 0;

	random_init(&random, 1, run);
	for (size_t i = 0; i < BLOCKS; i++) {
		x = phi * x + random_unit(&random) - .5;
		symbols[i] = 4096;
		bits[i] = 4096 * (2 + .1 * x);
	}
}

static double seconds(void)
{
	struct timespec now;

	(void)clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &now);
	return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

static int measure(double phi, const char *what)
{
	const struct bootstrap_rules rules = {2000, .95, 1, "bench"};
	const struct block_series series = {bits, symbols, BLOCKS, 0, false};
	struct bootstrap *bootstrap;
	struct bootstrap_result result = {0};
	double spent = 0, start;

	if (bootstrap_new(&rules, &bootstrap) != STATUS_OK)
		return 1;
	for (uint64_t run = 0; run < SERIES; run++) {
		fill(phi, run);
		start = seconds();
		if (bootstrap_interval(bootstrap, &series, &result) !=
		    STATUS_OK)
			return 1;
		spent += seconds() - start;
	}
	bootstrap_free(bootstrap);
	printf("resample: 2000 draws x %d series x %d blocks, %s: %.3f s of "
	       "1 (last block length %zu)\n",
	       SERIES, BLOCKS, what, spent, result.block_length);
	return 0;
}

int main(void)
{
	return measure(0, "independent blocks") ||
	       measure(.7, "correlated blocks");
}
