#include "symbols/rank.h"

#include <string.h>

#define DIGIT_BITS 8
#define DIGIT_COUNT (1u << DIGIT_BITS)
#define UPPER_COUNT 65536u

enum status codes_new(struct sequence *sequence, size_t n, size_t code_count)
{
	unsigned width = 1;
	uint8_t *codes;

	if (code_count > UINT32_MAX)
		return STATUS_NO_MEMORY;
	while (width < 4 && code_count > (size_t)1 << (8 * width))
		width++;
	TRY(memory_new(n, width, &codes));
	sequence->owned[1] = codes;
	sequence->codes = codes;
	sequence->code_width = width;
	sequence->code_count = (uint32_t)code_count;
	sequence->distinct = (uint32_t)code_count;
	sequence->n = n;
	return STATUS_OK;
}

void code_put(struct sequence *sequence, size_t i, uint32_t code)
{
	unsigned width = sequence->code_width;
	uint8_t *at = sequence->owned[1] + i * width;

	while (width--) {
		at[width] = (uint8_t)code;
		code >>= 8;
	}
}

enum status rank_table_init(struct rank_table *table, uint32_t range)
{
	TRY(memory_new_zeroed(range, sizeof(*table->rank), &table->rank));
	table->range = range;
	return STATUS_OK;
}

uint32_t rank_table_number(struct rank_table *table)
{
	uint32_t count = 0;

	for (uint32_t value = 0; value < table->range; value++) {
		if (table->rank[value])
			table->rank[value] = count++;
	}
	return count;
}

void rank_table_release(struct rank_table *table)
{
	memory_free(table->rank);
	*table = (struct rank_table){0};
}

/* One stable pass of a radix sort over the digit that begins at shift. */
static void sort_digit(const uint32_t *from, uint32_t *to, size_t n,
		       unsigned shift)
{
	size_t place[DIGIT_COUNT] = {0}, total = 0;

	for (size_t i = 0; i < n; i++)
		place[from[i] >> shift & (DIGIT_COUNT - 1)]++;
	for (unsigned digit = 0; digit < DIGIT_COUNT; digit++) {
		size_t count = place[digit];

		place[digit] = total;
		total += count;
	}
	for (size_t i = 0; i < n; i++)
		to[place[from[i] >> shift & (DIGIT_COUNT - 1)]++] = from[i];
}

static MUST_USE enum status sort_values(uint32_t *values, size_t n)
{
	uint32_t *spare;

	TRY(memory_new(n, sizeof(*spare), &spare));
	/* An even number of passes brings the order back into values. */
	for (unsigned shift = 0; shift < 32; shift += 2 * DIGIT_BITS) {
		sort_digit(values, spare, n, shift);
		sort_digit(spare, values, n, shift + DIGIT_BITS);
	}
	memory_free(spare);
	return STATUS_OK;
}

static void index_upper(struct rank_list *list)
{
	size_t place = 0;

	for (uint32_t upper = 0; upper <= UPPER_COUNT; upper++) {
		while (place < list->count && list->values[place] >> 16 < upper)
			place++;
		list->first[upper] = (uint32_t)place;
	}
}

enum status rank_list_take(struct rank_list *list, uint32_t *values, size_t n)
{
	size_t count = 0;

	*list = (struct rank_list){.values = values};
	TRY(memory_new(UPPER_COUNT + 1, sizeof(*list->first), &list->first));
	TRY(sort_values(values, n));
	for (size_t i = 0; i < n; i++) {
		if (!count || values[count - 1] != values[i])
			values[count++] = values[i];
	}
	if (count > UINT32_MAX)
		return STATUS_NO_MEMORY;
	list->count = count;
	index_upper(list);
	return STATUS_OK;
}

uint32_t rank_list_find(const struct rank_list *list, uint32_t value)
{
	uint32_t low = list->first[value >> 16];
	uint32_t high = list->first[(value >> 16) + 1];

	while (low < high) {
		uint32_t middle = low + (high - low) / 2;

		if (list->values[middle] < value)
			low = middle + 1;
		else
			high = middle;
	}
	return low;
}

void rank_list_release(struct rank_list *list)
{
	memory_free(list->values);
	memory_free(list->first);
	*list = (struct rank_list){0};
}
