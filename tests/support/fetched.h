/* Real corpora for tests, where scripts/fetch-corpora has brought them. */
#ifndef SUPPORT_FETCHED_H
#define SUPPORT_FETCHED_H

#include "base/memory.h"

/*
 * At most most bytes of a file in RATEFLOOR_CORPORA (default corpora/fetched);
 * bytes is NULL where the file is absent, and a line says so. The caller gives
 * bytes back with free.
 */
struct fetched {
	uint8_t *bytes;
	size_t length;
};
struct fetched fetched_read(const char *name, size_t most);

#endif
