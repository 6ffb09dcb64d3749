/* The rows of table 2, each defined at the end of its own file. */
#ifndef CODEC_CODEC_ROWS_H
#define CODEC_CODEC_ROWS_H

#include "codec/codec.h"

extern const struct codec codec_store;
extern const struct codec codec_zlib;
extern const struct codec codec_xz;
extern const struct codec codec_zstd;

/*
 * A whole number from low to high as the only text of a level; what says which
 * codec, for the message. STATUS_BAD_USAGE.
 */
MUST_USE enum status level_number(const char *text, int low, int high,
				  const char *what,
				  struct codec_setting *setting,
				  struct reason *why);

/* Likewise for "name:12", the name's colon included; into *value. */
MUST_USE enum status option_number(const char *word, const char *name, int low,
				   int high, unsigned *value,
				   struct reason *why);

/*
 * "4K", "1M" or plain bytes from low to high; 0 for anything else. And back,
 * in the shortest of these spellings.
 */
size_t size_read(const char *text, size_t low, size_t high);
void size_format(size_t bytes, char text[CELL_NAME_BYTES]);

/* Allocation through base that counts bytes, from any thread; opaque is a
 * codec_memory. */
void *counted_new(struct codec_memory *memory, size_t bytes);
void counted_free(struct codec_memory *memory, void *block);

/*
 * Why a decoder's output could not grow: STATUS_CODEC when it is at its limit
 * (more came out than went in), otherwise STATUS_NO_MEMORY.
 */
MUST_USE enum status output_full(const struct buffer *out, const char *library,
				 struct reason *why);

/* End of piece i of a job: its cut, or the whole input without cuts. */
size_t job_piece_end(const struct codec_job *job, size_t i);
size_t job_pieces(const struct codec_job *job);

#endif
