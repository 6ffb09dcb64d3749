/* What is known before a byte: the bytes before it, and nothing else. */
#ifndef PREDICT_PAST_H
#define PREDICT_PAST_H

#include "predict/plan.h"

#include "base/status.h"

#define CONTEXTS_MAX 30
#define FIELDS_MAX 32
#define SELECTORS 2
/* Weight sets by partial byte, by match and bit, by the family: so many each.
 */
#define SET_ROWS 256

/* How a match stands: 0 none; up to MATCH_LANE - 1 by length. */
#define MATCH_STEPS 32

/* Everything the predictor asks of the past before a byte. */
struct view {
	uint32_t hash[CONTEXTS_MAX];
	/* What is coded is the byte less this; so are those expected. */
	uint8_t base;
	uint8_t expected[2];   /* what two matches go on with */
	uint8_t match_step[2]; /* 0: there is no match */
	uint8_t hits; /* contexts seen before; counted as they are looked up */
	uint8_t last; /* the byte before */
	bool lane;    /* code whether expected[0] comes, before its bits */
	/* rows of the family's weight set, and of the deep one's; below 256 */
	uint16_t select[SELECTORS];
};

/* The longest earlier context that agrees with the last bytes. */
struct match {
	uint32_t *table; /* owned; position after a hashed context */
	unsigned shift;  /* 32 - log2 of its entries */
	unsigned least;  /* bytes of the hashed context */
	size_t at;       /* position expected to repeat; 0: none */
	uint32_t length; /* bytes that agreed */
	uint32_t misses; /* since the match was found */
};

/* Rests of the last records: bytes less their bases. */
#define RESTS 256

#define LINES_KEPT 3
#define FORECAST_MAX 24
#define FORECASTS 2

/* The field under way, as the numbers in the two lines before go on. */
struct forecast {
	unsigned length; /* 0: none */
	bool holds;      /* so far the field is as forecast */
	uint8_t text[FORECAST_MAX];
};

struct past {
	struct predict_plan plan;
	const uint8_t *bytes; /* borrowed; the first at are read, no more */
	size_t at;
	uint64_t last8; /* the last eight bytes, latest lowest */
	uint64_t before8;
	uint32_t word, word1, word2; /* hash of this word and those before */
	size_t line, line_before;    /* where this line and that before begin */
	uint32_t line_hash;
	uint32_t first; /* first byte that is no blank, and indent */
	/* this line, that before, and that before it */
	size_t field_start[LINES_KEPT][FIELDS_MAX + 1];
	unsigned fields[LINES_KEPT]; /* begun in each */
	struct forecast forecast[FORECASTS];
	uint32_t field_hash, field_hash1;
	uint8_t rest[RESTS]; /* by position modulo RESTS */
	int carry;           /* into the next byte: -1, 0, 1 */
	struct match match[2];
	uint32_t lane_length; /* of a match that makes a lane */
};

MUST_USE enum status past_init(struct past *past,
			       const struct predict_plan *plan);
void past_release(struct past *past);
/* Starts afresh before bytes, of which none is known yet. */
void past_restart(struct past *past, const uint8_t *bytes);
/* Takes the byte at bytes[at] into account. */
void past_push(struct past *past);
void past_look(const struct past *past, struct view *view);
/* Contexts that the plan has. */
unsigned past_contexts(const struct predict_plan *plan);

/* The entry of match i that past_push will set for the byte at bytes[at]. */
size_t past_match_entry(const struct past *past, unsigned i);

/* Warms the cache for a push of the byte at position; changes nothing. */
void past_warm(const struct past *past, const uint8_t *bytes, size_t position);

#endif
