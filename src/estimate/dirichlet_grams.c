#include "estimate/dirichlet_grams.h"

#define FIRST_SHIFT 54 /* 1024 slots to begin with */

static size_t slot_count(const struct gram_table *table)
{
	return (size_t)1 << (64 - table->shift);
}

/* Two thirds of the slots at most: a hit then takes two probes on average. */
static size_t slots_used_at_most(const struct gram_table *table)
{
	return slot_count(table) / 3 * 2;
}

static void set_limit(struct gram_table *table)
{
	size_t used = slots_used_at_most(table);

	used = used < table->room ? used : table->room;
	table->limit = UINT32_MAX - table->first < used
			       ? UINT32_MAX
			       : table->first + (uint32_t)used;
}

enum status gram_table_init(struct gram_table *table)
{
	struct gram_table made = {.shift = FIRST_SHIFT, .first = 1, .next = 1};

	made.room = slot_count(&made) / 2;
	TRY(memory_new_zeroed(slot_count(&made), sizeof(*made.slots),
			      &made.slots));
	if (memory_new(made.room, sizeof(*made.grams), &made.grams) !=
	    STATUS_OK) {
		memory_free(made.slots);
		return STATUS_NO_MEMORY;
	}
	set_limit(&made);
	*table = made;
	return STATUS_OK;
}

void gram_table_release(struct gram_table *table)
{
	memory_free(table->grams);
	memory_free(table->slots);
	*table = (struct gram_table){0};
}

void gram_table_restart(struct gram_table *table)
{
	table->first = table->next;
	set_limit(table);
}

void gram_table_renew(struct gram_table *table)
{
	table->first = table->next = 1;
	set_limit(table);
	memset(table->slots, 0, slot_count(table) * sizeof(*table->slots));
}

static void fill_slots(struct gram_table *table)
{
	size_t mask = slot_count(table) - 1;

	for (uint32_t number = table->first; number < table->next; number++) {
		const struct gram *gram = &table->grams[number - table->first];
		size_t at = gram_slot(table, gram->shorter, gram->symbol);

		while (table->slots[at])
			at = (at + 1) & mask;
		table->slots[at] = number;
	}
}

static MUST_USE enum status double_slots(struct gram_table *table)
{
	uint32_t *slots;

	TRY(memory_new_zeroed(slot_count(table), 2 * sizeof(*slots), &slots));
	memory_free(table->slots);
	table->slots = slots;
	table->shift--;
	fill_slots(table);
	return STATUS_OK;
}

enum status gram_table_grow(struct gram_table *table)
{
	size_t used = table->next - table->first;

	if (used >= slots_used_at_most(table))
		TRY(double_slots(table));
	if (used >= table->room) {
		TRY(memory_resize(&table->grams, table->room + table->room / 2,
				  sizeof(*table->grams)));
		table->room += table->room / 2;
	}
	set_limit(table);
	return STATUS_OK;
}
