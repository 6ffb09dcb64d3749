/* Init of the order-2 chain of a text. */
#include "base/memory.h"
#include "source/model_build.h"

#include <stdlib.h>

/* Contexts are numbered in the order of their two bytes. */
#define PAIRS 65536

static int compare(const void *a, const void *b)
{
	const uint32_t *x = a, *y = b;

	return *x < *y ? -1 : *x > *y;
}

/* Every cyclic run of three bytes, first byte highest, sorted. */
static void grams_sort(const uint8_t *bytes, size_t length, uint32_t *grams)
{
	for (size_t i = 0; i < length; i++)
		grams[i] = (uint32_t)bytes[i] << 16 |
			   (uint32_t)bytes[(i + 1) % length] << 8 |
			   bytes[(i + 2) % length];
	qsort(grams, length, sizeof(*grams), compare);
}

/* Numbers the pairs that begin a gram; returns how many. */
static uint32_t pairs_number(const uint32_t *grams, size_t length,
			     uint32_t *number, size_t *distinct)
{
	uint32_t pairs = 0;

	*distinct = 0;
	for (size_t i = 0; i < length; i++) {
		if (i && grams[i] == grams[i - 1])
			continue;
		(*distinct)++;
		if (!i || grams[i] >> 8 != grams[i - 1] >> 8)
			number[grams[i] >> 8] = pairs++;
	}
	return pairs;
}

static enum status gram_rows(struct source_model *model, const uint32_t *grams,
			     size_t length, const uint32_t *number)
{
	static const uint32_t stay = 1;

	TRY(model_moves(model, &stay));
	for (size_t i = 0, end; i < length; i = end) {
		uint32_t row = number[grams[i] >> 8];

		for (end = i; end < length && grams[end] == grams[i]; end++)
			;
		if (!i || row != number[grams[i - 1] >> 8])
			model_row_open(model, row);
		TRY(model_edge_add(model, row, (uint8_t)grams[i],
				   (uint32_t)(end - i),
				   number[grams[i] & 0xffff]));
	}
	return STATUS_OK;
}

static enum status trained(struct source_model *model, const uint8_t *bytes,
			   size_t length, uint32_t *grams, struct reason *why)
{
	uint32_t *number = grams + length;
	size_t distinct;
	uint32_t pairs;

	grams_sort(bytes, length, grams);
	pairs = pairs_number(grams, length, number, &distinct);
	TRY(model_begin(model, 1, pairs, 256, distinct, why));
	return model_close(model, gram_rows(model, grams, length, number), why);
}

enum status source_model_init_trained(struct source_model *model,
				      const uint8_t *bytes, size_t length,
				      struct reason *why)
{
	enum status status;
	uint32_t *grams;

	*model = (struct source_model){0};
	if (length < 3)
		return reason_give(why, STATUS_TOO_SHORT,
				   "a chain of order 2 is trained on 3 bytes "
				   "or more, not %zu",
				   length);
	if (length >= UINT32_MAX)
		return reason_give(why, STATUS_BAD_INPUT,
				   "a chain is trained on less than 4 GiB");
	if (memory_new(length + PAIRS, sizeof(*grams), &grams))
		return reason_give(why, STATUS_NO_MEMORY,
				   "no memory to train on %zu bytes", length);
	status = trained(model, bytes, length, grams, why);
	memory_free(grams);
	return status;
}
