#define _XOPEN_SOURCE 700 /* realpath */
#include "corpus/set_path.h"

#include "base/memory.h"

#include <limits.h>
#include <stdlib.h>
#include <string.h>

enum status path_folder(const char *path, char **folder)
{
	const char *slash = strrchr(path, '/');
	size_t length = slash ? (size_t)(slash - path) : 1;
	char *copy;

	/* The root itself keeps its slash. */
	if (slash == path)
		length = 1;
	TRY(memory_new(length + 1, 1, &copy));
	memcpy(copy, slash ? path : ".", length);
	copy[length] = '\0';
	*folder = copy;
	return STATUS_OK;
}

static bool leaves_folder(const char *path)
{
	size_t depth = 0;

	if (path[0] == '/')
		return true;
	while (*path) {
		size_t length = strcspn(path, "/");

		if (length == 2 && memcmp(path, "..", 2) == 0) {
			if (!depth--)
				return true;
		} else if (length && !(length == 1 && path[0] == '.')) {
			depth++;
		}
		path += length + (path[length] == '/');
	}
	return false;
}

enum status path_join(const char *folder, bool outside, char **file,
		      struct reason *why)
{
	size_t room = strlen(folder) + 1 + strlen(*file) + 1;
	char *joined;

	if (!outside && leaves_folder(*file))
		return reason_give(why, STATUS_BAD_USAGE,
				   "\"%s\" leaves the folder of the set file; "
				   "move it there, or allow it with "
				   "--outside",
				   *file);
	if ((*file)[0] == '/')
		return STATUS_OK;
	TRY(memory_new(room, 1, &joined));
	strcpy(joined, folder);
	strcat(joined, "/");
	strcat(joined, *file);
	memory_free(*file);
	*file = joined;
	return STATUS_OK;
}

enum status path_absolute(const char *folder, char **absolute)
{
	char real[PATH_MAX];
	const char *found = realpath(folder, real);
	char *copy;

	/* A folder that is not there is told by what is looked for in it. */
	if (!found)
		found = folder;
	TRY(memory_new(strlen(found) + 1, 1, &copy));
	strcpy(copy, found);
	*absolute = copy;
	return STATUS_OK;
}

bool path_is_within(const char *path, const char *folder)
{
	char real[PATH_MAX], top[PATH_MAX];
	size_t length;

	/* What cannot be followed cannot be read either: reading says why. */
	if (!realpath(path, real) || !realpath(folder, top))
		return true;
	length = strlen(top);
	if (length == 1)
		return true;
	return strncmp(real, top, length) == 0 && real[length] == '/';
}
