/* What a call that can fail returns, and the words that go with a failure. */
#ifndef BASE_STATUS_H
#define BASE_STATUS_H

#include <stdarg.h>

/*
 * STATUS_OK is 0. Everything else is a refusal or a failure; outputs of the
 * call that returned it are unchanged.
 */
enum status {
	STATUS_OK = 0,
	STATUS_NO_MEMORY, /* the heap, or a stated limit, said no */
	STATUS_TOO_SHORT, /* too few symbols: a normal answer */
	STATUS_BAD_INPUT, /* content that breaks its declared kind */
	STATUS_BAD_USAGE, /* an option, key, name or level that is wrong */
	STATUS_NOT_FOUND, /* a file, row or name that is not there */
	STATUS_IO,        /* reading or writing failed */
	STATUS_MISMATCH,  /* bytes or digests differ from what they must be */
	STATUS_CODEC,     /* a codec's own library reported an error */
	STATUS_LEDGER,    /* the ledger cannot be used */
	STATUS_CANCELLED, /* stopped on request; what was done is kept */
	STATUS_COUNT
};

#define MUST_USE __attribute__((warn_unused_result))

/* Returns early with any status but STATUS_OK; only where nothing is held. */
#define TRY(call)                                \
	do {                                     \
		enum status try_status = (call); \
		if (try_status != STATUS_OK)     \
			return try_status;       \
	} while (0)

#define REASON_BYTES 1024

/* What was wrong, where, and what would be right; empty when nothing was. */
struct reason {
	char text[REASON_BYTES];
};

/* One or two plain words for a status: "out of memory". Never NULL. */
const char *status_words(enum status status);

/*
 * Writes a printf-style message to why (NULL: nowhere) and returns status, so
 * that a failure is one line: return reason_give(why, STATUS_IO, "…", …).
 * Longer messages are cut at REASON_BYTES - 1.
 */
enum status reason_give(struct reason *why, enum status status,
			const char *format, ...)
	__attribute__((format(printf, 3, 4)));

/* Puts a prefix before the words already in why: "file:line: " and so on. */
void reason_prefix(struct reason *why, const char *format, ...)
	__attribute__((format(printf, 2, 3)));

#endif
