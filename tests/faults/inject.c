#include "faults/inject.h"

#include "support/near.h"

#include <stdio.h>
#include <stdlib.h>

static unsigned long countdown, counted;
static bool happened;

void *__real_malloc(size_t bytes);
void *__real_calloc(size_t count, size_t bytes);
void *__real_realloc(void *block, size_t bytes);
void *__real_aligned_alloc(size_t alignment, size_t bytes);
void *__wrap_malloc(size_t bytes);
void *__wrap_calloc(size_t count, size_t bytes);
void *__wrap_realloc(void *block, size_t bytes);
void *__wrap_aligned_alloc(size_t alignment, size_t bytes);

void inject_after(unsigned long n)
{
	countdown = n;
	counted = 0;
	happened = false;
}

bool inject_happened(void)
{
	return happened;
}

static bool must_fail(void)
{
	counted++;
	if (!countdown || --countdown)
		return false;
	happened = true;
	return true;
}

void *__wrap_malloc(size_t bytes)
{
	return must_fail() ? NULL : __real_malloc(bytes);
}

void *__wrap_calloc(size_t count, size_t bytes)
{
	return must_fail() ? NULL : __real_calloc(count, bytes);
}

void *__wrap_realloc(void *block, size_t bytes)
{
	return must_fail() ? NULL : __real_realloc(block, bytes);
}

void *__wrap_aligned_alloc(size_t alignment, size_t bytes)
{
	return must_fail() ? NULL : __real_aligned_alloc(alignment, bytes);
}

void inject_each(enum status (*action)(void *context), void *context,
		 unsigned long most)
{
	unsigned long total, step;

	inject_after(0);
	assert_int_equal(action(context), STATUS_OK);
	total = counted;
	step = total > most ? total / most : 1;
	for (unsigned long n = 1; n <= total; n += step) {
		enum status status;

		inject_after(n);
		status = action(context);
		inject_after(0);
		if (status != STATUS_NO_MEMORY)
			fprintf(stderr, "allocation %lu of %lu: %s\n", n, total,
				status_words(status));
		assert_int_equal(status, STATUS_NO_MEMORY);
	}
}
