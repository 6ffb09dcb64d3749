#include "source/bytestream.h"

#include <string.h>

void stream_init(struct source_stream *stream, uint64_t bytes,
		 const struct source_sink *sink)
{
	stream->sink = sink;
	stream->left = bytes;
	stream->status = STATUS_OK;
	stream->held = 0;
}

bool stream_full(const struct source_stream *stream)
{
	return stream->left == 0 || stream->status != STATUS_OK;
}

static void hand_on(struct source_stream *stream)
{
	if (stream->held && stream->status == STATUS_OK)
		stream->status = stream->sink->take(
			stream->sink->state, stream->bytes, stream->held);
	stream->held = 0;
}

void stream_put(struct source_stream *stream, const void *bytes, size_t length)
{
	const uint8_t *from = bytes;

	if (length > stream->left)
		length = (size_t)stream->left;
	stream->left -= length;
	while (length) {
		size_t room = STREAM_BYTES - stream->held;
		size_t part = length < room ? length : room;

		memcpy(stream->bytes + stream->held, from, part);
		stream->held += part;
		from += part;
		length -= part;
		if (stream->held == STREAM_BYTES)
			hand_on(stream);
	}
}

void stream_text(struct source_stream *stream, const char *text)
{
	stream_put(stream, text, strlen(text));
}

enum status stream_finish(struct source_stream *stream)
{
	hand_on(stream);
	return stream->status;
}
