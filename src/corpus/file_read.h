/* The bytes of one file. */
#ifndef CORPUS_FILE_READ_H
#define CORPUS_FILE_READ_H

#include "base/memory.h"
#include "base/status.h"

/*
 * Reads a whole regular file, at least one byte and at most limit, into bytes
 * that the caller frees (memory_free). Messages begin with the path.
 * STATUS_NOT_FOUND; STATUS_IO: a folder, a device, no permission, a failing
 * disk, a file that shrank; STATUS_BAD_INPUT: empty; STATUS_NO_MEMORY: longer
 * than limit, or the heap: why names both amounts, times each for every byte.
 */
struct read_limit {
	uint64_t bytes; /* memory that may be used */
	unsigned each;  /* bytes of memory that a byte of the file will take */
};

MUST_USE enum status file_read(const char *path, const struct read_limit *limit,
			       uint8_t **bytes, size_t *length,
			       struct reason *why);

#endif
