/* Times of day as people write them. */
#ifndef SOURCE_CLOCKFACE_H
#define SOURCE_CLOCKFACE_H

#include <stdint.h>

#define CLOCKFACE_BYTES 20

/*
 * ISO 8601, "2031-03-02T04:05:06Z" (20 characters, no NUL), of seconds since
 * 2000-01-01T00:00:00Z in the Gregorian calendar; up to the year 9999.
 */
void clockface_write(uint64_t seconds, char text[CLOCKFACE_BYTES]);

/* The value's last `digits` decimal digits, zeroes in front. */
void digits_write(uint64_t value, unsigned digits, char *text);

#endif
