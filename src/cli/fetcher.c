#include "cli/fetcher.h"

#include "base/memory.h"
#include "cli/beside.h"

#include <errno.h>
#include <spawn.h>
#include <stdio.h>
#include <string.h>
#include <sys/wait.h>
#include <unistd.h>

extern char **environ;

/* Beside an installed program, and beside a build tree. */
static const char *const places[2] = {
	"/../libexec/ratefloor/fetch-corpora",
	"/../../scripts/fetch-corpora",
};

static MUST_USE enum status run_script(char *const *arguments, int *all_there,
				       struct reason *why)
{
	posix_spawn_file_actions_t actions;
	pid_t child;
	int error, state = 0;

	if (posix_spawn_file_actions_init(&actions) != 0)
		return STATUS_NO_MEMORY;
	error = posix_spawn_file_actions_adddup2(&actions, STDERR_FILENO,
						 STDOUT_FILENO);
	if (!error)
		error = posix_spawn(&child, arguments[0], &actions, NULL,
				    arguments, environ);
	(void)posix_spawn_file_actions_destroy(&actions);
	if (error)
		return reason_give(why, STATUS_IO, "%s: %s", arguments[0],
				   strerror(error));
	while (waitpid(child, &state, 0) < 0) {
		if (errno != EINTR)
			return reason_give(why, STATUS_IO, "%s: %s",
					   arguments[0], strerror(errno));
	}
	*all_there = WIFEXITED(state) && WEXITSTATUS(state) == 0;
	return STATUS_OK;
}

enum status fetcher_run(const char *folder, const char *const *names,
			size_t count, int *all_there, struct reason *why)
{
	static char into[] = "--into";
	char script[BESIDE_BYTES];
	char **arguments;
	enum status status;

	TRY(beside_find(places, script, why));
	TRY(memory_new_zeroed(count + 4, sizeof(*arguments), &arguments));
	/* posix_spawn takes char * for strings that it does not change. */
	arguments[0] = script;
	arguments[1] = into;
	memcpy(&arguments[2], &folder, sizeof(folder));
	memcpy(&arguments[3], names, count * sizeof(*names));
	status = run_script(arguments, all_there, why);
	memory_free(arguments);
	return status;
}
