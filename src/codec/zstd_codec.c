#include "codec/zstd_parts.h"

#include <zstd_errors.h>

static const char *zstd_codec_version(void)
{
	return ZSTD_versionString();
}

static void *take(void *memory, size_t bytes)
{
	return counted_new(memory, bytes);
}

static void give_back(void *memory, void *block)
{
	counted_free(memory, block);
}

enum status zstd_failure(size_t code, struct reason *why)
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
			return zstd_failure(left, why);
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

/* One parameter; an earlier failure stays. */
static void set_parameter(ZSTD_CCtx *context, ZSTD_cParameter parameter,
			  int value, size_t *code)
{
	if (!ZSTD_isError(*code))
		*code = ZSTD_CCtx_setParameter(context, parameter, value);
}

static size_t set_level(ZSTD_CCtx *context, const struct codec_setting *setting)
{
	size_t code = 0;

	set_parameter(context, ZSTD_c_compressionLevel, setting->level, &code);
	if (setting->long_distance)
		set_parameter(context, ZSTD_c_enableLongDistanceMatching, 1,
			      &code);
	if (setting->window_log)
		set_parameter(context, ZSTD_c_windowLog,
			      (int)setting->window_log, &code);
	if (setting->threads)
		set_parameter(context, ZSTD_c_nbWorkers, (int)setting->threads,
			      &code);
	return code;
}

static MUST_USE enum status
set_up(ZSTD_CCtx *context, const struct codec_job *job, struct reason *why)
{
	const struct codec_setting *setting = job->setting;
	size_t code = set_level(context, setting);

	set_parameter(context, ZSTD_c_checksumFlag,
		      setting->container == ZSTD_CHECKSUM, &code);
	set_parameter(context, ZSTD_c_contentSizeFlag, zstd_has_size(setting),
		      &code);
	if (!zstd_has_magic(setting))
		set_parameter(context, ZSTD_c_format, ZSTD_f_zstd1_magicless,
			      &code);
	if (!ZSTD_isError(code))
		code = ZSTD_CCtx_setPledgedSrcSize(context, job->input.length);
	if (!ZSTD_isError(code) && job->dictionary)
		code = ZSTD_CCtx_refCDict(context, job->dictionary->encode);
	return ZSTD_isError(code) ? zstd_failure(code, why) : STATUS_OK;
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
			return zstd_failure(left, why);
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

/*
 * A frame says how large a window its decoder needs: a hostile one gets no more
 * than the decoder's usual limit, or what this setting's own frames take.
 */
static size_t set_decoder(ZSTD_DCtx *context, const struct codec_job *job)
{
	unsigned limit = job->setting->window_log;
	size_t code;

	if (limit < ZSTD_WINDOWLOG_LIMIT_DEFAULT)
		limit = ZSTD_WINDOWLOG_LIMIT_DEFAULT;
	code = ZSTD_DCtx_setParameter(context, ZSTD_d_windowLogMax, (int)limit);
	if (!ZSTD_isError(code) && !zstd_has_magic(job->setting))
		code = ZSTD_DCtx_setParameter(context, ZSTD_d_format,
					      ZSTD_f_zstd1_magicless);
	if (!ZSTD_isError(code) && job->dictionary)
		code = ZSTD_DCtx_refDDict(context, job->dictionary->decode);
	return code;
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
	code = set_decoder(context, job);
	if (ZSTD_isError(code))
		status = zstd_failure(code, why);
	if (status == STATUS_OK)
		status = decode_all(context, job->input, out, why);
	(void)ZSTD_freeDCtx(context);
	return status;
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
	.containers = zstd_containers,
	.options = "window:10 and up, and threads:1 to threads:64",
	.option = zstd_option,
	.trainer = &zstd_trainer,
};
