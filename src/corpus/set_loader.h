/* A set file on its way from text to struct set; seen by this room only. */
#ifndef CORPUS_SET_LOADER_H
#define CORPUS_SET_LOADER_H

#include "corpus/set_file.h"
#include "corpus/set_keys.h"

/* inih keeps 50 bytes, its NUL among them, of a heading and of a key. */
#define INIH_WORD_BYTES 50

/* What inih calls back into: the lines handed out and the set as it grows. */
struct loader {
	struct set *set;
	const char *path;
	bool outside;
	struct slice text;
	size_t offset;         /* of the next line */
	unsigned line;         /* last one handed out, from 1 */
	unsigned heading_line; /* of the last heading */
	bool opened;           /* a key has been seen below it */
	enum section_sort sort;
	unsigned key_lines[SET_KEYS_MAX]; /* of the section; 0: not given */
	unsigned set_line;                /* of [set]; 0: not seen */
	enum status status;               /* of the first failure */
	struct reason *why;               /* never NULL */
};

/* Keeps a failure whose words are in why already, and places it at a line. */
void fail_at(struct loader *loader, unsigned line, enum status status);

/*
 * Hands inih the next line, checked against its limits and without white space
 * at its head; NULL at the end and after a failure. stream is the loader.
 */
char *loader_read_line(char *out, int size, void *stream);

/* Refuses a heading without keys; called where the next begins, and last. */
void section_close(struct loader *loader);
/* Called at the first key below a heading: adds the section to the set. */
void section_open(struct loader *loader, const char *section);
/* The struct set, set_corpus or set_codec that keys go to. */
void *section_current(struct loader *loader);

#define REFUSE(loader, line, ...) \
	fail_at((loader), (line), \
		reason_give((loader)->why, STATUS_BAD_USAGE, __VA_ARGS__))

#endif
