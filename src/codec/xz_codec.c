#include "codec/codec_rows.h"

#include <lzma.h>
#include <stdio.h>
#include <string.h>

#define ROOM_BYTES ((size_t)1 << 16)

static const char *xz_version(void)
{
	return lzma_version_string();
}

static MUST_USE enum status
xz_parse(const char *text, struct codec_setting *setting, struct reason *why)
{
	char digit[2] = {text[0], '\0'};

	if (!text[0] || (text[1] && strcmp(text + 1, "e") != 0))
		return reason_give(why, STATUS_BAD_USAGE,
				   "level '%s' of xz: 0 to 9, each also with "
				   "e, are levels",
				   text);
	TRY(level_number(digit, 0, 9, "xz (each also with e)", setting, why));
	setting->extreme = text[1] == 'e';
	(void)snprintf(setting->text, sizeof(setting->text), "%s", text);
	return STATUS_OK;
}

static void *take(void *memory, size_t items, size_t bytes)
{
	size_t product;

	if (__builtin_mul_overflow(items, bytes, &product))
		return NULL;
	return counted_new(memory, product);
}

static void give_back(void *memory, void *block)
{
	counted_free(memory, block);
}

static MUST_USE enum status failure(lzma_ret code, struct reason *why)
{
	static const struct {
		lzma_ret code;
		const char *words;
	} known[] = {
		{LZMA_FORMAT_ERROR, "not an .xz stream"},
		{LZMA_OPTIONS_ERROR, "options that this library cannot do"},
		{LZMA_DATA_ERROR, "the stream is damaged"},
		{LZMA_BUF_ERROR, "the stream is cut short"},
		{LZMA_UNSUPPORTED_CHECK, "a check that this library lacks"},
		{LZMA_MEMLIMIT_ERROR, "over the memory limit"},
	};

	if (code == LZMA_MEM_ERROR)
		return reason_give(why, STATUS_NO_MEMORY,
				   "liblzma: out of memory");
	for (size_t i = 0; i < sizeof(known) / sizeof(*known); i++) {
		if (known[i].code == code)
			return reason_give(why, STATUS_CODEC, "liblzma: %s",
					   known[i].words);
	}
	return reason_give(why, STATUS_CODEC, "liblzma: error %d", (int)code);
}

/* Runs the coder until action is done: then *code is LZMA_STREAM_END. */
static MUST_USE enum status pump(lzma_stream *stream, lzma_action action,
				 struct buffer *out, lzma_ret *code)
{
	do {
		size_t room, spare = out->limit - out->length;

		TRY(buffer_reserve(out,
				   spare < ROOM_BYTES ? spare : ROOM_BYTES));
		room = out->room - out->length;
		stream->next_out = out->bytes + out->length;
		stream->avail_out = room;
		*code = lzma_code(stream, action);
		out->length += room - stream->avail_out;
		if (*code == LZMA_OK && out->length == out->limit)
			return STATUS_NO_MEMORY;
	} while (*code == LZMA_OK);
	return STATUS_OK;
}

static MUST_USE enum status encode_pieces(lzma_stream *stream,
					  const struct codec_job *job,
					  struct buffer *out,
					  struct reason *why)
{
	size_t pieces = job_pieces(job), start = 0;

	for (size_t i = 0; i < pieces; i++) {
		size_t end = job_piece_end(job, i), before = out->length;
		lzma_ret code;

		stream->next_in = job->input.bytes + start;
		stream->avail_in = end - start;
		if (pump(stream,
			 i + 1 == pieces ? LZMA_FINISH : LZMA_SYNC_FLUSH, out,
			 &code) != STATUS_OK)
			return reason_give(why, STATUS_NO_MEMORY,
					   "out of memory");
		if (code != LZMA_STREAM_END)
			return failure(code, why);
		if (job->piece_bytes)
			job->piece_bytes[i] = out->length - before;
		start = end;
	}
	return STATUS_OK;
}

/*
 * For a page the dictionary need not be larger than the page: presets would
 * clear megabytes of tables for each.
 */
static lzma_ret start_encoder(lzma_stream *stream, uint32_t preset,
			      size_t page_bytes)
{
	lzma_options_lzma options;
	const lzma_filter filters[] = {{LZMA_FILTER_LZMA2, &options},
				       {LZMA_VLI_UNKNOWN, NULL}};

	if (lzma_lzma_preset(&options, preset))
		return LZMA_OPTIONS_ERROR;
	if (page_bytes && page_bytes < options.dict_size)
		options.dict_size = page_bytes < LZMA_DICT_SIZE_MIN
					    ? LZMA_DICT_SIZE_MIN
					    : (uint32_t)page_bytes;
	return lzma_stream_encoder(stream, filters, LZMA_CHECK_CRC64);
}

static MUST_USE enum status xz_encode(const struct codec_job *job,
				      struct buffer *out, struct reason *why)
{
	struct codec_memory unseen = {0, 0};
	lzma_allocator allocator = {take, give_back,
				    job->memory ? job->memory : &unseen};
	lzma_stream stream = LZMA_STREAM_INIT;
	uint32_t preset = (uint32_t)job->setting->level;
	enum status status;
	lzma_ret code;

	if (job->setting->extreme)
		preset |= LZMA_PRESET_EXTREME;
	stream.allocator = &allocator;
	code = start_encoder(&stream, preset, job->page_bytes);
	if (code != LZMA_OK)
		return failure(code, why);
	status = encode_pieces(&stream, job, out, why);
	lzma_end(&stream);
	return status;
}

static MUST_USE enum status xz_decode(const struct codec_job *job,
				      struct buffer *out, struct reason *why)
{
	struct codec_memory unseen = {0, 0};
	lzma_allocator allocator = {take, give_back,
				    job->memory ? job->memory : &unseen};
	lzma_stream stream = LZMA_STREAM_INIT;
	enum status status;
	lzma_ret code;

	stream.allocator = &allocator;
	code = lzma_stream_decoder(&stream, UINT64_MAX, 0);
	if (code != LZMA_OK)
		return failure(code, why);
	stream.next_in = job->input.bytes;
	stream.avail_in = job->input.length;
	status = pump(&stream, LZMA_FINISH, out, &code);
	if (status != STATUS_OK)
		status = output_full(out, "liblzma", why);
	else if (code != LZMA_STREAM_END)
		status = failure(code, why);
	else if (stream.avail_in)
		status = reason_give(why, STATUS_CODEC,
				     "liblzma: %zu bytes after the stream",
				     stream.avail_in);
	lzma_end(&stream);
	return status;
}

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

static enum status xz_framing(struct slice stream, uint64_t *bytes)
{
	struct codec_memory unseen = {0, 0};
	lzma_allocator allocator = {take, give_back, &unseen};
	lzma_stream_flags footer;
	lzma_index *index = NULL;
	uint64_t limit = UINT64_MAX, payload;
	size_t position = 0, end = stream.length;
	lzma_ret code;
	enum status status;

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

const struct codec codec_xz = {
	.name = "xz",
	.summary = "LZMA2 in the .xz container with CRC-64",
	.source = "the .xz file format 1.2",
	.levels = "0 to 9, each also with e",
	.flushes = true,
	.work = 1.0,
	.version = xz_version,
	.parse = xz_parse,
	.encode = xz_encode,
	.decode = xz_decode,
	.framing = xz_framing,
};
