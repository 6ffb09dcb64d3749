/* Codecs of users: rows of table 2 made at run time, run as child processes. */
#ifndef CODEC_HOUSE_H
#define CODEC_HOUSE_H

#include "codec/codec.h"

/*
 * A command codes each page in a process of its own, so pages are few: with
 * more, the cell is declined. A library takes all pages in three processes.
 */
#define HOUSE_PAGES_MOST 1024
#define HOUSE_SECONDS 300u /* unless the set says more or less */
#define HOUSE_MEMORY_BYTES ((size_t)4 << 30) /* likewise */
/* The level of a codec that has none. */
#define HOUSE_LEVEL "default"

/* What a set file says of it. All borrowed, as long as the house is there. */
struct house_words {
	const char *name;
	char *const *compress; /* words of the commands; {level} stays */
	size_t compress_count; /* 0: a library */
	char *const *decompress;
	size_t decompress_count;
	char *library;    /* path, or NULL */
	const char *host; /* path of codec-host; NULL: it must not run */
	unsigned time_limit_seconds; /* 0: HOUSE_SECONDS */
	size_t memory_limit_bytes;   /* 0: HOUSE_MEMORY_BYTES */
};

struct house;

/* STATUS_BAD_USAGE: the name is a built-in codec's, or too long. */
MUST_USE enum status house_new(const struct house_words *words,
			       struct house **house, struct reason *why);
void house_free(struct house *house); /* NULL is allowed */
/* Its row, as good as the house. */
const struct codec *house_codec(const struct house *house);

/*
 * The path of the program that compresses, or of the object. False: no such
 * program is in PATH, or the path is too long.
 */
#define HOUSE_PATH_BYTES CHILD_PATH_BYTES
bool house_program(const struct house *house, char path[HOUSE_PATH_BYTES]);

/* What codes the pages of one cell; job->session. */
struct house_session;
/*
 * pages: how many there will be. STATUS_TOO_SHORT: more than
 * HOUSE_PAGES_MOST for a command; NO_MEMORY. A NULL house gives a NULL session,
 * which close allows.
 */
MUST_USE enum status house_open(const struct house *house,
				const struct codec_setting *setting,
				size_t pages, struct house_session **session,
				struct reason *why);
/*
 * What can only be said at the end. STATUS_CODEC: a library did not end well,
 * or left a process running.
 */
MUST_USE enum status house_end(struct house_session *session,
			       struct reason *why);
void house_close(struct house_session *session);

#endif
