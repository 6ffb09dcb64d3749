#include "predict/past.h"

#include "predict/contexts.h"

#include "base/memory.h"

#include <string.h>

/*
 * Matches this long have their next byte coded in one decision: quick, and
 * the costlier the shorter they are.
 */
#define LANE_LENGTH 20
#define LANE_LENGTH_BINARY 24
#define LANE_LENGTH_DEEP 40
#define LANE_MORE_WIDE 8
/* A match shorter than this gives way to a longer one. */
#define FIRM_LENGTH 16
#define MISSES_MAX 8
/* Agreement is counted backwards no further than this when found. */
#define VERIFY_MAX 32

static MUST_USE enum status match_init(struct match *match, size_t bytes,
				       unsigned least)
{
	unsigned bits = 10;

	while (bits < 22 && ((size_t)1 << bits) < bytes)
		bits++;
	*match = (struct match){.shift = 32 - bits, .least = least};
	return memory_new_zeroed((size_t)1 << bits, sizeof(*match->table),
				 &match->table);
}

enum status past_init(struct past *past, const struct predict_plan *plan)
{
	bool text = plan->family <= FAMILY_LINES;

	*past = (struct past){.plan = *plan};
	TRY(match_init(&past->match[0], plan->bytes, text ? 6 : 5));
	if (plan->strength == STRENGTH_NIGHTLY)
		return STATUS_OK;
	if (match_init(&past->match[1], plan->bytes, 16) == STATUS_OK)
		return STATUS_OK;
	past_release(past);
	return STATUS_NO_MEMORY;
}

void past_release(struct past *past)
{
	memory_free(past->match[0].table);
	memory_free(past->match[1].table);
	*past = (struct past){0};
}

static void match_restart(struct match *match)
{
	if (!match->table)
		return;
	memset(match->table, 0,
	       ((size_t)1 << (32 - match->shift)) * sizeof(*match->table));
	match->at = 0;
	match->length = match->misses = 0;
}

static uint32_t lane_length(const struct predict_plan *plan)
{
	if (plan->strength == STRENGTH_DEEP)
		return LANE_LENGTH_DEEP;
	return plan->family == FAMILY_BINARY ? LANE_LENGTH_BINARY : LANE_LENGTH;
}

void past_restart(struct past *past, const uint8_t *bytes)
{
	struct past fresh = {.plan = past->plan,
			     .bytes = bytes,
			     .lane_length = lane_length(&past->plan)};

	match_restart(&past->match[0]);
	match_restart(&past->match[1]);
	fresh.match[0] = past->match[0];
	fresh.match[1] = past->match[1];
	*past = fresh;
}

/* Where a context of the last bytes (latest lowest) is looked up. */
static size_t match_entry(const struct match *match, uint64_t last8,
			  uint64_t before8)
{
	uint64_t context;

	if (match->least > 8) {
		context = (last8 ^ last8 >> 31) * UINT64_C(0x9fb21c651e98df25);
		context += before8 << (128 - 8 * match->least);
	} else {
		context = last8 << (64 - 8 * match->least);
	}
	context ^= context >> 29;
	return (size_t)(context * UINT64_C(0xd6e8feb86659fd93) >>
			(32 + match->shift));
}

/* How many bytes before a and before b agree; b is the later one. */
static uint32_t agreement(const uint8_t *bytes, size_t a, size_t b)
{
	uint32_t length = 0;

	while (length < VERIFY_MAX && length < a &&
	       bytes[a - 1 - length] == bytes[b - 1 - length])
		length++;
	return length;
}

/* Follows the match over the byte just taken in, or finds another. */
static void match_push(struct match *match, const uint8_t *bytes, size_t at,
		       uint64_t last8, uint64_t before8)
{
	uint32_t *entry;

	if (match->at) {
		if (bytes[match->at] == bytes[at - 1]) {
			match->length++;
			if (match->length >= FIRM_LENGTH)
				match->misses = 0;
		} else {
			match->length = 0;
			match->misses++;
		}
		match->at = match->misses < MISSES_MAX ? match->at + 1 : 0;
	}
	if (at < match->least)
		return;
	entry = &match->table[match_entry(match, last8, before8)];
	if ((!match->at || match->length < FIRM_LENGTH) && *entry) {
		uint32_t length = agreement(bytes, *entry, at);

		if (length >= match->least &&
		    (!match->at || length > match->length)) {
			match->at = *entry;
			match->length = length;
			match->misses = 0;
		}
	}
	*entry = (uint32_t)at;
}

/* Length, and whether it lately failed, in MATCH_STEPS steps. */
static uint8_t match_step(const struct match *match)
{
	uint32_t length = match->length;
	unsigned log2;

	if (!match->at)
		return 0;
	if (match->misses)
		return (uint8_t)(28 + (length > 1) + (length > 7));
	if (length < 16)
		return (uint8_t)(length ? length : 1);
	if (length < 32)
		return (uint8_t)(16 + (length - 16) / 4);
	log2 = 31 - (unsigned)__builtin_clz(length);
	return (uint8_t)(log2 > 12 ? 27 : 15 + log2);
}

static void push_word(struct past *past, unsigned c)
{
	if (is_word_byte(c)) {
		unsigned folded = c >= 'A' && c <= 'Z' ? c + 32 : c;

		past->word = (past->word + folded + 1) * UINT32_C(0x2c9277b5);
		return;
	}
	if (!past->word)
		return;
	past->word2 = past->word1;
	past->word1 = past->word;
	past->word = 0;
}

static void begin_line(struct past *past)
{
	unsigned fields = past->fields[0];

	memmove(past->field_start[1], past->field_start[0],
		(LINES_KEPT - 1) * sizeof(past->field_start[0]));
	past->fields[2] = past->fields[1];
	past->fields[1] = fields;
	past->fields[0] = 0;
	past->field_start[0][0] = past->at;
	past->line_before = past->line;
	past->line = past->at;
	past->first = 0;
	past->line_hash = 0;
	past->field_hash = past->field_hash1 = 0;
	forecast_begin(past);
}

static void push_line(struct past *past, unsigned c)
{
	if (c == '\n') {
		begin_line(past);
		return;
	}
	if (c != ' ' && c != '\t' && !(past->first & 255)) {
		uint32_t indent = (uint32_t)(past->at - past->line);

		past->first = indent << 8 | c;
	}
	past->line_hash = (past->line_hash + c + 1) * UINT32_C(0x2c9277b5);
	forecast_push(past, c);
	if (!is_field_end(c)) {
		past->field_hash =
			(past->field_hash + c + 1) * UINT32_C(0x2c9277b5);
		return;
	}
	if (past->fields[0] + 1 < FIELDS_MAX)
		past->field_start[0][++past->fields[0]] = past->at;
	past->field_hash1 = past->field_hash;
	past->field_hash = 0;
	forecast_begin(past);
}

void past_push(struct past *past)
{
	unsigned c = past->bytes[past->at];

	if (past->plan.family == FAMILY_FIELDS)
		fields_push(past, (uint8_t)c);
	past->at++;
	past->before8 = past->before8 << 8 | past->last8 >> 56;
	past->last8 = past->last8 << 8 | c;
	if (past->plan.family <= FAMILY_BINARY ||
	    past->plan.strength == STRENGTH_DEEP)
		push_word(past, c);
	if (past->plan.family <= FAMILY_LINES)
		push_line(past, c);
	match_push(&past->match[0], past->bytes, past->at, past->last8,
		   past->before8);
	if (past->match[1].table)
		match_push(&past->match[1], past->bytes, past->at, past->last8,
			   past->before8);
}

/* Letters of two bytes and more say less a byte, so a lane wants more. */
static uint32_t lane_least(const struct past *past)
{
	bool wide =
		past->plan.family <= FAMILY_LINES && (past->last8 & 0x80808080);

	return past->lane_length + (wide ? LANE_MORE_WIDE : 0);
}

void past_look(const struct past *past, struct view *view)
{
	const struct match *match = past->match;

	view->base = past->plan.family == FAMILY_FIELDS ? fields_base(past) : 0;
	for (unsigned i = 0; i < 2; i++) {
		uint8_t next = match[i].at ? past->bytes[match[i].at] : 0;

		view->match_step[i] = match_step(&match[i]);
		view->expected[i] = (uint8_t)(next - view->base);
	}
	view->hits = 0;
	view->last = (uint8_t)past->last8;
	view->lane = match[0].at && match[0].length >= lane_least(past);
	contexts_look(past, view);
}

size_t past_match_entry(const struct past *past, unsigned i)
{
	return match_entry(&past->match[i],
			   past->last8 << 8 | past->bytes[past->at],
			   past->before8 << 8 | past->last8 >> 56);
}

void past_warm(const struct past *past, const uint8_t *bytes, size_t position)
{
	const struct match *match = past->match;
	uint64_t last8 = 0;

	if (position < 8)
		return;
	for (unsigned i = 0; i < 8; i++)
		last8 = last8 << 8 | bytes[position - 8 + i];
	__builtin_prefetch(&match->table[match_entry(match, last8, 0)], 1);
}

/* More where each tells something new; even numbers, taken two by two. */
unsigned past_contexts(const struct predict_plan *plan)
{
	static const unsigned counts[FAMILY_COUNT][2] = {
		[FAMILY_PROSE] = {12, 28},  [FAMILY_LINES] = {10, 28},
		[FAMILY_BINARY] = {10, 28}, [FAMILY_RECORDS] = {8, 28},
		[FAMILY_FIELDS] = {8, 8},   [FAMILY_IMAGE] = {8, 14},
		[FAMILY_FLAT] = {2, 2},
	};

	return counts[plan->family][plan->strength == STRENGTH_DEEP];
}
