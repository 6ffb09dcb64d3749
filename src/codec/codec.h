/* Table 2: codecs, one row each, and how a cell is measured. */
#ifndef CODEC_CODEC_H
#define CODEC_CODEC_H

#include "base/memory.h"
#include "cost/cell.h"
#include "symbols/sequence.h"

#include <stdbool.h>

/* A level as the row understands it. */
struct codec_setting {
	char text[CELL_NAME_BYTES]; /* as written: "9", "9e", "-5", "19 long" */
	int level;
	bool extreme;        /* xz: the e presets */
	unsigned window_log; /* zstd long window; 0: the level's own */
};

/* Bytes a library asked of the heap: now and at the worst moment. */
struct codec_memory {
	uint64_t current_bytes, peak_bytes;
};

/* One encode or decode. All borrowed; memory and pieces may be NULL. */
struct codec_job {
	const struct codec_setting *setting;
	struct slice input;
	/*
	 * Encode only: the input is one page of this many bytes at most, so a
	 * row may ask for no larger a window; 0: the setting as it is.
	 */
	size_t page_bytes;
	/*
	 * Encode only: flush so that every byte up to cuts[i] is decodable, and
	 * count the bytes sent for each piece; cuts[cut_count - 1] is the end.
	 * The last piece carries the trailer. NULL: one unflushed stream.
	 */
	const size_t *cuts;
	size_t cut_count;
	uint64_t *piece_bytes;
	struct codec_memory *memory;
};

struct codec {
	const char *name;
	const char *summary;
	const char *source; /* the format's publication */
	const char *levels; /* for people: "0 to 9, each also with e" */
	bool flushes;       /* can be flushed at block cuts */
	double work;        /* relative CPU a byte at its strongest level */
	/* Version of the library as it runs, not as it was compiled against. */
	const char *(*version)(void);
	/* STATUS_BAD_USAGE: out of range; why names the range. */
	enum status (*parse)(const char *text, struct codec_setting *setting,
			     struct reason *why);
	/* Appends to out. STATUS_CODEC with the library's words, NO_MEMORY. */
	enum status (*encode)(const struct codec_job *job, struct buffer *out,
			      struct reason *why);
	/*
	 * out's limit bounds what a hostile stream may expand to; it must be
	 * at least one byte more than what is expected.
	 */
	enum status (*decode)(const struct codec_job *job, struct buffer *out,
			      struct reason *why);
	/*
	 * Container bytes in one whole encoded stream: header, trailer, check,
	 * index, padding. STATUS_BAD_INPUT: not such a stream, or NO_MEMORY.
	 * NULL: unknown.
	 */
	enum status (*framing)(struct slice stream, uint64_t *bytes);
};

/* All rows in the order they are shown, ended by NULL. */
extern const struct codec *const codecs[];
const struct codec *codec_find(const char *name);

/*
 * Layout "whole" gives 0 page bytes; "4K", "64K", "1M" or plain bytes give a
 * page. STATUS_BAD_USAGE: anything else, with what would be right. The text
 * kept in a cell_key is "whole" or decimal bytes.
 */
MUST_USE enum status layout_parse(const char *text, size_t *page_bytes,
				  struct reason *why);
void layout_format(size_t page_bytes, char text[CELL_NAME_BYTES]);

/*
 * Runs one cell: encodes, decodes, compares every byte, runs again flushed at
 * the cuts (and checks that too), spreads pages over blocks. facts is released
 * by the caller. A difference is STATUS_OK with lossless 0 and the place in
 * why; a library that fails is STATUS_CODEC.
 */
MUST_USE enum status cell_measure(const struct codec *codec,
				  const struct codec_setting *setting,
				  size_t page_bytes,
				  const struct sequence *sequence,
				  const struct cuts *cuts,
				  struct cell_facts *facts, struct reason *why);

/*
 * One timed round of a cell, seconds of CPU and wall for encode and decode,
 * compression objects made inside as a caller would. clock is handed in, so
 * that this room reads no clock itself; it returns seconds.
 */
struct cell_round {
	double encode_cpu, encode_wall, decode_cpu, decode_wall;
};
struct cell_clock {
	double (*cpu_seconds)(void);
	double (*wall_seconds)(void);
};
MUST_USE enum status cell_time(const struct codec *codec,
			       const struct codec_setting *setting,
			       size_t page_bytes, struct slice input,
			       const struct cell_clock *clock,
			       struct cell_round *round, struct reason *why);

#endif
