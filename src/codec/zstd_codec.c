#include "codec/codec_rows.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* Contexts with an allocator of one's own are in this part of the header. */
#define ZSTD_STATIC_LINKING_ONLY
#include <zstd.h>
#include <zstd_errors.h>

/* "19l": long-distance matching over a window of 2^27 bytes. */
#define LONG_WINDOW_LOG 27

static const char *zstd_codec_version(void)
{
	return ZSTD_versionString();
}

static MUST_USE enum status
zstd_parse(const char *text, struct codec_setting *setting, struct reason *why)
{
	char number[CELL_NAME_BYTES];
	size_t length = strlen(text);
	bool far = length > 1 && text[length - 1] == 'l';

	if (length >= sizeof(number))
		return reason_give(why, STATUS_BAD_USAGE,
				   "level '%s' of zstd: too long", text);
	(void)snprintf(number, sizeof(number), "%.*s",
		       (int)(far ? length - 1 : length), text);
	if (strcmp(number, "0") == 0)
		return reason_give(why, STATUS_BAD_USAGE,
				   "level '0' of zstd: 0 stands for the "
				   "library's default; write that level, 3");
	TRY(level_number(number, ZSTD_minCLevel(), ZSTD_maxCLevel(),
			 "zstd (each also with l)", setting, why));
	setting->window_log = far ? LONG_WINDOW_LOG : 0;
	(void)snprintf(setting->text, sizeof(setting->text), "%s", text);
	return STATUS_OK;
}

static void *take(void *memory, size_t bytes)
{
	return counted_new(memory, bytes);
}

static void give_back(void *memory, void *block)
{
	counted_free(memory, block);
}

static MUST_USE enum status failure(size_t code, struct reason *why)
{
	if (ZSTD_getErrorCode(code) == ZSTD_error_memory_allocation)
		return reason_give(why, STATUS_NO_MEMORY,
				   "libzstd: out of memory");
	return reason_give(why, STATUS_CODEC, "libzstd: %s",
			   ZSTD_getErrorName(code));
}

static MUST_USE enum status encode_piece(ZSTD_CCtx *context,
					 ZSTD_inBuffer *input,
					 ZSTD_EndDirective directive,
					 struct buffer *out, struct reason *why)
{
	size_t left;

	do {
		ZSTD_outBuffer output;

		if (buffer_reserve(out, ZSTD_CStreamOutSize()) != STATUS_OK)
			return reason_give(why, STATUS_NO_MEMORY,
					   "out of memory");
		output = (ZSTD_outBuffer){out->bytes + out->length,
					  out->room - out->length, 0};
		left = ZSTD_compressStream2(context, &output, input, directive);
		if (ZSTD_isError(left))
			return failure(left, why);
		out->length += output.pos;
	} while (left);
	return STATUS_OK;
}

static MUST_USE enum status encode_pieces(ZSTD_CCtx *context,
					  const struct codec_job *job,
					  struct buffer *out,
					  struct reason *why)
{
	size_t pieces = job_pieces(job), start = 0;

	for (size_t i = 0; i < pieces; i++) {
		size_t end = job_piece_end(job, i), before = out->length;
		ZSTD_inBuffer input = {job->input.bytes + start, end - start,
				       0};

		TRY(encode_piece(context, &input,
				 i + 1 == pieces ? ZSTD_e_end : ZSTD_e_flush,
				 out, why));
		if (job->piece_bytes)
			job->piece_bytes[i] = out->length - before;
		start = end;
	}
	return STATUS_OK;
}

static MUST_USE enum status
set_up(ZSTD_CCtx *context, const struct codec_job *job, struct reason *why)
{
	const struct codec_setting *setting = job->setting;
	size_t code = ZSTD_CCtx_setParameter(context, ZSTD_c_compressionLevel,
					     setting->level);

	if (!ZSTD_isError(code) && setting->window_log)
		code = ZSTD_CCtx_setParameter(
			context, ZSTD_c_enableLongDistanceMatching, 1);
	if (!ZSTD_isError(code) && setting->window_log)
		code = ZSTD_CCtx_setParameter(context, ZSTD_c_windowLog,
					      (int)setting->window_log);
	if (!ZSTD_isError(code))
		code = ZSTD_CCtx_setPledgedSrcSize(context, job->input.length);
	return ZSTD_isError(code) ? failure(code, why) : STATUS_OK;
}

static MUST_USE enum status zstd_encode(const struct codec_job *job,
					struct buffer *out, struct reason *why)
{
	struct codec_memory unseen = {0, 0};
	ZSTD_customMem heap = {take, give_back,
			       job->memory ? job->memory : &unseen};
	ZSTD_CCtx *context = ZSTD_createCCtx_advanced(heap);
	enum status status;

	if (!context)
		return reason_give(why, STATUS_NO_MEMORY,
				   "libzstd: out of memory");
	status = set_up(context, job, why);
	if (status == STATUS_OK)
		status = encode_pieces(context, job, out, why);
	(void)ZSTD_freeCCtx(context);
	return status;
}

static MUST_USE enum status decode_all(ZSTD_DCtx *context, struct slice bytes,
				       struct buffer *out, struct reason *why)
{
	ZSTD_inBuffer input = {bytes.bytes, bytes.length, 0};
	size_t left = 1;

	for (;;) {
		ZSTD_outBuffer output;
		size_t spare = out->limit - out->length;
		size_t want = ZSTD_DStreamOutSize(), before = input.pos;

		if (buffer_reserve(out, spare < want ? spare : want) !=
		    STATUS_OK)
			return reason_give(why, STATUS_NO_MEMORY,
					   "out of memory");
		output = (ZSTD_outBuffer){out->bytes + out->length,
					  out->room - out->length, 0};
		left = ZSTD_decompressStream(context, &output, &input);
		if (ZSTD_isError(left))
			return failure(left, why);
		out->length += output.pos;
		if (!left)
			break;
		if (!output.pos && input.pos == before)
			return reason_give(
				why, STATUS_CODEC, "libzstd: %s",
				input.pos == input.size
					? "the stream is cut short"
					: "more bytes than the input had");
	}
	if (input.pos < input.size)
		return reason_give(why, STATUS_CODEC,
				   "libzstd: %zu bytes after the frame",
				   input.size - input.pos);
	return STATUS_OK;
}

static MUST_USE enum status zstd_decode(const struct codec_job *job,
					struct buffer *out, struct reason *why)
{
	struct codec_memory unseen = {0, 0};
	ZSTD_customMem heap = {take, give_back,
			       job->memory ? job->memory : &unseen};
	ZSTD_DCtx *context = ZSTD_createDCtx_advanced(heap);
	enum status status = STATUS_OK;
	size_t code;

	if (!context)
		return reason_give(why, STATUS_NO_MEMORY,
				   "libzstd: out of memory");
	code = ZSTD_DCtx_setParameter(
		context, ZSTD_d_windowLogMax,
		ZSTD_dParam_getBounds(ZSTD_d_windowLogMax).upperBound);
	if (ZSTD_isError(code))
		status = failure(code, why);
	if (status == STATUS_OK)
		status = decode_all(context, job->input, out, why);
	(void)ZSTD_freeDCtx(context);
	return status;
}

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

/* RFC 8878, section 3.1.1: magic, frame header, checksum where flagged. */
static bool skip_frame(struct slice stream, size_t *at, uint64_t *framing)
{
	const uint8_t *bytes = stream.bytes + *at;
	size_t left = stream.length - *at, header, checksum;
	uint32_t magic;

	/* No frame is shorter than a skippable one of no content. */
	if (left < 8)
		return false;
	magic = little_endian(bytes, 4);
	if ((magic & ZSTD_MAGIC_SKIPPABLE_MASK) == ZSTD_MAGIC_SKIPPABLE_START)
		return skip_skippable(stream, at, framing);
	header = ZSTD_frameHeaderSize(bytes, left);
	if (magic != ZSTD_MAGICNUMBER || ZSTD_isError(header) || header > left)
		return false;
	checksum = bytes[4] & 0x04 ? 4 : 0;
	*at += header;
	if (!skip_blocks(stream, at) || stream.length - *at < checksum)
		return false;
	*at += checksum;
	*framing += header + checksum;
	return true;
}

static enum status zstd_framing(struct slice stream, uint64_t *bytes)
{
	uint64_t framing = 0;
	size_t at = 0;

	do {
		if (!skip_frame(stream, &at, &framing))
			return STATUS_BAD_INPUT;
	} while (at < stream.length);
	*bytes = framing;
	return STATUS_OK;
}

const struct codec codec_zstd = {
	.name = "zstd",
	.summary = "Zstandard frames; l after a level: long-distance matches",
	.source = "RFC 8878",
	.levels = "1 to 22, and negative ones; each also with l",
	.flushes = true,
	.work = 0.8,
	.version = zstd_codec_version,
	.parse = zstd_parse,
	.encode = zstd_encode,
	.decode = zstd_decode,
	.framing = zstd_framing,
};
