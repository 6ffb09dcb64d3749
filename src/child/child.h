/* Other people's programs, run in bounds by the codec host. */
#ifndef CHILD_CHILD_H
#define CHILD_CHILD_H

#include "base/memory.h"
#include "host/host_talk.h"

#include <stdbool.h>

struct child_bounds {
	uint64_t memory_bytes; /* address space of each process */
	unsigned seconds;      /* wall, for one run or one request */
	uint64_t file_bytes;   /* largest file that may be written */
};

/* What to run. All borrowed, as long as the child is there. */
struct child_plan {
	const char *host;   /* path of the program codec-host */
	bool library;       /* words[0] is a shared object, not a program */
	char *const *words; /* ended by NULL; a program's first word is a path
			       with a slash, or is looked for in PATH */
	struct child_bounds bounds;
};

/* What a run or a request took. */
struct child_usage {
	uint64_t peak_bytes; /* resident; the largest process */
	double cpu_seconds, wall_seconds;
};

/*
 * Runs a program once: input on its standard input, its standard output into
 * out, whose limit bounds it. It has its own process group, a private folder to
 * work in (also TMPDIR) that is removed, and no descriptor of ours; all that it
 * started is ended with it. STATUS_CODEC: how it failed, the name of the
 * failure first, then the end of what it said on standard error: crashed, timed
 * out, wrote too much, out of memory, missing program, left a process running,
 * or its exit code. STATUS_IO: it could not be run at all; STATUS_NO_MEMORY.
 */
MUST_USE enum status child_run(const struct child_plan *plan,
			       struct slice input, struct buffer *out,
			       struct child_usage *usage, struct reason *why);

/* A shared object in a process of its own that answers requests. */
struct child;
MUST_USE enum status child_open(const struct child_plan *plan,
				struct child **child, struct reason *why);
/*
 * One request; what comes out is appended to out. After a failure the child is
 * of no use any more. Statuses as child_run.
 */
MUST_USE enum status child_ask(struct child *child,
			       const struct host_request *request,
			       struct slice input, struct buffer *out,
			       struct child_usage *usage, struct reason *why);
/*
 * Lets it end by itself. STATUS_CODEC: it did not end well, or left a process
 * running; as child_run. It is still to be closed.
 */
MUST_USE enum status child_end(struct child *child, struct reason *why);
/* Ends it with all that it started; NULL is allowed. */
void child_close(struct child *child);

/*
 * Where a program lies: its own path where it has a slash, otherwise what PATH
 * says. False: nowhere, or the path is too long.
 */
#define CHILD_PATH_BYTES 4096
bool child_find(const char *program, char path[CHILD_PATH_BYTES]);

#endif
