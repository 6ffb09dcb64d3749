#include "support/plugin.h"

#include <math.h>
#include <stdlib.h>

void codes_add(struct codes *codes, uint64_t value)
{
	if (codes->count == codes->room) {
		codes->room = codes->room ? 2 * codes->room : 1024;
		codes->values = realloc(codes->values,
					codes->room * sizeof(*codes->values));
		if (!codes->values)
			abort();
	}
	codes->values[codes->count++] = value;
}

void codes_release(struct codes *codes)
{
	free(codes->values);
	*codes = (struct codes){0};
}

static int compare(const void *a, const void *b)
{
	const uint64_t *x = a, *y = b;

	return *x < *y ? -1 : *x > *y;
}

double codes_entropy(struct codes *codes)
{
	double n = (double)codes->count, bits = 0;
	size_t distinct = 0;

	qsort(codes->values, codes->count, sizeof(*codes->values), compare);
	for (size_t i = 0, j; i < codes->count; i = j) {
		for (j = i; j < codes->count; j++) {
			if (codes->values[j] != codes->values[i])
				break;
		}
		bits -= (double)(j - i) / n * log2((double)(j - i) / n);
		distinct++;
	}
	return bits + (double)(distinct - 1) / (2 * n * log(2));
}

uint64_t codes_text(const char *text)
{
	uint64_t hash = UINT64_C(14695981039346656037);

	for (; *text; text++)
		hash = (hash ^ (uint8_t)*text) * UINT64_C(1099511628211);
	return hash;
}
