/* The codec host: runs one codec in bounds and reports how it ended. */
#include "host/contain.h"
#include "host/host_talk.h"
#include "host/library_worker.h"

#include <errno.h>
#include <fcntl.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/prctl.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <unistd.h>

enum word {
	WORD_SORT = 1,
	WORD_PARENT,
	WORD_MEMORY,
	WORD_CPU,
	WORD_FILE,
	WORD_FIRST
};

struct host {
	char **words;
	struct bounds bounds;
	sigset_t usual;   /* the mask as it came */
	char folder[512]; /* private; "" before it is made */
	int trouble[2]; /* pipe: the child's host_report before it could run */
	pid_t child;
};

static bool is_library(const struct host *host)
{
	return strcmp(host->words[WORD_SORT], "library") == 0;
}

static void tell_trouble(const struct host *host, enum host_end end)
{
	const struct host_report report = {.end = (int32_t)end, .value = errno};

	if (write(host->trouble[1], &report, sizeof(report)) < 0)
		_exit(126);
	_exit(127);
}

/* In the child: does not return. */
static void become_codec(const struct host *host)
{
	(void)setpgid(0, 0);
	(void)prctl(PR_SET_PDEATHSIG, SIGKILL);
	(void)prctl(PR_SET_NO_NEW_PRIVS, 1, 0, 0, 0);
	(void)sigprocmask(SIG_SETMASK, &host->usual, NULL);
	if (chdir(host->folder) != 0)
		tell_trouble(host, HOST_NO_FOLDER);
	if (!bounds_set(&host->bounds))
		tell_trouble(host, HOST_LIMITLESS);
	if (is_library(host)) {
		close_from(HOST_REPORT_FD);
		library_work(host->words[WORD_FIRST]);
		_exit(0);
	}
	(void)execvp(host->words[WORD_FIRST], &host->words[WORD_FIRST]);
	tell_trouble(host, HOST_NO_PROGRAM);
}

static bool make_folder(struct host *host)
{
	const char *parent = getenv("TMPDIR");
	int length = snprintf(host->folder, sizeof(host->folder),
			      "%s/ratefloor-XXXXXX",
			      parent && parent[0] == '/' ? parent : "/tmp");

	if (length >= (int)sizeof(host->folder))
		errno = ENAMETOOLONG;
	else if (mkdtemp(host->folder))
		return setenv("TMPDIR", host->folder, 1) == 0;
	host->folder[0] = '\0';
	return false;
}

static bool start_child(struct host *host)
{
	if (!make_folder(host) || pipe(host->trouble) != 0)
		return false;
	(void)fcntl(host->trouble[0], F_SETFD, FD_CLOEXEC);
	(void)fcntl(host->trouble[1], F_SETFD, FD_CLOEXEC);
	host->child = fork();
	if (host->child < 0)
		return false;
	if (host->child == 0)
		become_codec(host);
	(void)close(host->trouble[1]);
	/* Only the codec holds its pipes: their ends are then its own. */
	for (int fd = 0; fd < HOST_REPORT_FD; fd++)
		(void)close(fd);
	return true;
}

/* Waits for the codec, or for the word to end it. */
static void await_child(const struct host *host, struct host_report *report)
{
	sigset_t awaited;
	int state = 0;

	(void)sigemptyset(&awaited);
	(void)sigaddset(&awaited, SIGCHLD);
	(void)sigaddset(&awaited, SIGTERM);
	report->end = HOST_EXITED;
	while (waitpid(host->child, &state, WNOHANG) == 0) {
		if (sigwaitinfo(&awaited, NULL) != SIGTERM)
			continue;
		report->end = HOST_STOPPED;
		(void)kill(-host->child, SIGKILL);
		(void)kill(host->child, SIGKILL);
	}
	if (report->end == HOST_STOPPED)
		return;
	if (WIFSIGNALED(state)) {
		report->end = HOST_SIGNALLED;
		report->value = WTERMSIG(state);
	} else {
		report->value = WEXITSTATUS(state);
	}
}

static void read_usage(struct host_report *report)
{
	struct rusage used;

	if (getrusage(RUSAGE_CHILDREN, &used) != 0)
		return;
	report->peak_bytes = (uint64_t)used.ru_maxrss * 1024;
	report->cpu_microseconds =
		(uint64_t)(used.ru_utime.tv_sec + used.ru_stime.tv_sec) *
			1000000 +
		(uint64_t)(used.ru_utime.tv_usec + used.ru_stime.tv_usec);
}

static void supervise(struct host *host, struct host_report *report)
{
	struct host_report trouble;

	if (!start_child(host)) {
		*report = (struct host_report){.end = HOST_NO_FOLDER,
					       .value = errno};
		return;
	}
	await_child(host, report);
	if (report->end != HOST_STOPPED)
		report->left_running = children_run();
	end_children();
	if (read(host->trouble[0], &trouble, sizeof(trouble)) ==
	    (ssize_t)sizeof(trouble))
		*report = trouble;
	read_usage(report);
}

static bool read_words(struct host *host, int count, char **words)
{
	if (count <= WORD_FIRST)
		return false;
	host->words = words;
	host->bounds = (struct bounds){
		strtoull(words[WORD_MEMORY], NULL, 10),
		strtoull(words[WORD_CPU], NULL, 10),
		strtoull(words[WORD_FILE], NULL, 10),
	};
	return true;
}

/* Dies with its parent, but not before it has cleaned up. */
static bool follow_parent(struct host *host)
{
	sigset_t held;

	(void)sigemptyset(&held);
	(void)sigaddset(&held, SIGCHLD);
	(void)sigaddset(&held, SIGTERM);
	if (sigprocmask(SIG_BLOCK, &held, &host->usual) != 0)
		return false;
	(void)prctl(PR_SET_CHILD_SUBREAPER, 1, 0, 0, 0);
	(void)prctl(PR_SET_PDEATHSIG, SIGTERM);
	return getppid() == (pid_t)strtol(host->words[WORD_PARENT], NULL, 10);
}

int main(int count, char **words)
{
	struct host host = {.folder = ""};
	struct host_report report = {0};

	if (!read_words(&host, count, words)) {
		(void)fprintf(stderr, "codec-host is run by ratefloor, not by "
				      "hand\n");
		return 2;
	}
	close_from(HOST_REPORT_FD + 1);
	(void)fcntl(HOST_REPORT_FD, F_SETFD, FD_CLOEXEC);
	if (!follow_parent(&host))
		return 1;
	supervise(&host, &report);
	if (host.folder[0])
		remove_folder(host.folder);
	return write(HOST_REPORT_FD, &report, sizeof(report)) !=
	       (ssize_t)sizeof(report);
}
