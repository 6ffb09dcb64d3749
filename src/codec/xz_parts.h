/* What the files of the row xz share. */
#ifndef CODEC_XZ_PARTS_H
#define CODEC_XZ_PARTS_H

#include "codec/codec_rows.h"

#include <lzma.h>

/* The filters of a setting, ended; they borrow from their struct. */
struct xz_filters {
	lzma_filter chain[LZMA_FILTERS_MAX + 1];
	lzma_options_lzma lzma2;
	lzma_options_delta delta;
};

bool xz_is_raw(const struct codec_setting *setting);
lzma_check xz_check(const struct codec_setting *setting);
extern const char *const xz_containers[];

enum status xz_parse(const char *text, struct codec_setting *setting,
		     struct reason *why);
enum status xz_option(const char *word, struct codec_setting *setting,
		      struct reason *why);

/*
 * page_bytes: the dictionary need not be larger than a page, for each of which
 * presets would clear megabytes of tables; 0: as the preset has it. False:
 * this library cannot do them.
 */
bool xz_filters_set(const struct codec_setting *setting, size_t page_bytes,
		    struct xz_filters *filters);

/* Counts into memory. */
lzma_allocator xz_allocator(struct codec_memory *memory);

/* As the row's. */
enum status xz_framing(const struct codec_setting *setting, struct slice stream,
		       uint64_t *bytes);

#endif
