/* Symbols that are fixed-width unsigned numbers of several bytes. */
#include "symbols/mapping.h"
#include "symbols/rank.h"

static uint32_t get_u16le(const uint8_t *at)
{
	return (uint32_t)at[0] | (uint32_t)at[1] << 8;
}

static uint32_t get_u16be(const uint8_t *at)
{
	return (uint32_t)at[1] | (uint32_t)at[0] << 8;
}

static uint32_t get_u32le(const uint8_t *at)
{
	return get_u16le(at) | get_u16le(at + 2) << 16;
}

static enum status map_u16(struct sequence *sequence, struct slice bytes,
			   uint32_t (*get)(const uint8_t *at))
{
	size_t n = bytes.length / 2;
	struct rank_table table;
	enum status status;

	TRY(rank_table_init(&table, 65536));
	for (size_t i = 0; i < n; i++)
		table.rank[get(bytes.bytes + 2 * i)] = 1;
	status = codes_new(sequence, n, rank_table_number(&table));
	for (size_t i = 0; status == STATUS_OK && i < n; i++)
		code_put(sequence, i, table.rank[get(bytes.bytes + 2 * i)]);
	rank_table_release(&table);
	sequence->canonical = bytes.bytes;
	sequence->canonical_bytes = bytes.length;
	return status;
}

enum status map_u16le(struct sequence *sequence, struct slice bytes,
		      struct reason *why)
{
	(void)why;
	return map_u16(sequence, bytes, get_u16le);
}

enum status map_u16be(struct sequence *sequence, struct slice bytes,
		      struct reason *why)
{
	(void)why;
	return map_u16(sequence, bytes, get_u16be);
}

enum status map_u32le(struct sequence *sequence, struct slice bytes,
		      struct reason *why)
{
	size_t n = bytes.length / 4;
	struct rank_list list;
	uint32_t *values;
	enum status status;

	(void)why;
	TRY(memory_new(n, sizeof(*values), &values));
	for (size_t i = 0; i < n; i++)
		values[i] = get_u32le(bytes.bytes + 4 * i);
	status = rank_list_take(&list, values, n);
	if (status == STATUS_OK)
		status = codes_new(sequence, n, list.count);
	for (size_t i = 0; status == STATUS_OK && i < n; i++) {
		uint32_t value = get_u32le(bytes.bytes + 4 * i);

		code_put(sequence, i, rank_list_find(&list, value));
	}
	rank_list_release(&list);
	sequence->canonical = bytes.bytes;
	sequence->canonical_bytes = bytes.length;
	return status;
}
