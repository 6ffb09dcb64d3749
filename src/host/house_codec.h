/* The contract of a codec that comes as a shared object. */
#ifndef RATEFLOOR_HOUSE_CODEC_H
#define RATEFLOOR_HOUSE_CODEC_H

/*
 * A set file names the object:
 *
 *     [codec house]
 *     library = ./house.so
 *     levels = 1 9
 *
 * It is C (or has C's names) and exports one function, ratefloor_codec, that
 * hands out a table of what it can do:
 *
 *     #include <ratefloor/house_codec.h>
 *     static const struct ratefloor_codec codec = {
 *             .abi = RATEFLOOR_CODEC_ABI,
 *             .version = "house 2.1",
 *             .compress = house_compress,
 *             .decompress = house_decompress,
 *     };
 *     const struct ratefloor_codec *ratefloor_codec(void) { return &codec; }
 *
 *     cc -shared -fPIC -O2 -I/usr/local/include house.c -o house.so
 *
 * It is loaded into a process of its own, with limits on memory, CPU, wall time
 * and file sizes, in a private folder that is removed afterwards. One process
 * only compresses, another compresses the same again, a third decompresses:
 * what one call leaves in memory never helps a call of another sort. Calls come
 * one at a time from one thread; each page of a page layout is a call. Standard
 * input is empty; standard output and standard error are kept as the words
 * that go with a failure.
 */

#include <stddef.h>
#include <stdint.h>

/* Rises when the table changes; an object of another number is refused. */
#define RATEFLOOR_CODEC_ABI 1

/* What compress and decompress return; any other value is an own error. */
enum ratefloor_result {
	RATEFLOOR_DONE = 0,
	RATEFLOOR_FULL = 1 /* more bytes are needed than out has room for */
};

struct ratefloor_codec {
	uint32_t abi;        /* RATEFLOOR_CODEC_ABI */
	const char *version; /* for messages; NULL: none */
	/*
	 * Codes in[0 .. in_bytes - 1] as one stream that decompress alone gives
	 * back. level is the word of the set file, "" where it names none. On
	 * entry *out_bytes is the room at out; on RATEFLOOR_DONE the bytes
	 * written. Never write past the room: the page after it is not there.
	 * in_bytes may be 0. in and out do not overlap and are good only until
	 * the return. The same input and level must give the same bytes.
	 */
	int (*compress)(const char *level, const uint8_t *in, size_t in_bytes,
			uint8_t *out, size_t *out_bytes);
	/* Likewise; the room is what the input was, and one byte. */
	int (*decompress)(const uint8_t *in, size_t in_bytes, uint8_t *out,
			  size_t *out_bytes);
	/* Words for an own error; NULL: the number is shown. */
	const char *(*words)(int result);
};

/* The one name to export. NULL or another abi: the object is refused. */
const struct ratefloor_codec *ratefloor_codec(void);

#endif
