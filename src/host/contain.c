#include "host/contain.h"

#include <dirent.h>
#include <errno.h>
#include <fcntl.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <sys/wait.h>
#include <time.h>
#include <unistd.h>

/* Rounds of killing: each takes one more layer of a tree of processes. */
#define ROUNDS_MOST 1000
/* A shell reaps the members of its pipelines a little after they end. */
#define GRACE_ROUNDS 50
#define DEPTH_MOST 32
#define FILES_MOST 256

static bool limit(int what, uint64_t value)
{
	const struct rlimit both = {(rlim_t)value, (rlim_t)value};
	struct rlimit now;

	/* A lower limit of the machine's own stays. */
	if (getrlimit((__rlimit_resource_t)what, &now) == 0 &&
	    now.rlim_max < both.rlim_max)
		return true;
	return setrlimit((__rlimit_resource_t)what, &both) == 0;
}

bool bounds_set(const struct bounds *bounds)
{
	return limit(RLIMIT_CORE, 0) && limit(RLIMIT_NOFILE, FILES_MOST) &&
	       limit(RLIMIT_AS, bounds->memory_bytes) &&
	       limit(RLIMIT_CPU, bounds->cpu_seconds) &&
	       limit(RLIMIT_FSIZE, bounds->file_bytes);
}

void close_from(int first)
{
	DIR *listed = opendir("/proc/self/fd");
	struct dirent *entry;

	if (!listed)
		return;
	while ((entry = readdir(listed))) {
		int fd = atoi(entry->d_name);

		if (fd >= first && fd != dirfd(listed))
			(void)close(fd);
	}
	(void)closedir(listed);
}

static void pause_moment(void)
{
	const struct timespec moment = {.tv_nsec = 1000000};

	(void)nanosleep(&moment, NULL);
}

static void kill_listed(void)
{
	char path[64];
	FILE *listed;
	int child;

	(void)snprintf(path, sizeof(path), "/proc/self/task/%d/children",
		       (int)getpid());
	listed = fopen(path, "r");
	if (!listed)
		return;
	while (fscanf(listed, "%d", &child) == 1)
		(void)kill(child, SIGKILL);
	(void)fclose(listed);
}

/* Reaps those that ended; true when some still run. */
static bool some_run(void)
{
	pid_t ended;

	do {
		ended = waitpid(-1, NULL, WNOHANG);
	} while (ended > 0 || (ended < 0 && errno == EINTR));
	return ended == 0;
}

bool children_run(void)
{
	for (int round = 0; round < GRACE_ROUNDS; round++) {
		if (!some_run())
			return false;
		pause_moment();
	}
	return true;
}

void end_children(void)
{
	for (int round = 0; round < ROUNDS_MOST && some_run(); round++) {
		kill_listed();
		pause_moment();
	}
}

static void empty_folder(int folder, unsigned depth);

static void remove_entry(int folder, const char *name, unsigned depth)
{
	int inner;

	if (unlinkat(folder, name, 0) == 0)
		return;
	(void)fchmodat(folder, name, S_IRWXU, 0);
	inner = openat(folder, name,
		       O_RDONLY | O_DIRECTORY | O_NOFOLLOW | O_CLOEXEC);
	if (inner >= 0)
		empty_folder(inner, depth + 1);
	(void)unlinkat(folder, name, AT_REMOVEDIR);
}

/* Takes the descriptor. */
static void empty_folder(int folder, unsigned depth)
{
	DIR *listed = depth < DEPTH_MOST ? fdopendir(folder) : NULL;
	struct dirent *entry;

	if (!listed) {
		(void)close(folder);
		return;
	}
	while ((entry = readdir(listed))) {
		if (strcmp(entry->d_name, ".") != 0 &&
		    strcmp(entry->d_name, "..") != 0)
			remove_entry(folder, entry->d_name, depth);
	}
	(void)closedir(listed);
}

void remove_folder(const char *path)
{
	int folder;

	(void)chmod(path, S_IRWXU);
	folder = open(path, O_RDONLY | O_DIRECTORY | O_NOFOLLOW | O_CLOEXEC);
	if (folder >= 0)
		empty_folder(folder, 0);
	(void)rmdir(path);
}
