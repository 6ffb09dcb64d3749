/* What the files of the row zstd share. */
#ifndef CODEC_ZSTD_PARTS_H
#define CODEC_ZSTD_PARTS_H

#include "codec/codec_rows.h"

/* Contexts with an allocator of one's own are in this part of the header. */
#define ZSTD_STATIC_LINKING_ONLY
#include <zstd.h>

/*
 * sized: magic and content size, as the library does; checksum: that with the
 * frame's checksum; unsized: magic only; magicless: size only; bare: neither.
 */
enum { ZSTD_SIZED, ZSTD_CHECKSUM, ZSTD_UNSIZED, ZSTD_MAGICLESS, ZSTD_BARE };
extern const char *const zstd_containers[];
bool zstd_has_magic(const struct codec_setting *setting);
bool zstd_has_size(const struct codec_setting *setting);

/* As the row's. */
enum status zstd_parse(const char *text, struct codec_setting *setting,
		       struct reason *why);
enum status zstd_option(const char *word, struct codec_setting *setting,
			struct reason *why);
enum status zstd_framing(const struct codec_setting *setting,
			 struct slice stream, uint64_t *bytes);
extern const struct codec_trainer zstd_trainer;

/* Made ready for both directions at one level. */
struct codec_dictionary {
	ZSTD_CDict *encode;
	ZSTD_DDict *decode;
};

/* Why a call of the library failed. */
MUST_USE enum status zstd_failure(size_t code, struct reason *why);

#endif
