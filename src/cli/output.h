/* Result files that are whole or not there. */
#ifndef CLI_OUTPUT_H
#define CLI_OUTPUT_H

#include "base/status.h"

#include <stdio.h>

/*
 * A file being written under a temporary name in the same folder; path NULL
 * is standard output. Close it with output_keep or output_drop.
 */
struct output {
	FILE *file;
	const char *path; /* borrowed */
	char temporary[4096];
};

MUST_USE enum status output_open(struct output *output, const char *path,
				 struct reason *why);
/* Flushes, syncs and moves into place. STATUS_IO: nothing is left behind. */
MUST_USE enum status output_keep(struct output *output, struct reason *why);
void output_drop(struct output *output);
/* Keeps what was written with STATUS_OK, else drops it and hands status on. */
MUST_USE enum status output_end(struct output *output, enum status status,
				struct reason *why);

#endif
