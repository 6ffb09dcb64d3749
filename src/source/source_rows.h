/* The rows of the source table, each defined at the end of its own file. */
#ifndef SOURCE_SOURCE_ROWS_H
#define SOURCE_SOURCE_ROWS_H

#include "source/source.h"

extern const struct source source_frames;
extern const struct source source_feed;
extern const struct source source_dutylog;
extern const struct source source_station_table;
extern const struct source source_random;
extern const struct source source_zeros;
extern const struct source source_iid;
extern const struct source source_chain;
extern const struct source source_strand;
extern const struct source source_rec;

#endif
