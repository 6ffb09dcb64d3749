/* The rows of the source table, each defined at the end of its own file. */
#ifndef SOURCE_SOURCE_ROWS_H
#define SOURCE_SOURCE_ROWS_H

#include "source/source.h"

extern const struct source source_gauge_frames;
extern const struct source source_event_feed;
extern const struct source source_duty_log;
extern const struct source source_station_table;
extern const struct source source_random;
extern const struct source source_zeros;
extern const struct source source_iid;
extern const struct source source_chain;
extern const struct source source_strand;
extern const struct source source_records;

/*
 * Appends as much of text as the symbols still wanted allow; *left counts
 * down. STATUS_NO_MEMORY.
 */
MUST_USE enum status emit(struct buffer *out, const void *text, size_t length,
			  uint64_t *left);

#endif
