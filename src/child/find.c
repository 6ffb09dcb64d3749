#include "child/child.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

bool child_find(const char *program, char path[CHILD_PATH_BYTES])
{
	const char *next = getenv("PATH");

	if (strchr(program, '/'))
		return snprintf(path, CHILD_PATH_BYTES, "%s", program) <
		       CHILD_PATH_BYTES;
	while (next && *next) {
		size_t length = strcspn(next, ":");
		int needed = snprintf(path, CHILD_PATH_BYTES, "%.*s/%s",
				      (int)length, next, program);

		if (length && needed < CHILD_PATH_BYTES &&
		    access(path, X_OK) == 0)
			return true;
		next += length + (next[length] == ':');
	}
	return false;
}
