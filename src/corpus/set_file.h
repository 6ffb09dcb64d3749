/* Set files: which corpora go through which codecs, under which rules. */
#ifndef CORPUS_SET_FILE_H
#define CORPUS_SET_FILE_H

#include "base/digest.h"
#include "base/memory.h"
#include "base/status.h"
#include "symbols/sequence.h"

#include <stdbool.h>
#include <stddef.h>

/*
 * The format is INI, read with inih: sections in brackets, "key = value" lines,
 * comments from ; or # at the head of a line, and from a ; after white space.
 * White space at the head of a line means nothing: a value is one line. inih
 * fixes three limits, and going past one is an error here: 198 bytes a line,
 * 49 a section's heading, 49 a key.
 */
#define SET_NAME_BYTES 64 /* of names and licences, with the NUL */

/* Words of a list, in the order written. */
struct text_list {
	char **texts; /* owned, each too */
	size_t count;
};

/* [corpus NAME]. Texts are owned; "" where the key is not there. */
struct set_corpus {
	char name[SET_NAME_BYTES];
	unsigned line;      /* of its heading */
	char *file;         /* path, the set's folder joined before it */
	const char *within; /* borrowed from the set: the folder that links may
			       not lead out of; NULL: anywhere */
	struct symbol_rules rules;
	char sha256[65]; /* lower-case hex, or "": not checked */
	char licence[SET_NAME_BYTES];
	char *origin;
	bool rate_known;
	double known_rate; /* bits per symbol */
	bool rolling;      /* feed = rolling: new bytes every time, no digest */
};

/* [codec NAME]. Texts are owned; "" where the key is not there. */
struct set_codec {
	char name[SET_NAME_BYTES];
	unsigned line;
	struct text_list levels;  /* may be empty for users' codecs only */
	struct text_list layouts; /* never empty: "whole" unless given */
	bool rolling;             /* feed = rolling */
	/* Kept as written; what runs the codec reads them. */
	char *compress, *decompress, *library, *options, *dictionary,
		*containers;
	/*
	 * A user's own codec: the words of the two commands, none where the
	 * codec is a library or built in; see command_words in set_command.h.
	 */
	struct text_list compress_words, decompress_words;
	char *library_path;          /* owned; from the root; NULL: none */
	unsigned time_limit_seconds; /* of one run; 0: not given */
	size_t memory_limit_bytes;   /* likewise */
};

struct set {
	char name[SET_NAME_BYTES];
	double gap_limit;               /* share of the floor: 0.40; -1: none */
	double tolerance;               /* share of achieved bits: 0.003 */
	double speed_tolerance;         /* 0.15 */
	char yardstick[SET_NAME_BYTES]; /* "zstd 3", or "" */
	size_t storage_unit; /* what is kept takes whole units: 512 or 4096
				bytes; 0: not asked */
	struct set_corpus *corpora; /* owned, in the order written */
	size_t corpus_count;        /* at least 1 */
	struct set_codec *codecs;   /* owned */
	size_t codec_count;
	char *path;   /* owned; of the set file, for messages */
	char *folder; /* owned; where the set file lies */
	char digest[DIGEST_TEXT_BYTES]; /* of the set file's text */
};

/*
 * Reads a set file. outside: corpora may lie anywhere, also by absolute paths;
 * otherwise a path that leaves the folder is an error. Whether the corpora are
 * there is not looked at.
 * STATUS_NOT_FOUND, STATUS_IO, STATUS_BAD_INPUT (empty): the file;
 * STATUS_BAD_USAGE: what it says, with file, line, section, key and what would
 * be right; STATUS_NO_MEMORY: also more than a mebibyte of text.
 */
MUST_USE enum status set_load(const char *path, bool outside, struct set *set,
			      struct reason *why);
/* The same for text in memory; path is for messages and the folder. */
MUST_USE enum status set_parse(struct slice text, const char *path,
			       bool outside, struct set *set,
			       struct reason *why);
/* Accepts an initialised-empty set. */
void set_release(struct set *set);

#endif
