/* Whether other processes are at work while times are taken. */
#ifndef CLI_OTHERS_H
#define CLI_OTHERS_H

#include <stdbool.h>

/* A moment, in seconds, as the kernel counts them. */
struct others {
	bool known; /* false: no /proc, or not of Linux */
	double busy, own, clock;
};

struct others others_now(void);
/*
 * CPUs that others kept busy since then, 1 for one whole CPU: a neighbour on a
 * core shares its caches and lengthens CPU time, too. 0 where it is not known.
 */
double others_since(const struct others *then);

#endif
