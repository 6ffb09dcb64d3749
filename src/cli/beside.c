#include "cli/beside.h"

#include <errno.h>
#include <stdio.h>
#include <string.h>
#include <unistd.h>

enum status beside_find(const char *const places[2], char path[BESIDE_BYTES],
			struct reason *why)
{
	char program[2048];
	ssize_t length =
		readlink("/proc/self/exe", program, sizeof(program) - 1);

	if (length < 0)
		return reason_give(why, STATUS_IO, "/proc/self/exe: %s",
				   strerror(errno));
	program[length] = '\0';
	*strrchr(program, '/') = '\0';
	for (size_t i = 0; i < 2; i++) {
		(void)snprintf(path, BESIDE_BYTES, "%s%s", program, places[i]);
		if (access(path, X_OK) == 0)
			return STATUS_OK;
	}
	return reason_give(why, STATUS_NOT_FOUND,
			   "%s is not there; it was looked for at %s%s and "
			   "%s%s",
			   strrchr(places[0], '/') + 1, program, places[0],
			   program, places[1]);
}

enum status beside_host(char path[BESIDE_BYTES], struct reason *why)
{
	static const char *const places[2] = {
		"/../libexec/ratefloor/codec-host", "/codec-host"};

	return beside_find(places, path, why);
}
