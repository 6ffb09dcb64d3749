#include "support/near.h"

#include <stdio.h>

void near_check(double got, double wanted, double tolerance, const char *what,
		const char *file, int line)
{
	double difference = got - wanted;

	if (difference <= tolerance && -difference <= tolerance)
		return;
	fprintf(stderr, "%s: got %.17g, wanted %.17g, tolerance %g\n", what,
		got, wanted, tolerance);
	_fail(file, line);
}
