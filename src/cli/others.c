#include "cli/others.h"

#include <stdio.h>
#include <string.h>
#include <unistd.h>

static bool read_line(const char *path, char *line, int room)
{
	FILE *file = fopen(path, "r");
	bool good;

	if (!file)
		return false;
	good = fgets(line, room, file) != NULL;
	(void)fclose(file);
	return good;
}

/* Ticks of all CPUs that were not idle: proc(5), /proc/stat. */
static bool read_busy(double *ticks)
{
	char line[512];
	unsigned long long user, nice, system, idle, wait, irq, soft, steal;

	if (!read_line("/proc/stat", line, (int)sizeof(line)) ||
	    sscanf(line, "cpu %llu %llu %llu %llu %llu %llu %llu %llu", &user,
		   &nice, &system, &idle, &wait, &irq, &soft, &steal) != 8)
		return false;
	*ticks = (double)(user + nice + system + irq + soft + steal);
	return true;
}

/* utime, stime and those of children: fields 14 to 17 of /proc/self/stat. */
static bool read_own(double *ticks)
{
	char line[1024];
	const char *rest;
	unsigned long user, system;
	long children, children_system;

	if (!read_line("/proc/self/stat", line, (int)sizeof(line)))
		return false;
	rest = strrchr(line, ')'); /* the name before it may hold anything */
	if (!rest ||
	    sscanf(rest + 1,
		   " %*c %*s %*s %*s %*s %*s %*s %*s %*s %*s %*s %lu %lu %ld "
		   "%ld",
		   &user, &system, &children, &children_system) != 4)
		return false;
	*ticks = (double)user + (double)system + (double)children +
		 (double)children_system;
	return true;
}

struct others others_now(void)
{
	struct others now = {.known = false};
	double tick = (double)sysconf(_SC_CLK_TCK);
	char line[128];

	if (tick < 1 || !read_busy(&now.busy) || !read_own(&now.own) ||
	    !read_line("/proc/uptime", line, (int)sizeof(line)) ||
	    sscanf(line, "%lf", &now.clock) != 1)
		return now;
	now.known = true;
	now.busy /= tick;
	now.own /= tick;
	return now;
}

double others_since(const struct others *then)
{
	const struct others now = others_now();
	double seconds = now.clock - then->clock, busy;

	if (!then->known || !now.known || !(seconds > 0))
		return 0;
	busy = (now.busy - then->busy) - (now.own - then->own);
	return busy > 0 ? busy / seconds : 0;
}
