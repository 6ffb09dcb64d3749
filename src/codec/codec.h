/* Table 2: codecs, one row each, and how a cell is measured. */
#ifndef CODEC_CODEC_H
#define CODEC_CODEC_H

#include "base/memory.h"
#include "child/child.h"
#include "cost/cell.h"
#include "symbols/sequence.h"

#include <stdbool.h>

/*
 * A level with all that stands beside it, as the row understands it. Zero is
 * what a library does when nothing is said.
 */
struct codec_setting {
	/* The whole in words: "9", "6e crc32 delta:4", "3 dict:64K". */
	char text[CELL_NAME_BYTES];
	int level;
	bool extreme;                    /* xz: the e presets */
	bool long_distance;              /* zstd: the l levels */
	unsigned window_log;             /* zstd */
	unsigned threads;                /* zstd: workers of the library */
	unsigned container;              /* place in the row's list */
	unsigned memory_level, strategy; /* zlib */
	bool never_flushes;      /* where the row does: a filter cannot */
	unsigned branch_filter;  /* xz: for machine code */
	unsigned delta_bytes;    /* xz: distance */
	size_t dictionary_bytes; /* at most; pages only */
	size_t storage_unit;     /* what is kept takes whole units of so many
				    bytes; 0: as it is. No codec looks at it. */
};

/* The words of a set file that make a setting; NULL or "": not given. */
struct setting_words {
	const char *level;
	const char *container;  /* one of the row's containers */
	const char *options;    /* with commas between; "plain": none */
	const char *dictionary; /* its size: "64K" */
};

/* Bytes a library asked of the heap: now and at the worst moment. */
struct codec_memory {
	uint64_t current_bytes, peak_bytes;
};

/* A trained dictionary made ready to be used again and again; a row's own. */
struct codec_dictionary;

/*
 * One encode or decode. All borrowed; dictionary, memory and pieces may be
 * NULL.
 */
struct codec_job {
	const struct codec_setting *setting;
	struct slice input;
	/*
	 * Before coding the input is one page of this many bytes at most, so a
	 * row may ask for no larger a window; 0: the setting as it is.
	 */
	size_t page_bytes;
	const struct codec_dictionary *dictionary;
	/*
	 * Encode only: flush so that every byte up to cuts[i] is decodable, and
	 * count the bytes sent for each piece; cuts[cut_count - 1] is the end.
	 * The last piece carries the trailer. NULL: one unflushed stream.
	 */
	const size_t *cuts;
	size_t cut_count;
	uint64_t *piece_bytes;
	struct codec_memory *memory;
	/* A user's own codec only: what runs it, and what this took. */
	struct house_session *session;
	struct child_usage *usage; /* NULL: not asked */
	bool again; /* encode: a second run, apart from the first */
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
	enum status (*framing)(const struct codec_setting *setting,
			       struct slice stream, uint64_t *bytes);
	/* Names ended by NULL, the usual one first; NULL: only one way. */
	const char *const *containers;
	const char *options; /* for people: "memory:1 to memory:9"; or NULL */
	/* Takes one word into the setting; NULL: there are none. BAD_USAGE. */
	enum status (*option)(const char *word, struct codec_setting *setting,
			      struct reason *why);
	const struct codec_trainer *trainer; /* NULL: no dictionaries */
	/*
	 * A user's own codec, borrowed; see house.h. It takes a session, runs
	 * elsewhere, and is a fact only if it gives the same bytes twice. NULL:
	 * built in.
	 */
	const struct house *house;
};

/* What a row does with dictionaries. */
struct codec_trainer {
	/*
	 * From pages of page_bytes each (the last one may be shorter) appends
	 * at most setting->dictionary_bytes to out. STATUS_TOO_SHORT: too
	 * little to learn from; NO_MEMORY, CODEC.
	 */
	enum status (*train)(const struct codec_setting *setting,
			     struct slice pages, size_t page_bytes,
			     struct buffer *out, struct reason *why);
	/* bytes are borrowed until discard. memory may be NULL. */
	enum status (*prepare)(const struct codec_setting *setting,
			       struct slice bytes,
			       struct codec_dictionary **dictionary,
			       struct reason *why);
	void (*discard)(struct codec_dictionary *dictionary); /* NULL: none */
};

/* All rows in the order they are shown, ended by NULL. */
extern const struct codec *const codecs[];
const struct codec *codec_find(const char *name);

/*
 * STATUS_BAD_USAGE: a level, container or option that the codec has not, with
 * those it has; words too long for text. The setting is unchanged on failure.
 */
MUST_USE enum status setting_parse(const struct codec *codec,
				   const struct setting_words *words,
				   struct codec_setting *setting,
				   struct reason *why);

/*
 * Layout "whole" gives 0 page bytes; "4K", "64K", "1M" or plain bytes give a
 * page of LAYOUT_PAGE_MIN to LAYOUT_PAGE_MAX bytes. STATUS_BAD_USAGE: anything
 * else, with what would be right. The text kept in a cell_key is "whole" or
 * decimal bytes.
 */
#define LAYOUT_PAGE_MIN ((size_t)128)
#define LAYOUT_PAGE_MAX ((size_t)16 << 20)
MUST_USE enum status layout_parse(const char *text, size_t *page_bytes,
				  struct reason *why);
void layout_format(size_t page_bytes, char text[CELL_NAME_BYTES]);

/*
 * Runs one cell: encodes, decodes, compares every byte, runs again flushed at
 * the cuts (and checks that too), spreads pages over blocks. With a dictionary
 * the odd pages are coded with one trained on the even pages and the other way
 * round, so that no page was seen in training and all are measured; the bytes
 * of both are counted, spread evenly. facts is released by the caller. A
 * difference is STATUS_OK with lossless 0 and the place in why; a library that
 * fails is STATUS_CODEC, also one whose threads, or which as a user's own,
 * gives other bytes in a second run; too few pages for a dictionary is
 * STATUS_TOO_SHORT.
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
	/* A user's own codec: resident bytes at their most; 0: not known. */
	uint64_t encode_peak_bytes, decode_peak_bytes;
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
