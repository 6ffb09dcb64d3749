/* The pipes of one child: fed and emptied together, by a deadline. */
#ifndef CHILD_PUMP_H
#define CHILD_PUMP_H

#include "child/child.h"

#include <sys/types.h>

#define TAIL_BYTES 400

enum child_pipe { PIPE_IN, PIPE_OUT, PIPE_ERR, PIPE_REPORT, CHILD_PIPES };

struct child {
	const struct child_plan *plan; /* borrowed */
	pid_t host;                    /* -1 when it was waited for */
	int pipes[CHILD_PIPES];        /* our ends; -1: closed */
	char tail[TAIL_BYTES];         /* the end of standard error */
	size_t tail_length;
	struct host_report report;
	size_t report_length;     /* bytes of it that came */
	bool timed_out, too_much; /* why it was ended by us */
	enum status status;       /* of our own heap */
};

/* Bytes to send and where to put what comes. */
struct pumping {
	struct slice feed[2];
	bool close_after; /* the end of what is fed is the end of input */
	struct buffer *sink;
	/* True when enough is in the sink; NULL: only the end is enough. */
	bool (*enough)(const struct buffer *sink);
};

/*
 * Feeds and drains until there is enough or every pipe ended. Past the bounds
 * of the plan the host is told to end the child, and what is left is drained.
 */
void child_pump(struct child *child, struct pumping *pumping);

/* Seconds of a clock that never steps back. */
double child_clock(void);

/* What a report that came, or the lack of one, means. OK: all went well. */
MUST_USE enum status child_fate(const struct child *child, struct reason *why);
/* Appends what the child said last, cleaned of control bytes. */
void child_quote(const struct child *child, struct reason *why);

#endif
