/* The heap: the only calls to it in the program, every product checked. */
#ifndef BASE_MEMORY_H
#define BASE_MEMORY_H

#include "base/status.h"

#include <stddef.h>
#include <stdint.h>

/*
 * Hands out count x size bytes through *out, uninitialised or zeroed. The
 * caller owns them and gives them back with memory_free. A count or size of 0
 * yields one byte, so that *out is never NULL on success.
 * STATUS_NO_MEMORY: the product overflows or the heap is exhausted.
 */
MUST_USE enum status memory_new(size_t count, size_t size, void *out);
MUST_USE enum status memory_new_zeroed(size_t count, size_t size, void *out);

/* As memory_new with zeroes, at an address that is a multiple of 64. */
MUST_USE enum status memory_new_lines(size_t count, size_t size, void *out);

/* Resizes the block at *(void **)block; it is unchanged on failure. */
MUST_USE enum status memory_resize(void *block, size_t count, size_t size);

/* Gives a block back; NULL is allowed. */
void memory_free(void *block);

/*
 * Bytes this process can hope for at most: physical memory, or the limit on its
 * address space where that is less. Free memory is no guide: caches give way.
 */
uint64_t memory_available(void);

/* A growing run of bytes with its largest size fixed at birth. */
struct buffer {
	uint8_t *bytes; /* owned */
	size_t length;  /* bytes in use */
	size_t room;    /* bytes allocated */
	size_t limit;   /* length never exceeds this */
};

void buffer_init(struct buffer *buffer, size_t limit);
/* Makes room for extra more bytes. STATUS_NO_MEMORY: past the limit too. */
MUST_USE enum status buffer_reserve(struct buffer *buffer, size_t extra);
MUST_USE enum status buffer_add(struct buffer *buffer, const void *bytes,
				size_t length);
void buffer_release(struct buffer *buffer);

/* Borrowed bytes. */
struct slice {
	const uint8_t *bytes;
	size_t length;
};

#endif
