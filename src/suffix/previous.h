/* For every position, the longest match that begins earlier. */
#ifndef SUFFIX_PREVIOUS_H
#define SUFFIX_PREVIOUS_H

#include "suffix/suffix.h"

/*
 * Hands out through *longest (n numbers, the caller frees) for each position i
 * of the sequence, read as a line and not as a circle, the largest l such that
 * symbols i … i+l-1 also stand at some j < i (the two may overlap); [0] is 0.
 * Linear time for any text: common prefixes by Kasai and others 2001, matches
 * by Crochemore and Ilie 2008. Takes 12 n bytes. STATUS_NO_MEMORY.
 */
MUST_USE enum status suffix_previous(const struct suffix *suffix,
				     uint32_t **longest);

#endif
