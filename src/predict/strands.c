#include "predict/strands.h"

#include "base/memory.h"

#include <string.h>

/* A repeat is left when so many of its last 16 bases were wrong. */
#define FAILURES_MAX 8

enum status repeats_init(struct repeats *repeats, size_t bytes)
{
	unsigned log2 = 10;

	while (log2 < 22 && ((size_t)1 << log2) < bytes)
		log2++;
	*repeats = (struct repeats){.log2 = log2};
	return memory_new_zeroed((size_t)1 << log2, sizeof(*repeats->table),
				 &repeats->table);
}

void repeats_release(struct repeats *repeats)
{
	memory_free(repeats->table);
	*repeats = (struct repeats){0};
}

void repeats_restart(struct repeats *repeats)
{
	memset(repeats->table, 0, sizeof(*repeats->table) << repeats->log2);
	repeats->repeat[0] = (struct repeat){0};
	repeats->repeat[1] = (struct repeat){.opposite = true};
}

/* Where a context is looked up, and what tells it from others there. */
static uint64_t *entry(const struct repeats *repeats, uint64_t context,
		       uint32_t *check)
{
	context = (context + 1) * UINT64_C(0xd6e8feb86659fd93);
	context ^= context >> 32;
	context *= UINT64_C(0xd6e8feb86659fd93);
	*check = (uint32_t)context;
	return &repeats->table[context >> (64 - repeats->log2)];
}

unsigned repeats_expected(const struct repeats *repeats, unsigned i,
			  const uint8_t *bytes)
{
	const struct repeat *repeat = &repeats->repeat[i];
	unsigned base;

	if (!repeat->going)
		return 4;
	base = base_code(bytes[repeat->at]);
	return repeat->opposite ? 3 - base : base;
}

/* Goes on by one base, or stops. */
static void follow(struct repeat *repeat, bool failed)
{
	repeat->history = (repeat->history << 1 | failed) & 0xffff;
	repeat->length = failed ? 0 : repeat->length + 1;
	if (__builtin_popcount(repeat->history) >= FAILURES_MAX ||
	    (repeat->opposite && repeat->at == 0)) {
		repeat->going = false;
		return;
	}
	repeat->at += repeat->opposite ? (size_t)-1 : 1;
}

/* The context's bases stand before position end. */
static bool stands_there(const uint8_t *bytes, size_t end, uint64_t context)
{
	for (size_t i = 1; i <= REPEAT_ORDER; i++, context >>= 2) {
		if (base_code(bytes[end - i]) != (context & 3))
			return false;
	}
	return true;
}

static void begin(const struct repeats *repeats, struct repeat *repeat,
		  const uint8_t *bytes, uint64_t context)
{
	uint32_t check;
	uint64_t found = *entry(repeats, context, &check);
	size_t end = found >> 32;

	if ((uint32_t)found != check || end < REPEAT_ORDER ||
	    !stands_there(bytes, end, context))
		return;
	if (repeat->opposite && end == REPEAT_ORDER)
		return;
	repeat->at = repeat->opposite ? end - REPEAT_ORDER - 1 : end;
	repeat->length = REPEAT_ORDER;
	repeat->history = 0;
	repeat->going = true;
}

void repeats_push(struct repeats *repeats, const struct strands *strands,
		  const uint8_t *bytes, size_t at)
{
	uint64_t same = strands_context(strands, REPEAT_ORDER);
	uint64_t other = strands_opposite(strands, REPEAT_ORDER);
	unsigned base = (unsigned)same & 3;
	uint32_t check;
	uint64_t *mine;

	for (unsigned i = 0; i < 2; i++) {
		if (repeats->repeat[i].going)
			follow(&repeats->repeat[i],
			       repeats_expected(repeats, i, bytes) != base);
	}
	if (at < REPEAT_ORDER)
		return;
	if (!repeats->repeat[0].going)
		begin(repeats, &repeats->repeat[0], bytes, same);
	mine = entry(repeats, same, &check);
	*mine = (uint64_t)(uint32_t)at << 32 | check;
	if (!repeats->repeat[1].going)
		begin(repeats, &repeats->repeat[1], bytes, other);
}

unsigned repeats_step(const struct repeats *repeats, unsigned i)
{
	const struct repeat *repeat = &repeats->repeat[i];
	unsigned failures = (unsigned)__builtin_popcount(repeat->history);
	unsigned length = repeat->length;

	if (!repeat->going)
		return 0;
	length = length < 4    ? 0
		 : length < 8  ? 1
		 : length < 16 ? 2
		 : length < 21 ? 3
		 : length < 24 ? 4
		 : length < 32 ? 5
			       : 6;
	if (failures == 0)
		return 1 + length;
	failures = failures > 4 ? 4 : failures;
	return 8 + (failures - 1) * 6 + (length > 5 ? 5 : length);
}

void repeats_warm(const struct repeats *repeats, const struct strands *strands)
{
	uint32_t check;

	__builtin_prefetch(
		entry(repeats, strands_context(strands, REPEAT_ORDER), &check),
		1);
	__builtin_prefetch(entry(
		repeats, strands_opposite(strands, REPEAT_ORDER), &check));
}

bool bases_only(const uint8_t *bytes, size_t count)
{
	for (size_t i = 0; i < count; i++) {
		if (bytes[i] != 'A' && bytes[i] != 'C' && bytes[i] != 'G' &&
		    bytes[i] != 'T')
			return false;
	}
	return true;
}
