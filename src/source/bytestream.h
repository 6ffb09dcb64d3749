/* The outflow of a generator: collects bytes, stops at the number wanted. */
#ifndef SOURCE_BYTESTREAM_H
#define SOURCE_BYTESTREAM_H

#include "source/source.h"

#define STREAM_BYTES 8192

struct source_stream {
	const struct source_sink *sink; /* borrowed */
	uint64_t left;                  /* bytes still wanted */
	enum status status;             /* of the sink; sticky */
	size_t held;
	uint8_t bytes[STREAM_BYTES];
};

void stream_init(struct source_stream *stream, uint64_t bytes,
		 const struct source_sink *sink);
/* True when no more bytes are wanted or the sink has failed. */
bool stream_full(const struct source_stream *stream);
/* Bytes past the number wanted are dropped. */
void stream_put(struct source_stream *stream, const void *bytes, size_t length);
void stream_text(struct source_stream *stream, const char *text);
/* Hands on what is held; the status of the sink. */
MUST_USE enum status stream_finish(struct source_stream *stream);

#endif
