/* The two dictionaries of a cell: each half of its pages teaches the other. */
#ifndef CODEC_PAGE_DICTIONARIES_H
#define CODEC_PAGE_DICTIONARIES_H

#include "codec/codec.h"

struct page_dictionaries {
	const struct codec *codec; /* NULL: none, after a zeroed start */
	struct buffer bytes[2];    /* by the parity of the page they are for */
	struct codec_dictionary *ready[2];
};

/*
 * Trains from the pages of input; without dictionary_bytes in the setting it
 * makes none. STATUS_TOO_SHORT: too few pages; NO_MEMORY, CODEC.
 */
MUST_USE enum status
page_dictionaries_init(struct page_dictionaries *dictionaries,
		       const struct codec *codec,
		       const struct codec_setting *setting, struct slice input,
		       size_t page_bytes, struct reason *why);
void page_dictionaries_release(struct page_dictionaries *dictionaries);

/* For the page that starts at this byte; NULL where there are none. */
const struct codec_dictionary *
page_dictionary(const struct page_dictionaries *dictionaries, size_t start,
		size_t page_bytes);

#endif
