/* Inputs for tests: bytes of several characters, the same for a seed. */
#ifndef SUPPORT_BYTES_H
#define SUPPORT_BYTES_H

#include <stddef.h>
#include <stdint.h>

/* Uniform bytes. */
void bytes_random(uint8_t *bytes, size_t length, uint64_t seed);
/* Words from a small vocabulary with spaces: compressible. */
void bytes_words(uint8_t *bytes, size_t length, uint64_t seed);

#endif
