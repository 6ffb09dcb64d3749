#include "source/source.h"

#include "source/bytestream.h"
#include "source/source_rows.h"

#include <string.h>

const struct source *const sources[] = {
	&source_frames,        &source_feed,   &source_dutylog,
	&source_station_table, &source_random, &source_zeros,
	&source_iid,           &source_chain,  &source_strand,
	&source_rec,           NULL,
};

const struct source *source_find(const char *name)
{
	for (size_t i = 0; sources[i]; i++) {
		if (strcmp(sources[i]->name, name) == 0)
			return sources[i];
	}
	return NULL;
}

enum status source_write(const struct source *source, uint64_t symbols,
			 uint64_t seed, const struct source_sink *sink)
{
	struct source_stream stream;

	stream_init(&stream, symbols, sink);
	source->generate(&stream, seed);
	return stream_finish(&stream);
}

static enum status copy_to_memory(void *state, const uint8_t *bytes,
				  size_t length)
{
	uint8_t **next = state;

	memcpy(*next, bytes, length);
	*next += length;
	return STATUS_OK;
}

void source_fill(const struct source *source, size_t symbols, uint64_t seed,
		 uint8_t *bytes)
{
	uint8_t *next = bytes;
	const struct source_sink sink = {copy_to_memory, &next};
	/* The sink above never refuses, so there is nothing to hand on. */
	enum status status = source_write(source, symbols, seed, &sink);

	(void)status;
}
