/* Files that are installed with the program. */
#ifndef CLI_BESIDE_H
#define CLI_BESIDE_H

#include "base/status.h"

#define BESIDE_BYTES 4096

/*
 * The path of an executable at one of two places against the folder that this
 * program lies in: installed, and in a build tree. STATUS_NOT_FOUND, STATUS_IO.
 */
MUST_USE enum status beside_find(const char *const places[2],
				 char path[BESIDE_BYTES], struct reason *why);

/* Likewise the codec host, which runs users' codecs. */
MUST_USE enum status beside_host(char path[BESIDE_BYTES], struct reason *why);

#endif
