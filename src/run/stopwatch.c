#include "run/stopwatch.h"

static double seconds_of(const struct timespec *time)
{
	return (double)time->tv_sec + (double)time->tv_nsec * 1e-9;
}

static double read_clock(clockid_t clock)
{
	struct timespec now = {0};

	(void)clock_gettime(clock, &now);
	return seconds_of(&now);
}

void stopwatch_start(struct stopwatch *watch)
{
	(void)clock_gettime(CLOCK_MONOTONIC, &watch->start);
}

double stopwatch_seconds(const struct stopwatch *watch)
{
	return read_clock(CLOCK_MONOTONIC) - seconds_of(&watch->start);
}

double process_cpu_seconds(void)
{
	return read_clock(CLOCK_PROCESS_CPUTIME_ID);
}

double wall_seconds(void)
{
	return read_clock(CLOCK_MONOTONIC);
}
