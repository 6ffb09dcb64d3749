/* SHA-256 identity of bytes. */
#ifndef BASE_DIGEST_H
#define BASE_DIGEST_H

#include <stddef.h>

#define DIGEST_TEXT_BYTES 65

/* Writes the 64 lower-case hex digits of SHA-256 (FIPS 180-4) and a NUL. */
void digest_sha256(const void *bytes, size_t length,
		   char text[DIGEST_TEXT_BYTES]);

#endif
