#include "codec/codec_rows.h"

#include <string.h>
#include <zlib.h>

#define MEMORY_LEVEL 8
/* zlib counts in unsigned int: larger inputs go in pieces of this. */
#define STEP_BYTES ((size_t)1 << 30)
#define ROOM_BYTES ((size_t)1 << 16)

static const char *zlib_codec_version(void)
{
	return zlibVersion();
}

static MUST_USE enum status
zlib_parse(const char *text, struct codec_setting *setting, struct reason *why)
{
	return level_number(text, 1, 9, "zlib", setting, why);
}

enum { ZLIB, GZIP, RAW };
static const char *const containers[] = {
	[ZLIB] = "zlib", [GZIP] = "gzip", [RAW] = "raw", NULL};

/* zlib tells containers apart by the number of window bits. */
static int window_bits(const struct codec_setting *setting)
{
	static const int bits[] = {[ZLIB] = MAX_WBITS,
				   [GZIP] = MAX_WBITS + 16,
				   [RAW] = -MAX_WBITS};

	return bits[setting->container];
}

#define MEMORY "memory:"

static MUST_USE enum status
zlib_option(const char *word, struct codec_setting *setting, struct reason *why)
{
	static const struct {
		const char *name;
		unsigned strategy;
	} strategies[] = {{"filtered", Z_FILTERED},
			  {"huffman", Z_HUFFMAN_ONLY},
			  {"rle", Z_RLE},
			  {"fixed", Z_FIXED}};

	if (strncmp(word, MEMORY, strlen(MEMORY)) == 0)
		return option_number(word, MEMORY, 1, MAX_MEM_LEVEL,
				     &setting->memory_level, why);
	for (size_t i = 0; i < sizeof(strategies) / sizeof(*strategies); i++) {
		if (strcmp(strategies[i].name, word) == 0) {
			setting->strategy = strategies[i].strategy;
			return STATUS_OK;
		}
	}
	return reason_give(why, STATUS_BAD_USAGE, "option '%s': zlib has %s",
			   word, codec_zlib.options);
}

static void *take(void *memory, unsigned items, unsigned bytes)
{
	return counted_new(memory, (size_t)items * bytes);
}

static void give_back(void *memory, void *block)
{
	counted_free(memory, block);
}

static MUST_USE enum status failure(const z_stream *stream, int code,
				    struct reason *why)
{
	if (code == Z_MEM_ERROR)
		return reason_give(why, STATUS_NO_MEMORY,
				   "zlib: out of memory");
	return reason_give(why, STATUS_CODEC, "zlib: %s",
			   stream->msg ? stream->msg : zError(code));
}

/* Runs step until it has read all and has no more to write. */
static MUST_USE enum status pump(z_stream *stream, struct buffer *out,
				 int (*step)(z_stream *, int), int flush,
				 int *code)
{
	do {
		size_t room;

		TRY(buffer_reserve(out, 1));
		room = out->room - out->length;
		if (room < ROOM_BYTES && out->limit - out->length > room) {
			size_t more = out->limit - out->length;

			TRY(buffer_reserve(
				out, more < ROOM_BYTES ? more : ROOM_BYTES));
			room = out->room - out->length;
		}
		if (room > STEP_BYTES)
			room = STEP_BYTES;
		stream->next_out = out->bytes + out->length;
		stream->avail_out = (uInt)room;
		*code = step(stream, flush);
		out->length += room - stream->avail_out;
	} while (*code == Z_OK && (stream->avail_out == 0 || stream->avail_in));
	return STATUS_OK;
}

static MUST_USE enum status encode_piece(z_stream *stream, struct slice piece,
					 int flush, struct buffer *out,
					 struct reason *why)
{
	size_t done = 0;
	int code = Z_OK;

	do {
		size_t step = piece.length - done;
		int last;

		if (step > STEP_BYTES)
			step = STEP_BYTES;
		last = done + step == piece.length;
		/* zlib does not write to its input. */
		stream->next_in =
			(z_const Bytef *)(uintptr_t)(piece.bytes + done);
		stream->avail_in = (uInt)step;
		if (pump(stream, out, deflate, last ? flush : Z_NO_FLUSH,
			 &code) != STATUS_OK)
			return reason_give(why, STATUS_NO_MEMORY,
					   "out of memory");
		if (code != Z_OK && code != Z_STREAM_END && code != Z_BUF_ERROR)
			return failure(stream, code, why);
		done += step;
	} while (done < piece.length);
	return STATUS_OK;
}

static MUST_USE enum status encode_pieces(z_stream *stream,
					  const struct codec_job *job,
					  struct buffer *out,
					  struct reason *why)
{
	size_t pieces = job_pieces(job), start = 0;

	for (size_t i = 0; i < pieces; i++) {
		size_t end = job_piece_end(job, i), before = out->length;
		const struct slice piece = {job->input.bytes + start,
					    end - start};

		TRY(encode_piece(stream, piece,
				 i + 1 == pieces ? Z_FINISH : Z_PARTIAL_FLUSH,
				 out, why));
		if (job->piece_bytes)
			job->piece_bytes[i] = out->length - before;
		start = end;
	}
	return STATUS_OK;
}

static MUST_USE enum status zlib_encode(const struct codec_job *job,
					struct buffer *out, struct reason *why)
{
	struct codec_memory unseen = {0, 0};
	z_stream stream = {.zalloc = take,
			   .zfree = give_back,
			   .opaque = job->memory ? job->memory : &unseen};
	const struct codec_setting *setting = job->setting;
	int code = deflateInit2(
		&stream, setting->level, Z_DEFLATED, window_bits(setting),
		setting->memory_level ? (int)setting->memory_level
				      : MEMORY_LEVEL,
		(int)setting->strategy);
	enum status status;

	if (code != Z_OK)
		return failure(&stream, code, why);
	status = encode_pieces(&stream, job, out, why);
	(void)deflateEnd(&stream);
	return status;
}

static MUST_USE enum status decode_all(z_stream *stream, struct slice input,
				       struct buffer *out, struct reason *why)
{
	size_t done = 0;
	int code = Z_OK;

	while (code == Z_OK && done < input.length) {
		size_t step = input.length - done;
		enum status status;

		if (step > STEP_BYTES)
			step = STEP_BYTES;
		stream->next_in =
			(z_const Bytef *)(uintptr_t)(input.bytes + done);
		stream->avail_in = (uInt)step;
		status = pump(stream, out, inflate, Z_NO_FLUSH, &code);
		if (status != STATUS_OK)
			return output_full(out, "zlib", why);
		done += step - stream->avail_in;
		if (code == Z_BUF_ERROR)
			code = Z_OK;
		if (code == Z_OK && stream->avail_in)
			break;
	}
	if (code == Z_STREAM_END && done == input.length)
		return STATUS_OK;
	if (code == Z_STREAM_END || code == Z_OK)
		return reason_give(why, STATUS_CODEC,
				   "zlib: the stream ends at %zu of %zu bytes",
				   done, input.length);
	return failure(stream, code, why);
}

static MUST_USE enum status zlib_decode(const struct codec_job *job,
					struct buffer *out, struct reason *why)
{
	struct codec_memory unseen = {0, 0};
	z_stream stream = {.zalloc = take,
			   .zfree = give_back,
			   .opaque = job->memory ? job->memory : &unseen};
	int code = inflateInit2(&stream, window_bits(job->setting));
	enum status status;

	if (code != Z_OK)
		return failure(&stream, code, why);
	status = decode_all(&stream, job->input, out, why);
	(void)inflateEnd(&stream);
	return status;
}

/*
 * RFC 1950, section 2.2: CMF, FLG, DICTID where FDICT is set, Adler-32. The
 * header is a multiple of 31, and no Deflate data is shorter than 2 bytes.
 */
static enum status zlib_frame(struct slice stream, uint64_t *bytes)
{
	unsigned header, framing;

	if (stream.length < 2)
		return STATUS_BAD_INPUT;
	header = stream.bytes[0] * 256U + stream.bytes[1];
	framing = header & 0x20 ? 10 : 6;
	if ((header >> 8 & 0x0f) != Z_DEFLATED || header >> 12 > 7 ||
	    header % 31 || stream.length < framing + 2)
		return STATUS_BAD_INPUT;
	*bytes = framing;
	return STATUS_OK;
}

/* Past a text that ends in a zero byte; the end where there is none. */
static size_t skip_text(struct slice stream, size_t at)
{
	while (at < stream.length && stream.bytes[at])
		at++;
	return at < stream.length ? at + 1 : at;
}

/*
 * RFC 1952, section 2.3: ten bytes, then what FLG announces (extra field with
 * its length, name, comment, CRC-16), Deflate data, CRC-32 and size.
 */
static enum status gzip_frame(struct slice stream, uint64_t *bytes)
{
	const uint8_t *head = stream.bytes;
	size_t at = 10;

	if (stream.length < 10 + 2 + 8 || head[0] != 0x1f || head[1] != 0x8b ||
	    head[2] != Z_DEFLATED || head[3] & 0xe0)
		return STATUS_BAD_INPUT;
	if (head[3] & 0x04)
		at += 2 + head[10] + 256U * head[11];
	if (head[3] & 0x08)
		at = skip_text(stream, at);
	if (head[3] & 0x10)
		at = skip_text(stream, at);
	if (head[3] & 0x02)
		at += 2;
	if (at + 2 + 8 > stream.length)
		return STATUS_BAD_INPUT;
	*bytes = at + 8;
	return STATUS_OK;
}

static enum status zlib_framing(const struct codec_setting *setting,
				struct slice stream, uint64_t *bytes)
{
	if (setting->container == GZIP)
		return gzip_frame(stream, bytes);
	if (setting->container == ZLIB)
		return zlib_frame(stream, bytes);
	/* RFC 1951: no header; the shortest stream is two bytes. */
	if (stream.length < 2)
		return STATUS_BAD_INPUT;
	*bytes = 0;
	return STATUS_OK;
}

const struct codec codec_zlib = {
	.name = "zlib",
	.summary = "Deflate in the zlib container, 32 KiB window",
	.source = "RFC 1950, RFC 1951, RFC 1952",
	.levels = "1 to 9",
	.flushes = true,
	.work = 0.15,
	.version = zlib_codec_version,
	.parse = zlib_parse,
	.encode = zlib_encode,
	.decode = zlib_decode,
	.framing = zlib_framing,
	.containers = containers,
	.options = "memory:1 to memory:9, filtered, huffman, rle and fixed",
	.option = zlib_option,
};
