/* Running the script that fetches open corpora. */
#ifndef CLI_FETCHER_H
#define CLI_FETCHER_H

#include "base/status.h"

#include <stddef.h>

/*
 * Runs fetch-corpora --into folder names...; its talk goes to standard error.
 * *all_there says whether it got every one. STATUS_NOT_FOUND: the script is
 * neither installed nor beside the build; why says where it was looked for.
 */
MUST_USE enum status fetcher_run(const char *folder, const char *const *names,
				 size_t count, int *all_there,
				 struct reason *why);

#endif
