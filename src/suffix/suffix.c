#include "suffix/suffix.h"

#include <assert.h>
#include <divsufsort.h>
#include <string.h>

/* Bytes read beyond the text by the last comparison of eight at a time. */
#define PADDING 8
/* How far ahead to ask for text: enough to hide a cache miss, measured. */
#define AHEAD 32

#if __BYTE_ORDER__ == __ORDER_LITTLE_ENDIAN__
#define FIRST_DIFFERENT_BYTE(x) ((unsigned)__builtin_ctzll(x) / 8)
#else
#define FIRST_DIFFERENT_BYTE(x) ((unsigned)__builtin_clzll(x) / 8)
#endif

static uint64_t load_eight(const uint8_t *bytes)
{
	uint64_t value;

	memcpy(&value, bytes, sizeof(value));
	return value;
}

/* Equal bytes at a and b, at least limit when all of the first limit are. */
static unsigned equal_bytes(const uint8_t *a, const uint8_t *b, unsigned limit)
{
	for (unsigned i = 0; i < limit; i += 8) {
		uint64_t differ = load_eight(a + i) ^ load_eight(b + i);

		if (differ)
			return i + FIRST_DIFFERENT_BYTE(differ);
	}
	return limit;
}

static MUST_USE enum status
make_text(struct suffix *suffix, const struct sequence *sequence, size_t bytes)
{
	size_t period = sequence->n * sequence->code_width;

	TRY(memory_new(bytes + PADDING, 1, &suffix->text));
	memcpy(suffix->text, sequence->codes, period);
	for (size_t i = period; i < bytes; i++)
		suffix->text[i] = suffix->text[i - period];
	memset(suffix->text + bytes, 0, PADDING);
	return STATUS_OK;
}

/* Keeps the suffixes that start at a symbol below n. */
static void keep_aligned(struct suffix *suffix, size_t bytes)
{
	uint32_t width = suffix->width, end = (uint32_t)suffix->n * width;
	size_t kept = 0;

	for (size_t r = 0; r < bytes; r++) {
		uint32_t byte = (uint32_t)suffix->start[r];

		if (byte < end && byte % width == 0)
			suffix->start[kept++] = (int32_t)(byte / width);
	}
	assert(kept == suffix->n);
}

/* The same without divisions, for symbols of one byte. */
static void keep_below_n(struct suffix *suffix, size_t bytes)
{
	int32_t end = (int32_t)suffix->n;
	size_t kept = 0;

	for (size_t r = 0; r < bytes; r++) {
		int32_t start = suffix->start[r];

		suffix->start[kept] = start;
		kept += start < end;
		if (kept == suffix->n)
			break;
	}
}

static MUST_USE enum status sort(struct suffix *suffix, size_t bytes)
{
	TRY(memory_new(bytes, sizeof(*suffix->start), &suffix->start));
	if (divsufsort(suffix->text, suffix->start, (saidx_t)bytes) != 0)
		return STATUS_NO_MEMORY;
	if (suffix->width == 1)
		keep_below_n(suffix, bytes);
	else
		keep_aligned(suffix, bytes);
	return memory_resize(&suffix->start, suffix->n, sizeof(*suffix->start));
}

static void compare_neighbours(struct suffix *suffix)
{
	size_t n = suffix->n, width = suffix->width;
	unsigned limit = suffix->wrap * suffix->width;
	const uint8_t *before = suffix->text + (size_t)suffix->start[0] * width;

	suffix->common[0] = 0;
	for (size_t r = 1; r < n; r++) {
		size_t ahead = r + AHEAD < n ? r + AHEAD : n - 1;
		const uint8_t *here =
			suffix->text + (size_t)suffix->start[r] * width;
		unsigned equal;

		__builtin_prefetch(suffix->text +
				   (size_t)suffix->start[ahead] * width);
		equal = equal_bytes(before, here, limit);
		if (equal > limit)
			equal = limit;
		suffix->common[r] = (uint8_t)(equal / (unsigned)width);
		before = here;
	}
}

static MUST_USE enum status build(struct suffix *suffix,
				  const struct sequence *sequence, size_t bytes)
{
	TRY(make_text(suffix, sequence, bytes));
	TRY(sort(suffix, bytes));
	TRY(memory_new(suffix->n, 1, &suffix->common));
	compare_neighbours(suffix);
	return STATUS_OK;
}

enum status suffix_init(struct suffix *suffix, const struct sequence *sequence,
			unsigned wrap, struct reason *why)
{
	struct suffix made = {
		.n = sequence->n, .width = sequence->code_width, .wrap = wrap};
	size_t symbols = sequence->n + wrap - 1;
	size_t bytes = symbols * sequence->code_width;

	assert(wrap >= 1 && wrap <= SUFFIX_WRAP_MAX && sequence->n >= 1);
	if (symbols > (size_t)INT32_MAX / sequence->code_width)
		return reason_give(
			why, STATUS_NO_MEMORY,
			"%zu symbols of %u bytes are too many for a suffix "
			"order: it takes at most 2147483647 bytes in all",
			sequence->n, sequence->code_width);
	if (build(&made, sequence, bytes) != STATUS_OK) {
		suffix_release(&made);
		return reason_give(why, STATUS_NO_MEMORY,
				   "out of memory: the suffix order of %zu "
				   "symbols needs about %zu bytes",
				   sequence->n, bytes * 5 + sequence->n);
	}
	*suffix = made;
	return STATUS_OK;
}

void suffix_release(struct suffix *suffix)
{
	memory_free(suffix->text);
	memory_free(suffix->start);
	memory_free(suffix->common);
	*suffix = (struct suffix){0};
}
