/* Symbols that are one canonical byte, or one bit of it. */
#include "symbols/mapping.h"
#include "symbols/rank.h"

void map_as_bytes(struct sequence *sequence, const uint8_t *bytes, size_t n)
{
	uint8_t seen[256] = {0};

	for (size_t i = 0; i < n; i++)
		seen[bytes[i]] = 1;
	sequence->distinct = 0;
	for (unsigned value = 0; value < 256; value++)
		sequence->distinct += seen[value];
	sequence->canonical = bytes;
	sequence->canonical_bytes = n;
	sequence->codes = bytes;
	sequence->code_width = 1;
	sequence->code_count = 256;
	sequence->n = n;
}

enum status map_byte(struct sequence *sequence, struct slice bytes,
		     struct reason *why)
{
	(void)why;
	map_as_bytes(sequence, bytes.bytes, bytes.length);
	return STATUS_OK;
}

enum status map_bit(struct sequence *sequence, struct slice bytes,
		    struct reason *why)
{
	uint8_t either = 0, both = 0xFF;

	if (bytes.length > SIZE_MAX / 8)
		return reason_give(why, STATUS_NO_MEMORY,
				   "out of memory: %zu bytes are too many bits",
				   bytes.length);
	TRY(codes_new(sequence, bytes.length * 8, 2));
	for (size_t i = 0; i < bytes.length; i++) {
		uint8_t byte = bytes.bytes[i];

		either |= byte;
		both &= byte;
		for (unsigned bit = 0; bit < 8; bit++)
			sequence->owned[1][8 * i + bit] = byte >> (7 - bit) & 1;
	}
	sequence->distinct = either && both != 0xFF ? 2 : 1;
	sequence->canonical = bytes.bytes;
	sequence->canonical_bytes = bytes.length;
	return STATUS_OK;
}

enum status map_nucleotide(struct sequence *sequence, struct slice bytes,
			   struct reason *why)
{
	for (size_t i = 0; i < bytes.length; i++) {
		uint8_t byte = bytes.bytes[i];

		if (byte == 'A' || byte == 'C' || byte == 'G' || byte == 'T')
			continue;
		return reason_give(why, STATUS_BAD_INPUT,
				   "byte %zu (line %zu) is 0x%02X, not a base: "
				   "nucleotide takes A C G T in upper case, no "
				   "line breaks",
				   i, line_of(bytes, i), byte);
	}
	map_as_bytes(sequence, bytes.bytes, bytes.length);
	return STATUS_OK;
}
