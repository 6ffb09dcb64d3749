/* Makes the heap say no: every allocation of an action fails in turn. */
#ifndef FAULTS_INJECT_H
#define FAULTS_INJECT_H

#include "base/status.h"

#include <stdbool.h>

/*
 * Programs in this folder are linked with --wrap for malloc, calloc, realloc
 * and aligned_alloc, so that calls from the project's own objects come here
 * first. The n-th one from now fails once (n from 1; 0: none does).
 */
void inject_after(unsigned long n);
/* Whether the failure asked for has happened. */
bool inject_happened(void);

/*
 * Runs action once in peace, where it must return STATUS_OK, and then again
 * and again with its 1st, 2nd, 3rd … allocation failing; each of these runs
 * must return STATUS_NO_MEMORY. At most about `most` runs: a longer action is
 * hit at evenly spread places. Leaks are left to the sanitizer and valgrind.
 */
void inject_each(enum status (*action)(void *context), void *context,
		 unsigned long most);

#endif
