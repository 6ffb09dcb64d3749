/* Work spread over threads. */
#ifndef BASE_POOL_H
#define BASE_POOL_H

#include "base/status.h"

#include <stddef.h>

/*
 * Calls work(context, i) once for every i below count, on at most jobs threads
 * (0 counts as 1; 1 runs on the caller's). Items are begun in order of i.
 * Returns when all are done; fewer threads than asked for only make it slower.
 * STATUS_NO_MEMORY: nothing was called. Work reports its own failures through
 * context.
 */
MUST_USE enum status pool_run(size_t count, unsigned jobs,
			      void (*work)(void *context, size_t i),
			      void *context);

#endif
