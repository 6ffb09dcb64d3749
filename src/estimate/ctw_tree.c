#include "estimate/ctw_tree.h"

#include <assert.h>
#include <string.h>

#define SLOTS_A_LINE 4
#define INVERSES 1024
#define COUNT_MAX ((UINT32_C(1) << 24) - 1)
#define HALF_Q48 (UINT64_C(1) << 47)
/* 2^-40, the least of w and of 1 - w. */
#define LEAST_Q48 (UINT64_C(1) << 8)
#define ONE_Q48 (UINT64_C(1) << 48)
#define TAG_MASK UINT64_C(0xFFFF)

enum status ctw_tree_init(struct ctw_tree *tree, unsigned depth, size_t nodes)
{
	struct ctw_tree made = {.depth = depth, .line_bits = 8};
	size_t slots = (size_t)SLOTS_A_LINE << made.line_bits;

	assert(depth < CTW_NODES_MAX);
	for (; slots < nodes && slots < CTW_SLOTS_MAX; slots *= 2)
		made.line_bits++;
	TRY(memory_new_lines(slots, sizeof(*made.slots), &made.slots));
	for (uint64_t i = 1; i < INVERSES; i++)
		made.inverse[i] = (UINT64_C(1) << 63) / i;
	*tree = made;
	return STATUS_OK;
}

void ctw_tree_release(struct ctw_tree *tree)
{
	memory_free(tree->slots);
	tree->slots = NULL;
}

void ctw_tree_restart(struct ctw_tree *tree)
{
	memset(tree->slots, 0,
	       ((size_t)SLOTS_A_LINE << tree->line_bits) *
		       sizeof(*tree->slots));
	tree->nodes = 0;
}

/* In its line or the one beside it; NULL where both are full of others. */
static struct ctw_slot *find(struct ctw_tree *tree, uint64_t name)
{
	size_t line = (size_t)(name >> (64 - tree->line_bits));
	uint64_t low = name & TAG_MASK, high = name >> 16 & TAG_MASK;

	for (unsigned i = 0; i < 2 * SLOTS_A_LINE; i++) {
		size_t at = (line ^ i / SLOTS_A_LINE) * SLOTS_A_LINE +
			    i % SLOTS_A_LINE;
		struct ctw_slot *slot = &tree->slots[at];

		if (!slot->weight) {
			slot->weight = HALF_Q48 << 16 | low;
			slot->counts = high;
			tree->nodes++;
			return slot;
		}
		if ((slot->weight & TAG_MASK) == low &&
		    (slot->counts & TAG_MASK) == high)
			return slot;
	}
	tree->refused++;
	return NULL;
}

static uint32_t zeros_of(const struct ctw_slot *slot)
{
	return (uint32_t)(slot->counts >> 40);
}

static uint32_t ones_of(const struct ctw_slot *slot)
{
	return (uint32_t)(slot->counts >> 16) & COUNT_MAX;
}

/* (ones + 1/2) / (zeros + ones + 1) in Q32. */
static uint32_t estimate(const struct ctw_tree *tree,
			 const struct ctw_slot *slot)
{
	uint64_t ones = ones_of(slot);
	uint64_t total = zeros_of(slot) + ones + 1;
	uint64_t inverse = total < INVERSES ? tree->inverse[total]
					    : (UINT64_C(1) << 63) / total;

	return (uint32_t)((2 * ones + 1) * inverse >> 32);
}

static uint32_t weigh(const struct ctw_slot *slot, uint32_t local,
		      uint32_t deeper)
{
	uint64_t weight_q31 = slot->weight >> (16 + 17);
	uint64_t rest_q31 = (UINT64_C(1) << 31) - weight_q31;

	return (uint32_t)((weight_q31 * local + rest_q31 * deeper) >> 31);
}

uint32_t ctw_tree_predict(struct ctw_tree *tree, const uint64_t *names)
{
	uint32_t deeper = UINT32_C(1) << 31;
	unsigned length = 0;

	while (length <= tree->depth) {
		struct ctw_slot *slot = find(tree, names[length]);

		if (!slot)
			break;
		tree->path[length] = slot;
		tree->local[length] = estimate(tree, slot);
		length++;
	}
	tree->length = length;
	for (unsigned i = length; i-- > 0;) {
		deeper = i + 1 == length
				 ? tree->local[i]
				 : weigh(tree->path[i], tree->local[i], deeper);
		tree->weighed[i] = deeper;
	}
	return deeper;
}

/* w P_e / P_w of the decision made, in Q48. */
static uint64_t renew(uint64_t weight_q48, uint64_t local, uint64_t weighed)
{
	uint64_t part = (uint64_t)((wide_uint)weight_q48 * local >> 16);
	uint64_t next =
		(uint64_t)((wide_uint)part * (UINT64_MAX / weighed) >> 48);

	if (next < LEAST_Q48)
		return LEAST_Q48;
	return next > ONE_Q48 - LEAST_Q48 ? ONE_Q48 - LEAST_Q48 : next;
}

static void count(struct ctw_slot *slot, bool one)
{
	uint64_t zeros = zeros_of(slot), ones = ones_of(slot);

	if ((one ? ones : zeros) == COUNT_MAX) {
		zeros /= 2;
		ones /= 2;
	}
	if (one)
		ones++;
	else
		zeros++;
	slot->counts = zeros << 40 | ones << 16 | (slot->counts & TAG_MASK);
}

void ctw_tree_learn(struct ctw_tree *tree, bool one)
{
	const uint64_t certain = UINT64_C(1) << 32;

	for (unsigned i = 0; i < tree->length; i++) {
		struct ctw_slot *slot = tree->path[i];
		uint64_t local = tree->local[i], weighed = tree->weighed[i];

		if (i + 1 < tree->length && local != weighed) {
			uint64_t weight =
				one ? renew(slot->weight >> 16, local, weighed)
				    : renew(slot->weight >> 16, certain - local,
					    certain - weighed);

			slot->weight = weight << 16 | (slot->weight & TAG_MASK);
		}
		count(slot, one);
	}
}
