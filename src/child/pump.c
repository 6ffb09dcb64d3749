#include "child/pump.h"

#include <errno.h>
#include <poll.h>
#include <pthread.h>
#include <signal.h>
#include <string.h>
#include <time.h>
#include <unistd.h>

/* What a host that was told to end its child may take to clean up. */
#define CLEANING_SECONDS 10.0
#define CHUNK_BYTES 65536

double child_clock(void)
{
	struct timespec now;

	(void)clock_gettime(CLOCK_MONOTONIC, &now);
	return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

static void close_pipe(struct child *child, enum child_pipe which)
{
	if (child->pipes[which] >= 0)
		(void)close(child->pipes[which]);
	child->pipes[which] = -1;
}

static void stop(struct child *child)
{
	close_pipe(child, PIPE_IN);
	(void)kill(child->host, SIGTERM);
}

/* What a codec does not read it does not want: no failure by itself. */
static void feed(struct child *child, struct pumping *pumping)
{
	struct slice *next = &pumping->feed[pumping->feed[0].length ? 0 : 1];
	ssize_t sent = write(child->pipes[PIPE_IN], next->bytes, next->length);

	if (sent > 0) {
		next->bytes += sent;
		next->length -= (size_t)sent;
	} else if (sent < 0 && errno != EAGAIN && errno != EINTR) {
		close_pipe(child, PIPE_IN);
	}
}

static void keep_output(struct child *child, struct pumping *pumping,
			const uint8_t *bytes, size_t length)
{
	struct buffer *sink = pumping->sink;

	if (child->too_much || child->timed_out || child->status != STATUS_OK)
		return;
	if (length > sink->limit - sink->length)
		child->too_much = true;
	else
		child->status = buffer_add(sink, bytes, length);
	if (child->too_much || child->status != STATUS_OK)
		stop(child);
}

static void keep_tail(struct child *child, const uint8_t *bytes, size_t length)
{
	size_t over;

	if (length > TAIL_BYTES) {
		bytes += length - TAIL_BYTES;
		length = TAIL_BYTES;
	}
	over = child->tail_length + length > TAIL_BYTES
		       ? child->tail_length + length - TAIL_BYTES
		       : 0;
	memmove(child->tail, child->tail + over, child->tail_length - over);
	child->tail_length -= over;
	memcpy(child->tail + child->tail_length, bytes, length);
	child->tail_length += length;
}

static void keep_report(struct child *child, const uint8_t *bytes,
			size_t length)
{
	size_t room = sizeof(child->report) - child->report_length;

	if (length > room)
		length = room;
	memcpy((uint8_t *)&child->report + child->report_length, bytes, length);
	child->report_length += length;
}

static void drain(struct child *child, enum child_pipe which,
		  struct pumping *pumping)
{
	uint8_t chunk[CHUNK_BYTES];
	ssize_t got = read(child->pipes[which], chunk, sizeof(chunk));

	if (got < 0 && (errno == EINTR || errno == EAGAIN))
		return;
	if (got <= 0)
		close_pipe(child, which);
	else if (which == PIPE_OUT)
		keep_output(child, pumping, chunk, (size_t)got);
	else if (which == PIPE_ERR)
		keep_tail(child, chunk, (size_t)got);
	else
		keep_report(child, chunk, (size_t)got);
}

static bool fed(const struct pumping *pumping)
{
	return !pumping->feed[0].length && !pumping->feed[1].length;
}

static bool ended(const struct child *child, const struct pumping *pumping)
{
	if (child->pipes[PIPE_OUT] < 0 && child->pipes[PIPE_ERR] < 0 &&
	    child->pipes[PIPE_REPORT] < 0)
		return true;
	return pumping->enough && !child->timed_out && !child->too_much &&
	       pumping->enough(pumping->sink);
}

static void step(struct child *child, struct pumping *pumping, double left)
{
	struct pollfd polled[CHILD_PIPES];

	for (size_t i = 0; i < CHILD_PIPES; i++)
		polled[i] = (struct pollfd){.fd = child->pipes[i],
					    .events = POLLIN};
	polled[PIPE_IN].events = POLLOUT;
	if (fed(pumping))
		polled[PIPE_IN].fd = -1;
	if (poll(polled, CHILD_PIPES, (int)(left * 1000) + 1) <= 0)
		return;
	for (size_t i = PIPE_OUT; i < CHILD_PIPES; i++) {
		if (polled[i].revents && child->pipes[i] >= 0)
			drain(child, (enum child_pipe)i, pumping);
	}
	if (polled[PIPE_IN].revents && child->pipes[PIPE_IN] >= 0)
		feed(child, pumping);
}

/* False when even the host has to be killed. */
static bool out_of_time(struct child *child, double *deadline)
{
	if (child->timed_out || child->too_much || child->status != STATUS_OK) {
		(void)kill(child->host, SIGKILL);
		return false;
	}
	child->timed_out = true;
	stop(child);
	*deadline = child_clock() + CLEANING_SECONDS;
	return true;
}

static void pump(struct child *child, struct pumping *pumping)
{
	double deadline = child_clock() + child->plan->bounds.seconds;
	bool stopping = false;

	while (!ended(child, pumping)) {
		double left = deadline - child_clock();

		if (left <= 0 && !out_of_time(child, &deadline))
			return;
		if (!stopping &&
		    (child->too_much || child->status != STATUS_OK)) {
			stopping = true;
			deadline = child_clock() + CLEANING_SECONDS;
		}
		if (fed(pumping) && pumping->close_after)
			close_pipe(child, PIPE_IN);
		step(child, pumping, left > 0 ? left : 0);
	}
}

/*
 * A child that stops reading must not kill this program: SIGPIPE is held back
 * in this thread, and taken off again if it came.
 */
void child_pump(struct child *child, struct pumping *pumping)
{
	const struct timespec now = {0, 0};
	sigset_t broken, before, waiting;

	(void)sigemptyset(&broken);
	(void)sigaddset(&broken, SIGPIPE);
	(void)sigpending(&waiting);
	(void)pthread_sigmask(SIG_BLOCK, &broken, &before);
	pump(child, pumping);
	if (!sigismember(&waiting, SIGPIPE))
		(void)sigtimedwait(&broken, NULL, &now);
	(void)pthread_sigmask(SIG_SETMASK, &before, NULL);
}
