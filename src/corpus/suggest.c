#include "corpus/suggest.h"

#include <string.h>

#define WORD_BYTES_MAX 64

static size_t least(size_t a, size_t b)
{
	return a < b ? a : b;
}

/* Single-byte insertions, deletions and replacements that turn a into b. */
static size_t edits_between(const char *a, const char *b)
{
	size_t row[WORD_BYTES_MAX + 1], width = strlen(b);

	for (size_t j = 0; j <= width; j++)
		row[j] = j;
	for (size_t i = 1; a[i - 1]; i++) {
		size_t diagonal = row[0];

		row[0] = i;
		for (size_t j = 1; j <= width; j++) {
			size_t replaced = diagonal + (a[i - 1] != b[j - 1]);

			diagonal = row[j];
			row[j] = least(least(row[j], row[j - 1]) + 1, replaced);
		}
	}
	return row[width];
}

const char *suggest_name(const char *wrong, const char *const *names,
			 size_t count)
{
	const char *nearest = NULL;
	size_t fewest = WORD_BYTES_MAX;

	for (size_t i = 0; i < count; i++) {
		size_t length = strlen(names[i]), edits;

		if (length > WORD_BYTES_MAX)
			continue;
		edits = edits_between(wrong, names[i]);
		if (edits < fewest && 3 * edits <= length + 1) {
			fewest = edits;
			nearest = names[i];
		}
	}
	return nearest;
}
