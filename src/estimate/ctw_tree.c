#include "estimate/ctw_tree.h"

#include <assert.h>
#include <string.h>

#define SLOTS_A_LINE 4
/* A node lies in its line or, where that is full, in one of 7 beside it. */
#define LINES_TRIED 8
#define LINES_TRIED_BITS 3
/* 11: so that the last three bits of a line are always in the tag. */
#define LINE_BITS_MIN 11
#define INVERSES 1024
#define COUNT_MAX ((UINT32_C(1) << 24) - 1)
#define HALF_Q48 (UINT64_C(1) << 47)
/* 2^-40, the least of w and of 1 - w. */
#define LEAST_Q48 (UINT64_C(1) << 8)
#define ONE_Q48 (UINT64_C(1) << 48)
#define TAG_MASK UINT64_C(0xFFFF)

static size_t slots_of(unsigned line_bits)
{
	return (size_t)SLOTS_A_LINE << line_bits;
}

enum status ctw_tree_init(struct ctw_tree *tree, unsigned depth,
			  size_t slots_max)
{
	struct ctw_tree made = {.depth = depth,
				.line_bits = LINE_BITS_MIN,
				.line_bits_max = LINE_BITS_MIN};

	assert(depth < CTW_NODES_MAX);
	while (slots_of(made.line_bits_max) < slots_max &&
	       slots_of(made.line_bits_max) < CTW_SLOTS_MAX)
		made.line_bits_max++;
	TRY(memory_new_lines(slots_of(made.line_bits), sizeof(*made.slots),
			     &made.slots));
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
	       slots_of(tree->line_bits) * sizeof(*tree->slots));
	tree->nodes = 0;
}

/* The slot of this name or the first free one; NULL where there is neither. */
static struct ctw_slot *look(const struct ctw_tree *tree, uint64_t name)
{
	size_t line = (size_t)(name >> (64 - tree->line_bits));
	uint64_t low = name >> 24 & TAG_MASK, high = name >> 40 & TAG_MASK;

	for (unsigned i = 0; i < LINES_TRIED * SLOTS_A_LINE; i++) {
		size_t at = (line ^ i / SLOTS_A_LINE) * SLOTS_A_LINE +
			    i % SLOTS_A_LINE;
		struct ctw_slot *slot = &tree->slots[at];

		if (!slot->weight || ((slot->weight & TAG_MASK) == low &&
				      (slot->counts & TAG_MASK) == high))
			return slot;
	}
	return NULL;
}

static struct ctw_slot *find(struct ctw_tree *tree, uint64_t name)
{
	struct ctw_slot *slot = look(tree, name);

	if (!slot) {
		tree->refused++;
	} else if (!slot->weight) {
		slot->weight = HALF_Q48 << 16 | (name >> 24 & TAG_MASK);
		slot->counts = name >> 40 & TAG_MASK;
		tree->nodes++;
	}
	return slot;
}

/*
 * The upper 40 bits of a name. The line gives all its bits but the last three,
 * since the slot may lie in a line beside; those are in the tag.
 */
static uint64_t name_of(const struct ctw_tree *tree, size_t slot)
{
	const uint64_t tag_bits = (UINT64_C(1) << 32) - 1;
	const struct ctw_slot *at = &tree->slots[slot];
	uint64_t tag = (at->counts & TAG_MASK) << 16 | (at->weight & TAG_MASK);
	uint64_t line = slot / SLOTS_A_LINE >> LINES_TRIED_BITS;

	return (line << (64 + LINES_TRIED_BITS - tree->line_bits) &
		~(tag_bits << 24)) |
	       tag << 24;
}

/* Twice as many lines; a node that finds no place there is dropped. */
static void grow(struct ctw_tree *tree)
{
	struct ctw_tree larger = *tree;
	size_t slots = slots_of(tree->line_bits);

	larger.line_bits++;
	if (memory_new_lines(2 * slots, sizeof(*larger.slots), &larger.slots) !=
	    STATUS_OK) {
		tree->exhausted = true;
		return;
	}
	for (size_t i = 0; i < slots; i++) {
		struct ctw_slot *slot;

		if (!tree->slots[i].weight)
			continue;
		slot = look(&larger, name_of(tree, i));
		if (slot)
			*slot = tree->slots[i];
		else
			larger.nodes--;
	}
	memory_free(tree->slots);
	*tree = larger;
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

	if (tree->nodes > slots_of(tree->line_bits) / 8 * 3 &&
	    tree->line_bits < tree->line_bits_max && !tree->exhausted)
		grow(tree);
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
