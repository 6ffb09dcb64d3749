/* The name that somebody who mistyped one probably meant. */
#ifndef CORPUS_SUGGEST_H
#define CORPUS_SUGGEST_H

#include <stddef.h>

/*
 * The nearest of count names by edit distance (Levenshtein 1966), the first of
 * those equally near; NULL where none is within a third of its length.
 */
const char *suggest_name(const char *wrong, const char *const *names,
			 size_t count);

#endif
