#define _GNU_SOURCE /* _SC_PHYS_PAGES, madvise */
#include "base/memory.h"

#include <stdlib.h>
#include <string.h>
#include <sys/mman.h>
#include <sys/resource.h>
#include <unistd.h>

static MUST_USE enum status product(size_t count, size_t size, size_t *bytes)
{
	size_t value;

	if (__builtin_mul_overflow(count, size, &value))
		return STATUS_NO_MEMORY;
	*bytes = value ? value : 1;
	return STATUS_OK;
}

static MUST_USE enum status hand_over(void *block, void *out)
{
	if (!block)
		return STATUS_NO_MEMORY;
	memcpy(out, &block, sizeof(block));
	return STATUS_OK;
}

enum status memory_new(size_t count, size_t size, void *out)
{
	size_t bytes;

	TRY(product(count, size, &bytes));
	return hand_over(malloc(bytes), out);
}

/* Large pages: scattered accesses then miss the translation far less often. */
#define LARGE_PAGE ((size_t)2 << 20)

static void prefer_large_pages(void *block, size_t bytes)
{
#ifdef MADV_HUGEPAGE
	uintptr_t start = (uintptr_t)block, end = start + bytes;

	start = (start + LARGE_PAGE - 1) & ~(uintptr_t)(LARGE_PAGE - 1);
	end &= ~(uintptr_t)(LARGE_PAGE - 1);
	/* A wish: where it is not granted nothing is lost but speed. */
	if (block && start < end)
		(void)madvise((void *)start, end - start, MADV_HUGEPAGE);
#else
	(void)block;
	(void)bytes;
#endif
}

enum status memory_new_zeroed(size_t count, size_t size, void *out)
{
	size_t bytes;
	void *block;

	TRY(product(count, size, &bytes));
	block = calloc(bytes, 1);
	prefer_large_pages(block, bytes);
	return hand_over(block, out);
}

enum status memory_new_lines(size_t count, size_t size, void *out)
{
	size_t bytes;
	void *block;

	TRY(product(count, size, &bytes));
	if (bytes > SIZE_MAX - 63)
		return STATUS_NO_MEMORY;
	bytes = (bytes + 63) & ~(size_t)63;
	block = aligned_alloc(64, bytes);
	prefer_large_pages(block, bytes);
	if (block)
		memset(block, 0, bytes);
	return hand_over(block, out);
}

enum status memory_resize(void *block, size_t count, size_t size)
{
	size_t bytes;
	void *old;

	TRY(product(count, size, &bytes));
	memcpy(&old, block, sizeof(old));
	return hand_over(realloc(old, bytes), block);
}

void memory_free(void *block)
{
	free(block);
}

uint64_t memory_available(void)
{
	long pages = sysconf(_SC_PHYS_PAGES);
	long page_bytes = sysconf(_SC_PAGESIZE);
	uint64_t available = UINT64_MAX;
	struct rlimit limit;

	if (pages > 0 && page_bytes > 0)
		available = (uint64_t)pages * (uint64_t)page_bytes;
	if (getrlimit(RLIMIT_AS, &limit) == 0 &&
	    limit.rlim_cur != RLIM_INFINITY && limit.rlim_cur < available)
		available = limit.rlim_cur;
	return available;
}

void buffer_init(struct buffer *buffer, size_t limit)
{
	*buffer = (struct buffer){.limit = limit};
}

enum status buffer_reserve(struct buffer *buffer, size_t extra)
{
	size_t need, room;

	if (extra > buffer->limit - buffer->length)
		return STATUS_NO_MEMORY;
	need = buffer->length + extra;
	if (need <= buffer->room && buffer->bytes)
		return STATUS_OK;
	room = buffer->room < 64 ? 64 : buffer->room;
	while (room < need)
		room = room > buffer->limit / 2 ? buffer->limit : room * 2;
	if (room < need)
		room = need;
	TRY(memory_resize(&buffer->bytes, room, 1));
	buffer->room = room;
	return STATUS_OK;
}

enum status buffer_add(struct buffer *buffer, const void *bytes, size_t length)
{
	TRY(buffer_reserve(buffer, length));
	if (length)
		memcpy(buffer->bytes + buffer->length, bytes, length);
	buffer->length += length;
	return STATUS_OK;
}

void buffer_release(struct buffer *buffer)
{
	memory_free(buffer->bytes);
	*buffer = (struct buffer){.limit = buffer->limit};
}
