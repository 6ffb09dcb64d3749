#include "codec/xz_parts.h"

static enum status unreadable(lzma_ret code)
{
	return code == LZMA_MEM_ERROR ? STATUS_NO_MEMORY : STATUS_BAD_INPUT;
}

/*
 * The .xz file format: stream header and footer, index, and for each block its
 * header, padding and check. All but the compressed data is container.
 */
static MUST_USE enum status payload_of(const lzma_index *index,
				       struct slice stream,
				       const lzma_allocator *allocator,
				       uint64_t *payload)
{
	lzma_index_iter at;
	lzma_stream_flags flags;
	lzma_ret code;

	if (lzma_stream_header_decode(&flags, stream.bytes) != LZMA_OK)
		return STATUS_BAD_INPUT;
	*payload = 0;
	lzma_index_iter_init(&at, index);
	while (!lzma_index_iter_next(&at, LZMA_INDEX_ITER_BLOCK)) {
		const uint8_t *bytes =
			stream.bytes + at.block.compressed_file_offset;
		lzma_filter filters[LZMA_FILTERS_MAX + 1];
		lzma_block block = {.check = flags.check, .filters = filters};

		uint32_t around;

		block.header_size = lzma_block_header_size_decode(bytes[0]);
		around = block.header_size + lzma_check_size(flags.check);
		/* A damaged size must not lead past the block. */
		if (!bytes[0] || around > at.block.unpadded_size)
			return STATUS_BAD_INPUT;
		code = lzma_block_header_decode(&block, allocator, bytes);
		if (code != LZMA_OK)
			return unreadable(code);
		lzma_filters_free(filters, allocator);
		*payload += at.block.unpadded_size - around;
	}
	return STATUS_OK;
}

enum status xz_framing(const struct codec_setting *setting, struct slice stream,
		       uint64_t *bytes)
{
	struct codec_memory unseen = {0, 0};
	lzma_allocator allocator = xz_allocator(&unseen);
	lzma_stream_flags footer;
	lzma_index *index = NULL;
	uint64_t limit = UINT64_MAX, payload;
	size_t position = 0, end = stream.length;
	lzma_ret code;
	enum status status;

	/* Raw LZMA2 is chunks up to a zero byte, with nothing around them. */
	if (xz_is_raw(setting)) {
		if (!end || stream.bytes[end - 1])
			return STATUS_BAD_INPUT;
		*bytes = 0;
		return STATUS_OK;
	}
	if (end < 2 * LZMA_STREAM_HEADER_SIZE ||
	    lzma_stream_footer_decode(
		    &footer, stream.bytes + end - LZMA_STREAM_HEADER_SIZE) !=
		    LZMA_OK ||
	    footer.backward_size > end - 2 * LZMA_STREAM_HEADER_SIZE)
		return STATUS_BAD_INPUT;
	end -= LZMA_STREAM_HEADER_SIZE;
	position = end - footer.backward_size;
	code = lzma_index_buffer_decode(&index, &limit, &allocator,
					stream.bytes, &position, end);
	if (code != LZMA_OK)
		return unreadable(code);
	status = lzma_index_file_size(index) == stream.length
			 ? payload_of(index, stream, &allocator, &payload)
			 : STATUS_BAD_INPUT;
	lzma_index_end(index, &allocator);
	if (status == STATUS_OK)
		*bytes = stream.length - payload;
	return status;
}
