#include "support/bytes.h"

#include "base/random.h"

#include <string.h>

void bytes_random(uint8_t *bytes, size_t length, uint64_t seed)
{
	struct random_stream random;

	random_init(&random, seed, 0);
	for (size_t i = 0; i < length; i++)
		bytes[i] = (uint8_t)random_u32(&random);
}

void bytes_words(uint8_t *bytes, size_t length, uint64_t seed)
{
	static const char *const words[] = {
		"tide ",  "gauge ", "ebb ",   "marrow ", "bay ", "frame ",
		"silt\n", "buoy ",  "depth ", "flood ",  "log ", "station "};
	struct random_stream random;
	size_t i = 0;

	random_init(&random, seed, 1);
	while (i < length) {
		const char *word = words[random_below(&random, 12)];

		for (; *word && i < length; word++)
			bytes[i++] = (uint8_t)*word;
	}
}
