/* Values of a set file: from text to what they mean. */
#ifndef CORPUS_SET_VALUES_H
#define CORPUS_SET_VALUES_H

#include "corpus/set_file.h"

/*
 * Each parses the whole of text. STATUS_BAD_USAGE with what would be right;
 * STATUS_NO_MEMORY. Outputs are unchanged on failure.
 */

/* "40%" or "0.3 %" to 0.40 and 0.003; at most 10000%. */
MUST_USE enum status value_percent(const char *text, double *share,
				   struct reason *why);
/* A plain decimal number from 0 to 64. */
MUST_USE enum status value_bits(const char *text, double *bits,
				struct reason *why);
/* 64 hex digits, kept in lower case. */
MUST_USE enum status value_digest(const char *text, char sha256[65],
				  struct reason *why);
/* "lines", "17 bytes" or "2000 in all". */
MUST_USE enum status value_records(const char *text, struct symbol_rules *rules,
				   struct reason *why);
/* "fixed" or "rolling". */
MUST_USE enum status value_feed(const char *text, bool *rolling,
				struct reason *why);
/* "512" or "4096" bytes, the units of disks and pages. */
MUST_USE enum status value_unit(const char *text, size_t *bytes,
				struct reason *why);
/* Whole seconds from 1 to a day. */
MUST_USE enum status value_seconds(const char *text, unsigned *seconds,
				   struct reason *why);
/* "64M" or "2G", from 16M to 1024G. */
MUST_USE enum status value_memory(const char *text, size_t *bytes,
				  struct reason *why);
/* Letters, digits, - _ and ., at most SET_NAME_BYTES - 1. */
MUST_USE enum status value_name(const char *text, char name[SET_NAME_BYTES],
				struct reason *why);
/* Any text of at most SET_NAME_BYTES - 1 bytes. */
MUST_USE enum status value_short(const char *text, char out[SET_NAME_BYTES],
				 struct reason *why);
/* A copy, owned by the caller; an earlier one in *out is freed. */
MUST_USE enum status value_text(const char *text, char **out);
/* Words between white space, no word twice, into an empty list. */
MUST_USE enum status value_list(const char *text, struct text_list *list,
				struct reason *why);
void text_list_release(struct text_list *list);

#endif
