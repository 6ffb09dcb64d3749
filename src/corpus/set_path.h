/* Where a corpus lies: paths against the folder of the set file. */
#ifndef CORPUS_SET_PATH_H
#define CORPUS_SET_PATH_H

#include "base/status.h"

#include <stdbool.h>

/* The folder part of a file's path, "." where it has none; owned by caller. */
MUST_USE enum status path_folder(const char *path, char **folder);
/*
 * Joins a path from a set file to its folder, into a new text in place of the
 * one in *file. Unless outside is set, STATUS_BAD_USAGE for an absolute path
 * and for one that climbs out of the folder at any point.
 */
MUST_USE enum status path_join(const char *folder, bool outside, char **file,
			       struct reason *why);

/* The folder as a path from the root, links followed; owned by caller. */
MUST_USE enum status path_absolute(const char *folder, char **absolute);
/* Is path, with every link followed, below the folder? True if not there. */
bool path_is_within(const char *path, const char *folder);

#endif
