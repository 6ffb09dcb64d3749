/* Commands of a set file: from text to the words of a program. */
#ifndef CORPUS_SET_COMMAND_H
#define CORPUS_SET_COMMAND_H

#include "corpus/set_file.h"

/*
 * Splits a command as it is written, into an empty list. No shell ever sees it.
 * Words end at white space; '...' and "..." hold it together, and a backslash
 * takes the next character as it is, but between '...'. {folder} becomes the
 * folder, a path from the root; {level} stays. The first word, where it has a
 * slash, is a path against the folder and becomes one from the root; without a
 * slash it stays, to be looked for in PATH. STATUS_BAD_USAGE: nothing there, an
 * open quotation, or, unless outside is set, a first word that leaves the
 * folder, also by a link.
 */
MUST_USE enum status command_words(const char *text, const char *folder,
				   bool outside, struct text_list *words,
				   struct reason *why);

/* True when a word has {level} in it. */
bool command_has_level(const struct text_list *words);

/* A path of the set file against its folder, as a command's first word. */
MUST_USE enum status command_path(const char *folder, bool outside, char **path,
				  struct reason *why);

/* The keys of a user's own codec, checked and resolved. As command_words. */
MUST_USE enum status own_codec_finish(struct set_codec *codec,
				      const char *folder, bool outside,
				      struct reason *why);

#endif
