#include "estimate/dirichlet_grams.h"

#include "estimate/code_at.h"
#include "estimate/pages.h"

#include <assert.h>
#include <string.h>

#define SLOTS_FIRST 1024
/* Symbols between asking for a slot and using it: hides a cache miss. */
#define AHEAD 12

enum status gram_chain_init(struct gram_chain *chain,
			    const struct sequence *sequence, size_t page_bytes,
			    size_t slot_limit)
{
	struct gram_chain made = {.sequence = sequence,
				  .page_bytes = page_bytes,
				  .slot_count = SLOTS_FIRST,
				  .slot_limit = slot_limit};
	size_t n = sequence->n;

	assert(n <= UINT32_MAX);
	if (memory_new(n, sizeof(*made.id), &made.id) != STATUS_OK ||
	    memory_new_zeroed(n, sizeof(*made.context), &made.context) !=
		    STATUS_OK ||
	    memory_new_zeroed(n, sizeof(*made.times), &made.times) !=
		    STATUS_OK ||
	    memory_new(SLOTS_FIRST, sizeof(*made.slots), &made.slots) !=
		    STATUS_OK) {
		gram_chain_release(&made);
		return STATUS_NO_MEMORY;
	}
	*chain = made;
	return STATUS_OK;
}

void gram_chain_release(struct gram_chain *chain)
{
	memory_free(chain->id);
	memory_free(chain->context);
	memory_free(chain->times);
	memory_free(chain->slots);
	*chain = (struct gram_chain){0};
}

/* 2^64 over the golden ratio: multiplicative hashing (Knuth, volume 3). */
static size_t slot_of(uint64_t key, size_t slot_count)
{
	uint64_t mixed = (key ^ key >> 29) * UINT64_C(0x9E3779B97F4A7C15);

	return (size_t)(mixed >> 32) & (slot_count - 1);
}

static struct gram_slot *find(struct gram_slot *slots, size_t slot_count,
			      uint64_t key)
{
	size_t at = slot_of(key, slot_count);

	while (slots[at].id && slots[at].key != key)
		at = (at + 1) & (slot_count - 1);
	return &slots[at];
}

static MUST_USE enum status grow(struct gram_chain *chain)
{
	size_t slot_count = chain->slot_count * 2;
	struct gram_slot *slots;

	TRY(memory_new_zeroed(slot_count, sizeof(*slots), &slots));
	for (size_t i = 0; i < chain->slot_count; i++) {
		const struct gram_slot *slot = &chain->slots[i];

		if (slot->id)
			*find(slots, slot_count, slot->key) = *slot;
	}
	memory_free(chain->slots);
	chain->slots = slots;
	chain->slot_count = slot_count;
	return STATUS_OK;
}

static MUST_USE enum status make_room(struct gram_chain *chain, bool *full)
{
	if (chain->used < chain->slot_count / 4 * 3)
		return STATUS_OK;
	if (chain->length && chain->slot_count >= chain->slot_limit) {
		*full = true;
		return STATUS_OK;
	}
	return grow(chain);
}

static uint64_t key_of(const struct gram_chain *chain, uint32_t shorter,
		       size_t t)
{
	const struct sequence *sequence = chain->sequence;

	return (uint64_t)shorter << 32 |
	       code_at(sequence->codes, sequence->code_width, t);
}

/* Where the gram that ends at t is to be found or put. */
static const struct gram_slot *home_of(const struct gram_chain *chain, size_t t)
{
	uint32_t shorter = chain->length ? chain->id[t - 1] : 0;
	uint64_t key = key_of(chain, shorter, t);

	return &chain->slots[slot_of(key, chain->slot_count)];
}

/* The gram that ends at t is seen once more. */
static MUST_USE enum status see(struct gram_chain *chain, uint32_t shorter,
				size_t t, bool *full)
{
	uint64_t key = key_of(chain, shorter, t);
	struct gram_slot *slot;

	TRY(make_room(chain, full));
	slot = find(chain->slots, chain->slot_count, key);
	if (!slot->id) {
		slot->key = key;
		slot->id = (uint32_t)++chain->used;
		slot->times = 0;
	}
	chain->id[t] = slot->id;
	chain->times[t] = slot->times++;
	return STATUS_OK;
}

/* One page; ids and times of grams of chain->length become those one longer. */
static MUST_USE enum status run_page(struct gram_chain *chain, size_t begin,
				     size_t end, bool *full)
{
	uint32_t shorter = 0, seen = 0;

	memset(chain->slots, 0, chain->slot_count * sizeof(*chain->slots));
	chain->used = 0;
	for (size_t t = begin; t < end && !*full; t++) {
		uint32_t id = chain->id[t], times = chain->times[t];

		if (chain->length == 0)
			seen = (uint32_t)(t - begin);
		chain->context[t] = seen;
		if (t - begin >= chain->length) {
			if (t + AHEAD < end)
				__builtin_prefetch(home_of(chain, t + AHEAD));
			TRY(see(chain, shorter, t, full));
		}
		shorter = chain->length ? id : 0;
		seen = times;
	}
	return STATUS_OK;
}

enum status gram_chain_lengthen(struct gram_chain *chain, bool *full)
{
	size_t end;

	*full = false;
	for (size_t begin = 0; begin < chain->sequence->n && !*full;
	     begin = end) {
		end = page_end(chain->sequence, chain->page_bytes, begin);
		TRY(run_page(chain, begin, end, full));
	}
	chain->length++;
	return STATUS_OK;
}
