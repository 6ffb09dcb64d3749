/* Clocks: the only place where the program reads time. */
#ifndef RUN_STOPWATCH_H
#define RUN_STOPWATCH_H

#include <time.h>

struct stopwatch {
	struct timespec start;
};

void stopwatch_start(struct stopwatch *watch);
/* Seconds since the start, by a clock that never steps back. */
double stopwatch_seconds(const struct stopwatch *watch);

/*
 * CPU seconds of all threads (a library may have its own), and wall seconds;
 * for differences.
 */
double process_cpu_seconds(void);
double wall_seconds(void);

#endif
