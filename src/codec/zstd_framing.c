#include "codec/zstd_parts.h"

static uint32_t little_endian(const uint8_t *bytes, unsigned count)
{
	uint32_t value = 0;

	for (unsigned i = count; i > 0; i--)
		value = value << 8 | bytes[i - 1];
	return value;
}

/* RFC 8878, section 3.1.1.2: blocks up to the one that is marked last. */
static bool skip_blocks(struct slice stream, size_t *at)
{
	uint32_t header;

	do {
		uint32_t type, length;

		if (stream.length - *at < 3)
			return false;
		header = little_endian(stream.bytes + *at, 3);
		*at += 3;
		type = header >> 1 & 3;
		/* A run is one byte however long; type 3 is reserved. */
		length = type == 1 ? 1 : header >> 3;
		if (type == 3 || stream.length - *at < length)
			return false;
		*at += length;
	} while (!(header & 1));
	return true;
}

/* RFC 8878, section 3.1.2: magic, size, content. */
static bool skip_skippable(struct slice stream, size_t *at, uint64_t *framing)
{
	size_t left = stream.length - *at;
	uint32_t length = little_endian(stream.bytes + *at + 4, 4);

	if (left - 8 < length)
		return false;
	*at += 8 + (size_t)length;
	*framing += 8 + (uint64_t)length;
	return true;
}

/*
 * RFC 8878, section 3.1.1.1: descriptor, window unless it is one segment,
 * dictionary, content size; 0 where it is no frame header.
 */
static size_t header_bytes(const uint8_t *bytes, size_t left)
{
	static const uint8_t dictionary[] = {0, 1, 2, 4};
	static const uint8_t content[] = {0, 2, 4, 8};
	unsigned descriptor, single, size;

	if (!left)
		return 0;
	descriptor = bytes[0];
	single = descriptor >> 5 & 1;
	size = content[descriptor >> 6];
	if (single && !size)
		size = 1;
	/* The reserved bit must be zero (3.1.1.1.1.4). */
	if (descriptor & 0x08)
		return 0;
	return 1U + !single + dictionary[descriptor & 3] + size;
}

/* RFC 8878, section 3.1.1: magic, frame header, checksum where flagged. */
static bool skip_frame(struct slice stream, bool has_magic, size_t *at,
		       uint64_t *framing)
{
	size_t left = stream.length - *at, magic = has_magic ? 4 : 0;
	size_t header, checksum;

	/* No frame is shorter than a skippable one of no content. */
	if (has_magic && left < 8)
		return false;
	if (has_magic) {
		uint32_t number = little_endian(stream.bytes + *at, 4);

		if ((number & ZSTD_MAGIC_SKIPPABLE_MASK) ==
		    ZSTD_MAGIC_SKIPPABLE_START)
			return skip_skippable(stream, at, framing);
		if (number != ZSTD_MAGICNUMBER)
			return false;
	}
	header = header_bytes(stream.bytes + *at + magic, left - magic);
	if (!header || magic + header > left)
		return false;
	checksum = stream.bytes[*at + magic] & 0x04 ? 4 : 0;
	*at += magic + header;
	if (!skip_blocks(stream, at) || stream.length - *at < checksum)
		return false;
	*at += checksum;
	*framing += magic + header + checksum;
	return true;
}

enum status zstd_framing(const struct codec_setting *setting,
			 struct slice stream, uint64_t *bytes)
{
	uint64_t framing = 0;
	size_t at = 0;

	do {
		if (!skip_frame(stream, zstd_has_magic(setting), &at, &framing))
			return STATUS_BAD_INPUT;
	} while (at < stream.length);
	*bytes = framing;
	return STATUS_OK;
}
