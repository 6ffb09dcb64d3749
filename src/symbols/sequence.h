/* A corpus as a sequence of symbols, and its cuts into resampling blocks. */
#ifndef SYMBOLS_SEQUENCE_H
#define SYMBOLS_SEQUENCE_H

#include "base/memory.h"
#include "base/status.h"

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

enum symbol_kind {
	SYMBOL_BYTE,
	SYMBOL_BIT, /* most significant bit of each byte first */
	SYMBOL_U16LE,
	SYMBOL_U16BE,
	SYMBOL_U32LE,
	SYMBOL_NUCLEOTIDE, /* A C G T in upper case and nothing else */
	SYMBOL_LETTERS27,  /* a-z, A-Z taken as a-z, and one space for every
			      run of other bytes, at either end too */
	SYMBOL_CODEPOINT,  /* of valid UTF-8 (RFC 3629) */
	SYMBOL_WORD,       /* maximal runs of bytes other than space, \t, \n,
			      \v, \f and \r; a divisor only */
	SYMBOL_KIND_COUNT
};

/* "byte", "u16le", … ; the set-file and report spelling. */
const char *symbol_kind_name(enum symbol_kind kind);
/* STATUS_BAD_USAGE: no such kind; why lists them all. */
MUST_USE enum status symbol_kind_parse(const char *name, enum symbol_kind *kind,
				       struct reason *why);

/*
 * The mapped sequence. Codecs and mix see canonical; n-gram estimators see
 * codes: n codes of code_width bytes, big-endian, each the rank of its symbol
 * among code_count possible ones in ascending order. For byte, nucleotide and
 * letters27 codes is canonical itself (code_width 1; the byte is its own code
 * and code_count is 256).
 */
struct sequence {
	enum symbol_kind kind;
	const uint8_t *canonical; /* borrowed from the file or from owned */
	size_t canonical_bytes;
	size_t n; /* symbols: what bit counts are divided by */
	const uint8_t *codes;
	unsigned code_width; /* 1 to 4 */
	uint32_t code_count;
	uint32_t distinct;    /* different symbols seen: A observed */
	uint64_t alphabet;    /* of the kind: 256, 2, 65536, 2^32, 4, 27; the
				 1,112,064 scalar values of Unicode; the
				 distinct words */
	size_t record_bytes;  /* fixed record width, or 0 */
	size_t records;       /* number of records, or 0; a last line without
				 its end counts */
	const size_t *starts; /* byte offset of every symbol and of the end for
				 codepoint and word (n + 1), otherwise NULL */
	uint8_t *owned[3];    /* canonical, codes, starts where made here */
};

/* How a corpus is declared to be read. */
struct symbol_rules {
	enum symbol_kind kind;
	size_t record_bytes; /* records = N bytes */
	bool record_lines;   /* records = lines */
	size_t record_count; /* records = N in all: told, not found */
};

/*
 * Maps the bytes of a file, which must outlive the sequence. On failure why
 * says which byte and what would be right: STATUS_BAD_INPUT (a length that is
 * no multiple of the width, bytes outside the alphabet, invalid UTF-8, no
 * symbols at all), STATUS_BAD_USAGE (fixed records of a kind whose symbols have
 * no fixed width, or two sorts of records), STATUS_NO_MEMORY.
 */
MUST_USE enum status sequence_init(struct sequence *sequence,
				   struct slice bytes,
				   const struct symbol_rules *rules,
				   struct reason *why);
void sequence_release(struct sequence *sequence);

/* Canonical byte offset at which symbol i begins (a bit: its byte); i <= n. */
size_t sequence_byte_of(const struct sequence *sequence, size_t i);

/*
 * Cuts into m = 100 x 2^j <= 3200 blocks, as even as symbol, byte and fixed
 * record boundaries allow, none empty; each at least 4 KiB where the length
 * allows, 100 blocks on shorter files. Below CUTS_SYMBOLS_MIN symbols, or 100
 * fixed records, there are none.
 */
#define CUTS_SYMBOLS_MIN 6400
#define CUTS_BLOCKS_MAX 3200

struct cuts {
	size_t blocks;  /* m; 0: too short for intervals */
	size_t *symbol; /* owned; m + 1 symbol positions from 0 to n */
	size_t *byte; /* owned; m + 1 canonical byte positions, 0 to the end */
};

/* A sequence too short yields STATUS_OK with blocks 0. */
MUST_USE enum status cuts_init(struct cuts *cuts,
			       const struct sequence *sequence);
void cuts_release(struct cuts *cuts);

#endif
