#include "resample/proportion.h"

#include <math.h>

#include "resample/normal.h"

struct proportion proportion_of(size_t hits, size_t trials, double confidence)
{
	double z = normal_quantile((1 + confidence) / 2);
	double n = (double)trials, p, centre, half;

	if (!trials)
		return (struct proportion){.high = 1};
	p = (double)hits / n;
	centre = (p + z * z / (2 * n)) / (1 + z * z / n);
	half = z / (1 + z * z / n) *
	       sqrt(p * (1 - p) / n + z * z / (4 * n * n));
	return (struct proportion){
		.hits = hits,
		.trials = trials,
		.value = p,
		.low = fmax(0, centre - half),
		.high = fmin(1, centre + half),
	};
}
