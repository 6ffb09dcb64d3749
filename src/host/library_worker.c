/* Anonymous memory is older than the standard that leaves it out. */
#define _DEFAULT_SOURCE
#include "host/library_worker.h"

#include "host/host_talk.h"
#include "host/house_codec.h"

#include <dlfcn.h>
#include <errno.h>
#include <fcntl.h>
#include <stdbool.h>
#include <stdio.h>
#include <string.h>
#include <sys/mman.h>
#include <sys/resource.h>
#include <time.h>
#include <unistd.h>

#define ALIGNMENT ((size_t)16)

struct worker {
	int requests, replies;
	const struct ratefloor_codec *codec;
};

/* Bytes whose last lie before a page that is not there. */
struct guarded {
	void *start;
	size_t mapped;
	uint8_t *bytes;
};

static bool guarded_init(struct guarded *run, size_t length)
{
	size_t page = (size_t)sysconf(_SC_PAGESIZE);
	size_t used = (length / ALIGNMENT + 1) * ALIGNMENT;

	*run = (struct guarded){NULL, 0, NULL};
	if (length > SIZE_MAX / 2)
		return false;
	run->mapped = (used + page - 1) / page * page + page;
	run->start = mmap(NULL, run->mapped, PROT_READ | PROT_WRITE,
			  MAP_PRIVATE | MAP_ANONYMOUS, -1, 0);
	if (run->start == MAP_FAILED) {
		run->start = NULL;
		return false;
	}
	run->bytes = (uint8_t *)run->start + run->mapped - page - used;
	return mprotect((uint8_t *)run->start + run->mapped - page, page,
			PROT_NONE) == 0;
}

static void guarded_release(struct guarded *run)
{
	if (run->start)
		(void)munmap(run->start, run->mapped);
}

static bool read_all(int fd, void *bytes, size_t length)
{
	uint8_t *next = bytes;

	while (length) {
		ssize_t got = read(fd, next, length);

		if (got < 0 && errno == EINTR)
			continue;
		if (got <= 0)
			return false;
		next += got;
		length -= (size_t)got;
	}
	return true;
}

static bool write_all(int fd, const void *bytes, size_t length)
{
	const uint8_t *next = bytes;

	while (length) {
		ssize_t sent = write(fd, next, length);

		if (sent < 0 && errno == EINTR)
			continue;
		if (sent <= 0)
			return false;
		next += sent;
		length -= (size_t)sent;
	}
	return true;
}

static uint64_t microseconds(clockid_t clock)
{
	struct timespec now;

	(void)clock_gettime(clock, &now);
	return (uint64_t)now.tv_sec * 1000000 + (uint64_t)now.tv_nsec / 1000;
}

static void put_words(struct host_reply *reply, const char *words)
{
	(void)snprintf(reply->words, sizeof(reply->words), "%s", words);
}

static void judge(const struct worker *worker, int result, size_t room,
		  struct host_reply *reply)
{
	if (result == RATEFLOOR_FULL || reply->length > room) {
		reply->result = HOST_FULL;
	} else if (result != RATEFLOOR_DONE) {
		const char *words = worker->codec->words
					    ? worker->codec->words(result)
					    : NULL;

		reply->result = HOST_ERROR;
		if (words)
			put_words(reply, words);
		else
			(void)snprintf(reply->words, sizeof(reply->words),
				       "error %d", result);
	}
	if (reply->result != HOST_DONE)
		reply->length = 0;
}

static void call(const struct worker *worker,
		 const struct host_request *request, const uint8_t *input,
		 uint8_t *output, struct host_reply *reply)
{
	uint64_t cpu = microseconds(CLOCK_PROCESS_CPUTIME_ID);
	uint64_t wall = microseconds(CLOCK_MONOTONIC);
	size_t length = (size_t)request->room;
	struct rusage used;
	int result;

	if (request->action == HOST_COMPRESS)
		result = worker->codec->compress(request->level, input,
						 (size_t)request->length,
						 output, &length);
	else
		result = worker->codec->decompress(
			input, (size_t)request->length, output, &length);
	reply->cpu_microseconds = microseconds(CLOCK_PROCESS_CPUTIME_ID) - cpu;
	reply->wall_microseconds = microseconds(CLOCK_MONOTONIC) - wall;
	if (getrusage(RUSAGE_SELF, &used) == 0)
		reply->peak_bytes = (uint64_t)used.ru_maxrss * 1024;
	reply->length = length;
	judge(worker, result, (size_t)request->room, reply);
}

static bool answer(const struct worker *worker,
		   const struct host_request *request)
{
	struct host_reply reply = {.result = HOST_DONE};
	struct guarded input, output;
	bool good;

	good = guarded_init(&input, (size_t)request->length);
	if (!guarded_init(&output, (size_t)request->room) || !good) {
		reply.result = HOST_NO_MEMORY;
		good = write_all(worker->replies, &reply, sizeof(reply));
	} else if (read_all(worker->requests, input.bytes,
			    (size_t)request->length)) {
		call(worker, request, input.bytes, output.bytes, &reply);
		good = write_all(worker->replies, &reply, sizeof(reply)) &&
		       write_all(worker->replies, output.bytes,
				 (size_t)reply.length);
	}
	guarded_release(&input);
	guarded_release(&output);
	return good && reply.result != HOST_NO_MEMORY;
}

static const char *load(struct worker *worker, const char *path)
{
	const struct ratefloor_codec *(*get)(void);
	void *object = dlopen(path, RTLD_NOW | RTLD_LOCAL), *symbol;

	if (!object)
		return dlerror();
	symbol = dlsym(object, "ratefloor_codec");
	if (!symbol)
		return "it exports no function ratefloor_codec";
	/* ISO C has no cast from an object's address to a function's. */
	memcpy(&get, &symbol, sizeof(get));
	worker->codec = get();
	if (!worker->codec || worker->codec->abi != RATEFLOOR_CODEC_ABI)
		return "its table has another abi than this program's "
		       "house_codec.h";
	if (!worker->codec->compress || !worker->codec->decompress)
		return "its table lacks compress or decompress";
	return NULL;
}

/* The codec sees an empty input, and its prints go with its errors. */
static bool take_pipes(struct worker *worker)
{
	int nothing = open("/dev/null", O_RDONLY);

	worker->requests = dup(STDIN_FILENO);
	worker->replies = dup(STDOUT_FILENO);
	return nothing >= 0 && worker->requests >= 0 && worker->replies >= 0 &&
	       dup2(nothing, STDIN_FILENO) >= 0 &&
	       dup2(STDERR_FILENO, STDOUT_FILENO) >= 0;
}

void library_work(const char *path)
{
	struct worker worker = {-1, -1, NULL};
	struct host_request request;
	const char *refusal;

	if (!take_pipes(&worker))
		return;
	refusal = load(&worker, path);
	while (read_all(worker.requests, &request, sizeof(request))) {
		if (refusal) {
			struct host_reply reply = {.result = HOST_REFUSED};

			put_words(&reply, refusal);
			(void)write_all(worker.replies, &reply, sizeof(reply));
			return;
		}
		request.level[HOST_LEVEL_BYTES - 1] = '\0';
		if (!answer(&worker, &request))
			return;
	}
}
