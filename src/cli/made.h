/* Corpora that the program makes itself: synth, and the origins in set files.
 */
#ifndef CLI_MADE_H
#define CLI_MADE_H

#include "base/status.h"

#include <stdint.h>

/*
 * Writes symbols of a source to path (NULL: standard output); *rate is its
 * entropy rate in bits per symbol. symbols 0: the source's own default.
 * STATUS_NOT_FOUND: no such source, and why lists them; STATUS_IO.
 */
MUST_USE enum status made_write(const char *source, uint64_t symbols,
				uint64_t seed, const char *path, double *rate,
				struct reason *why);

/*
 * Reads an origin "ratefloor synth NAME --symbols N --seed S"; name has 64
 * bytes. STATUS_NOT_FOUND: it is some other origin.
 */
MUST_USE enum status made_origin(const char *origin, char name[64],
				 uint64_t *symbols, uint64_t *seed);

#endif
