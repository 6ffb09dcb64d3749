/* One stream of a cell: coded, coded again, decoded and compared. */
#ifndef CODEC_CELL_WORK_H
#define CODEC_CELL_WORK_H

#include "codec/codec.h"
#include "codec/house.h"
#include "codec/page_dictionaries.h"

/* What one cell needs while it is measured. */
struct cell_work {
	const struct codec *codec;
	const struct codec_setting *setting;
	size_t page_bytes; /* 0: whole */
	const struct sequence *sequence;
	const struct cuts *cuts;
	struct cell_facts *facts;
	struct buffer packed, plain;
	struct codec_memory encode, decode;
	struct page_dictionaries dictionaries;
	const struct codec_dictionary *dictionary; /* of the page at hand */
	struct house_session *session;
	bool again;   /* a second run to compare with the first */
	size_t block; /* pages: block of the first byte not yet spread */
};

/*
 * Codes input into work->packed. cuts, their count and the bytes of each piece
 * are as in codec_job; NULL, 0, NULL: one unflushed stream. Any status that
 * codecs give.
 */
MUST_USE enum status work_encode(struct cell_work *work, struct slice input,
				 const size_t *cuts, size_t cut_count,
				 uint64_t *piece_bytes, struct reason *why);

/*
 * Codes once more what may not be the same twice and compares: a library's own
 * threads may cut the work as they meet it, and a user's codec may do anything.
 * STATUS_CODEC: other bytes. work->packed stays the first.
 */
MUST_USE enum status work_encode_again(struct cell_work *work,
				       struct slice input, struct reason *why);

/*
 * Decodes what was packed and compares it with the input; a difference clears
 * facts->lossless and says in why where, in which run.
 */
MUST_USE enum status work_check(struct cell_work *work, struct slice input,
				const char *run, struct reason *why);

#endif
