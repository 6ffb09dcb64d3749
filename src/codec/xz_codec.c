#include "codec/xz_parts.h"

#define ROOM_BYTES ((size_t)1 << 16)

static const char *xz_version(void)
{
	return lzma_version_string();
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

lzma_allocator xz_allocator(struct codec_memory *memory)
{
	return (lzma_allocator){take, give_back, memory};
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

static lzma_ret start_encoder(lzma_stream *stream, const struct codec_job *job,
			      struct xz_filters *filters)
{
	if (!xz_filters_set(job->setting, job->page_bytes, filters))
		return LZMA_OPTIONS_ERROR;
	if (xz_is_raw(job->setting))
		return lzma_raw_encoder(stream, filters->chain);
	return lzma_stream_encoder(stream, filters->chain,
				   xz_check(job->setting));
}

static MUST_USE enum status xz_encode(const struct codec_job *job,
				      struct buffer *out, struct reason *why)
{
	struct codec_memory unseen = {0, 0};
	lzma_allocator allocator =
		xz_allocator(job->memory ? job->memory : &unseen);
	lzma_stream stream = LZMA_STREAM_INIT;
	struct xz_filters filters;
	enum status status;
	lzma_ret code;

	stream.allocator = &allocator;
	code = start_encoder(&stream, job, &filters);
	if (code != LZMA_OK)
		return failure(code, why);
	status = encode_pieces(&stream, job, out, why);
	lzma_end(&stream);
	return status;
}

/*
 * A stream says how much memory its decoder takes: a hostile one gets no more
 * than the largest preset's own streams, and a mebibyte for what is around.
 */
static lzma_ret start_decoder(lzma_stream *stream, const struct codec_job *job,
			      struct xz_filters *filters)
{
	if (xz_is_raw(job->setting))
		return xz_filters_set(job->setting, job->page_bytes, filters)
			       ? lzma_raw_decoder(stream, filters->chain)
			       : LZMA_OPTIONS_ERROR;
	return lzma_stream_decoder(
		stream, lzma_easy_decoder_memusage(9) + ((uint64_t)1 << 20), 0);
}

static MUST_USE enum status xz_decode(const struct codec_job *job,
				      struct buffer *out, struct reason *why)
{
	struct codec_memory unseen = {0, 0};
	lzma_allocator allocator =
		xz_allocator(job->memory ? job->memory : &unseen);
	lzma_stream stream = LZMA_STREAM_INIT;
	struct xz_filters filters;
	enum status status;
	lzma_ret code;

	stream.allocator = &allocator;
	code = start_decoder(&stream, job, &filters);
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
	.containers = xz_containers,
	.options = "x86, arm64 and delta:1 to delta:256",
	.option = xz_option,
};
