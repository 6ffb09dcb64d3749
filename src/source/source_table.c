#include "source/source.h"

#include "source/source_rows.h"

#include <string.h>

const struct source *const sources[] = {
	&source_gauge_frames,
	&source_event_feed,
	&source_duty_log,
	&source_station_table,
	&source_random,
	&source_zeros,
	&source_iid,
	&source_chain,
	&source_strand,
	&source_records,
	NULL,
};

const struct source *source_find(const char *name)
{
	for (size_t i = 0; sources[i]; i++) {
		if (strcmp(sources[i]->name, name) == 0)
			return sources[i];
	}
	return NULL;
}

enum status emit(struct buffer *out, const void *text, size_t length,
		 uint64_t *left)
{
	if (length > *left)
		length = (size_t)*left;
	TRY(buffer_add(out, text, length));
	*left -= length;
	return STATUS_OK;
}
