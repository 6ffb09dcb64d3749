/* Comparisons of doubles as doubles: cmocka 1.1.5 casts them to float. */
#ifndef SUPPORT_NEAR_H
#define SUPPORT_NEAR_H

#include <setjmp.h>
#include <stdarg.h>
#include <stddef.h>
#include <stdint.h>

#include <cmocka.h>

void near_check(double got, double wanted, double tolerance, const char *what,
		const char *file, int line);

/* Fails unless |got - wanted| <= tolerance; NaN always fails. */
#define assert_near(got, wanted, tolerance) \
	near_check((got), (wanted), (tolerance), #got, __FILE__, __LINE__)

#endif
