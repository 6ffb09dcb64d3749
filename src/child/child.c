#include "child/child.h"

#include "child/pump.h"

#include <errno.h>
#include <fcntl.h>
#include <signal.h>
#include <spawn.h>
#include <stdio.h>
#include <string.h>
#include <sys/wait.h>
#include <unistd.h>

extern char **environ;

#define WORDS_MOST 64
#define NUMBER_BYTES 24
/* Words of the host before those of the codec. */
#define HOST_WORDS 6
/* Our descriptors for the child are moved out of the way of 0 to 3. */
#define FD_FIRST 10

struct command_line {
	char *words[HOST_WORDS + WORDS_MOST + 1];
	char numbers[4][NUMBER_BYTES];
};

static void close_all(int *fds, size_t count)
{
	for (size_t i = 0; i < count; i++) {
		if (fds[i] >= 0)
			(void)close(fds[i]);
		fds[i] = -1;
	}
}

/* Not inherited by what other threads start meanwhile. */
static bool move_up(int *fd)
{
	int moved = fcntl(*fd, F_DUPFD_CLOEXEC, FD_FIRST);

	(void)close(*fd);
	*fd = moved;
	return moved >= 0;
}

static MUST_USE enum status make_pipes(int ours[CHILD_PIPES],
				       int theirs[CHILD_PIPES])
{
	for (size_t i = 0; i < CHILD_PIPES; i++) {
		int ends[2];
		bool good;

		if (pipe(ends) != 0)
			return STATUS_IO;
		good = move_up(&ends[0]);
		good = move_up(&ends[1]) && good;
		ours[i] = ends[i == PIPE_IN ? 1 : 0];
		theirs[i] = ends[i == PIPE_IN ? 0 : 1];
		if (!good || fcntl(ours[i], F_SETFL, O_NONBLOCK) != 0)
			return STATUS_IO;
	}
	return STATUS_OK;
}

static MUST_USE enum status make_words(const struct child_plan *plan,
				       struct command_line *line)
{
	static char command[] = "command", library[] = "library";
	const struct child_bounds *bounds = &plan->bounds;
	long processors = sysconf(_SC_NPROCESSORS_ONLN);
	const unsigned long long numbers[4] = {
		(unsigned long long)getpid(), bounds->memory_bytes,
		bounds->seconds *
			(processors > 0 ? (unsigned long long)processors : 1),
		bounds->file_bytes};
	size_t count = 0;

	memcpy(&line->words[0], &plan->host, sizeof(plan->host));
	line->words[1] = plan->library ? library : command;
	for (size_t i = 0; i < 4; i++) {
		(void)snprintf(line->numbers[i], NUMBER_BYTES, "%llu",
			       numbers[i]);
		line->words[2 + i] = line->numbers[i];
	}
	while (plan->words[count]) {
		if (count == WORDS_MOST)
			return STATUS_BAD_USAGE;
		line->words[HOST_WORDS + count] = plan->words[count];
		count++;
	}
	line->words[HOST_WORDS + count] = NULL;
	return STATUS_OK;
}

/* 0 or an errno. */
static int spawn(const struct command_line *line, const int theirs[CHILD_PIPES],
		 pid_t *host)
{
	posix_spawn_file_actions_t actions;
	posix_spawnattr_t attributes;
	sigset_t none, all;
	int error = posix_spawn_file_actions_init(&actions);

	if (error)
		return error;
	error = posix_spawnattr_init(&attributes);
	if (error) {
		(void)posix_spawn_file_actions_destroy(&actions);
		return error;
	}
	(void)sigemptyset(&none);
	(void)sigfillset(&all);
	(void)posix_spawnattr_setflags(
		&attributes, POSIX_SPAWN_SETPGROUP | POSIX_SPAWN_SETSIGMASK |
				     POSIX_SPAWN_SETSIGDEF);
	(void)posix_spawnattr_setpgroup(&attributes, 0);
	(void)posix_spawnattr_setsigmask(&attributes, &none);
	(void)posix_spawnattr_setsigdefault(&attributes, &all);
	for (int i = 0; !error && i < CHILD_PIPES; i++)
		error = posix_spawn_file_actions_adddup2(&actions, theirs[i],
							 i);
	if (!error)
		error = posix_spawn(host, line->words[0], &actions, &attributes,
				    line->words, environ);
	(void)posix_spawnattr_destroy(&attributes);
	(void)posix_spawn_file_actions_destroy(&actions);
	return error;
}

static MUST_USE enum status start(const struct child_plan *plan,
				  struct child *child, struct reason *why)
{
	struct command_line line;
	int theirs[CHILD_PIPES] = {-1, -1, -1, -1};
	int error = 0;

	*child = (struct child){
		.plan = plan, .host = -1, .pipes = {-1, -1, -1, -1}};
	if (make_words(plan, &line) != STATUS_OK)
		return reason_give(why, STATUS_BAD_USAGE,
				   "a command has at most %d words",
				   WORDS_MOST);
	if (make_pipes(child->pipes, theirs) != STATUS_OK)
		error = errno;
	if (!error)
		error = spawn(&line, theirs, &child->host);
	close_all(theirs, CHILD_PIPES);
	if (!error)
		return STATUS_OK;
	child->host = -1;
	close_all(child->pipes, CHILD_PIPES);
	return reason_give(why, STATUS_IO, "cannot be run: %s: %s", plan->host,
			   strerror(error));
}

/* The host is the last to end: it has its child's end behind it. */
static void finish(struct child *child)
{
	close_all(child->pipes, CHILD_PIPES);
	while (child->host > 0 && waitpid(child->host, NULL, 0) < 0) {
		if (errno != EINTR)
			break;
	}
	child->host = -1;
}

static MUST_USE enum status judge(const struct child *child, struct reason *why)
{
	struct reason spare = {""};
	enum status status;

	if (!why)
		why = &spare;
	status = child_fate(child, why);
	if (status != STATUS_OK)
		child_quote(child, why);
	return status;
}

enum status child_run(const struct child_plan *plan, struct slice input,
		      struct buffer *out, struct child_usage *usage,
		      struct reason *why)
{
	struct pumping pumping = {
		.feed = {input}, .close_after = true, .sink = out};
	double before = child_clock();
	struct child child;
	enum status status;

	TRY(start(plan, &child, why));
	child_pump(&child, &pumping);
	finish(&child);
	status = judge(&child, why);
	if (status == STATUS_OK && usage)
		*usage = (struct child_usage){
			child.report.peak_bytes,
			1e-6 * (double)child.report.cpu_microseconds,
			child_clock() - before};
	return status;
}

enum status child_open(const struct child_plan *plan, struct child **child,
		       struct reason *why)
{
	struct child *made;
	enum status status;

	if (memory_new(1, sizeof(*made), &made) != STATUS_OK)
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	status = start(plan, made, why);
	if (status != STATUS_OK) {
		memory_free(made);
		return status;
	}
	*child = made;
	return STATUS_OK;
}

static MUST_USE enum status take_reply(const struct child *child,
				       const struct host_reply *reply,
				       struct reason *why)
{
	switch ((enum host_result)reply->result) {
	case HOST_DONE:
		return STATUS_OK;
	case HOST_FULL:
		return reason_give(why, STATUS_CODEC,
				   "wrote too much: more than its output may "
				   "be long");
	case HOST_ERROR:
		return reason_give(why, STATUS_CODEC, "failed: %.*s",
				   HOST_WORDS_BYTES, reply->words);
	case HOST_REFUSED:
		return reason_give(why, STATUS_CODEC, "not loaded: %s: %.*s",
				   child->plan->words[0], HOST_WORDS_BYTES,
				   reply->words);
	case HOST_NO_MEMORY:
		break;
	}
	return reason_give(why, STATUS_CODEC,
			   "out of memory: no room for the input and output");
}

static bool whole_reply(const struct buffer *sink)
{
	struct host_reply reply;

	if (sink->length < sizeof(reply))
		return false;
	memcpy(&reply, sink->bytes, sizeof(reply));
	return sink->length - sizeof(reply) >= reply.length;
}

static MUST_USE enum status
read_reply(struct child *child, const struct buffer *sink, struct buffer *out,
	   struct child_usage *usage, struct reason *why)
{
	struct host_reply reply;

	if (child->timed_out || child->too_much || child->status != STATUS_OK ||
	    !whole_reply(sink)) {
		finish(child);
		return judge(child, why) == STATUS_OK
			       ? reason_give(why, STATUS_CODEC,
					     "ended without an answer")
			       : child_fate(child, NULL);
	}
	memcpy(&reply, sink->bytes, sizeof(reply));
	TRY(take_reply(child, &reply, why));
	if (usage)
		*usage = (struct child_usage){
			reply.peak_bytes, 1e-6 * (double)reply.cpu_microseconds,
			1e-6 * (double)reply.wall_microseconds};
	if (buffer_add(out, sink->bytes + sizeof(reply),
		       (size_t)reply.length) != STATUS_OK)
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	return STATUS_OK;
}

enum status child_ask(struct child *child, const struct host_request *request,
		      struct slice input, struct buffer *out,
		      struct child_usage *usage, struct reason *why)
{
	struct buffer sink;
	struct pumping pumping = {
		.feed = {{(const uint8_t *)request, sizeof(*request)}, input},
		.sink = &sink,
		.enough = whole_reply};
	enum status status;

	if (child->host < 0)
		return reason_give(why, STATUS_CODEC, "has ended already");
	buffer_init(&sink, sizeof(struct host_reply) + (size_t)request->room);
	child_pump(child, &pumping);
	status = read_reply(child, &sink, out, usage, why);
	buffer_release(&sink);
	return status;
}

enum status child_end(struct child *child, struct reason *why)
{
	struct buffer nothing;
	struct pumping pumping = {.close_after = true, .sink = &nothing};

	if (child->host < 0)
		return reason_give(why, STATUS_CODEC, "has ended already");
	buffer_init(&nothing, 0);
	child_pump(child, &pumping);
	finish(child);
	buffer_release(&nothing);
	return judge(child, why);
}

void child_close(struct child *child)
{
	if (!child)
		return;
	if (child->host > 0)
		(void)kill(child->host, SIGTERM);
	finish(child);
	memory_free(child);
}
