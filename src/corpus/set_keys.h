/* The keys of each sort of section, and where their values go. */
#ifndef CORPUS_SET_KEYS_H
#define CORPUS_SET_KEYS_H

#include "corpus/set_file.h"

#define SET_KEYS_MAX 12

enum section_sort { SECTION_NONE, SECTION_SET, SECTION_CORPUS, SECTION_CODEC };

/*
 * The place of a key among those of a sort of section, below SET_KEYS_MAX.
 * STATUS_BAD_USAGE: no such key; why lists those there are and the nearest.
 */
MUST_USE enum status key_find(enum section_sort sort, const char *name,
			      size_t *key, struct reason *why);
/*
 * Stores a value in the struct set, set_corpus or set_codec that section points
 * to. Statuses of set_values.h.
 */
MUST_USE enum status key_store(enum section_sort sort, size_t key,
			       void *section, const char *value,
			       struct reason *why);

#endif
