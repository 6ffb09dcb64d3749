#include "cli/command.h"

#include <string.h>

#define NAME_MAX_LENGTH 32

/* Levenshtein 1966: fewest single-letter edits from a to b. */
static size_t edits(const char *a, const char *b)
{
	size_t row[NAME_MAX_LENGTH + 1];
	size_t width = strlen(b);

	if (width > NAME_MAX_LENGTH || strlen(a) > NAME_MAX_LENGTH)
		return NAME_MAX_LENGTH;
	for (size_t j = 0; j <= width; j++)
		row[j] = j;
	for (size_t i = 0; a[i]; i++) {
		size_t corner = row[0];

		row[0] = i + 1;
		for (size_t j = 0; j < width; j++) {
			size_t best = corner + (a[i] != b[j]);

			corner = row[j + 1];
			if (row[j] + 1 < best)
				best = row[j] + 1;
			if (corner + 1 < best)
				best = corner + 1;
			row[j + 1] = best;
		}
	}
	return row[width];
}

const char *nearest_name(const char *wrong, const char *const *names,
			 size_t count)
{
	const char *best = NULL;
	size_t fewest = strlen(wrong) / 3 + 2;

	for (size_t i = 0; i < count; i++) {
		size_t distance = edits(wrong, names[i]);

		if (distance < fewest) {
			fewest = distance;
			best = names[i];
		}
	}
	return best;
}
