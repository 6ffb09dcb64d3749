/* Keeping a codec in bounds: limits, what it leaves behind, its folder. */
#ifndef HOST_CONTAIN_H
#define HOST_CONTAIN_H

#include <stdbool.h>
#include <stdint.h>

struct bounds {
	uint64_t memory_bytes, cpu_seconds, file_bytes;
};

/* Sets the limits of the calling process. False: errno says why. */
bool bounds_set(const struct bounds *bounds);

/* Closes every descriptor from the first on. */
void close_from(int first);

/*
 * Kills every child of the calling process, and theirs as they come to it (it
 * must be their subreaper), until none is left.
 */
void end_children(void);
/* True when a child still runs after a moment of grace. */
bool children_run(void);

/* Removes a folder with all that is in it; links are not followed. */
void remove_folder(const char *path);

#endif
