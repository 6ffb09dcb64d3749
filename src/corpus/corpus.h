/* A corpus's bytes and its identity. */
#ifndef CORPUS_CORPUS_H
#define CORPUS_CORPUS_H

#include "base/digest.h"
#include "corpus/set_file.h"

/*
 * Memory that one byte of a corpus takes at the worst moment of a survey: the
 * file, 14 for the n-gram counts, and a decoded copy to compare with.
 */
#define CORPUS_MEMORY_PER_BYTE 16

struct corpus {
	uint8_t *bytes; /* owned */
	size_t length;  /* at least 1 */
	char sha256[DIGEST_TEXT_BYTES];
};

/*
 * Reads a corpus and checks its digest. memory_limit is in bytes; UINT64_MAX
 * sets none. Nothing is held on failure, and why names the file and what would
 * be right:
 * STATUS_NOT_FOUND: not there; STATUS_IO: unreadable, a folder or a device;
 * STATUS_BAD_INPUT: empty; STATUS_NO_MEMORY: CORPUS_MEMORY_PER_BYTE times its
 * length is more than the limit, or the heap said no; STATUS_MISMATCH: the
 * digest; STATUS_BAD_USAGE: a link leads out of the set's folder.
 */
MUST_USE enum status corpus_open(const struct set_corpus *entry,
				 uint64_t memory_limit, struct corpus *corpus,
				 struct reason *why);
/* Accepts an initialised-empty corpus. */
void corpus_close(struct corpus *corpus);

/* Length of the file as it lies there; 0 where there is none. */
uint64_t corpus_file_bytes(const struct set_corpus *entry);

/* The bytes, for sequence_init; valid until corpus_close. */
struct slice corpus_bytes(const struct corpus *corpus);

#endif
