/* Code points of UTF-8, as strict as RFC 3629. */
#include "symbols/mapping.h"
#include "symbols/rank.h"

#define CODE_POINTS 0x110000

/* Why a sequence is not UTF-8; NULL where it is. */
static const char *fault_of(uint32_t point, unsigned length)
{
	static const uint32_t least[5] = {0, 0, 0x80, 0x800, 0x10000};

	if (point < least[length])
		return "a longer form than the code point needs";
	if (point >= 0xD800 && point <= 0xDFFF)
		return "a surrogate";
	if (point >= CODE_POINTS)
		return "beyond U+10FFFF";
	return NULL;
}

static unsigned length_of(uint8_t lead)
{
	if (lead < 0x80)
		return 1;
	if (lead < 0xC0)
		return 0;
	if (lead < 0xE0)
		return 2;
	if (lead < 0xF0)
		return 3;
	return lead < 0xF8 ? 4 : 0;
}

/*
 * Reads the code point at the head of at and returns its bytes, or 0 with
 * *fault saying what is wrong.
 */
static unsigned read_point(struct slice at, uint32_t *point, const char **fault)
{
	uint8_t lead = at.bytes[0];
	unsigned length = length_of(lead);

	if (!length) {
		*fault = lead < 0xC0 ? "a continuation byte without a lead"
				     : "a byte that UTF-8 never uses";
		return 0;
	}
	*point = length == 1 ? lead : lead & (0x7Fu >> length);
	for (unsigned i = 1; i < length; i++) {
		if (i >= at.length || (at.bytes[i] & 0xC0) != 0x80) {
			*fault = "cut short";
			return 0;
		}
		*point = *point << 6 | (at.bytes[i] & 0x3Fu);
	}
	*fault = fault_of(*point, length);
	return *fault ? 0 : length;
}

static struct slice rest_of(struct slice bytes, size_t offset)
{
	return (struct slice){bytes.bytes + offset, bytes.length - offset};
}

/* Marks every code point in the table and counts them. */
static enum status scan(struct slice bytes, struct rank_table *table,
			size_t *count, struct reason *why)
{
	size_t n = 0;

	for (size_t offset = 0; offset < bytes.length; n++) {
		const char *fault;
		uint32_t point = 0;
		unsigned length =
			read_point(rest_of(bytes, offset), &point, &fault);

		if (!length)
			return reason_give(
				why, STATUS_BAD_INPUT,
				"not UTF-8 at byte %zu (line %zu): 0x%02X "
				"begins %s; use the kind byte for other text",
				offset, line_of(bytes, offset),
				bytes.bytes[offset], fault);
		table->rank[point] = 1;
		offset += length;
	}
	*count = n;
	return STATUS_OK;
}

static enum status fill(struct sequence *sequence, struct slice bytes,
			const struct rank_table *table, size_t n)
{
	size_t *starts, offset = 0;

	TRY(memory_new(n + 1, sizeof(*starts), &starts));
	sequence->owned[2] = (uint8_t *)starts;
	sequence->starts = starts;
	for (size_t i = 0; i < n; i++) {
		const char *fault;
		uint32_t point = 0;

		starts[i] = offset;
		offset += read_point(rest_of(bytes, offset), &point, &fault);
		code_put(sequence, i, table->rank[point]);
	}
	starts[n] = bytes.length;
	return STATUS_OK;
}

enum status map_codepoint(struct sequence *sequence, struct slice bytes,
			  struct reason *why)
{
	struct rank_table table;
	enum status status;
	size_t n = 0;

	TRY(rank_table_init(&table, CODE_POINTS));
	status = scan(bytes, &table, &n, why);
	if (status == STATUS_OK)
		status = codes_new(sequence, n, rank_table_number(&table));
	if (status == STATUS_OK)
		status = fill(sequence, bytes, &table, n);
	rank_table_release(&table);
	sequence->canonical = bytes.bytes;
	sequence->canonical_bytes = bytes.length;
	return status;
}
