/*
 * Records of numbers: a byte is coded less the one above it, and where it
 * continues a little-endian number, less the carry of the byte to its left as
 * well. A walk or a counter of 16 or 32 bits then has the same few rests
 * wherever it stands.
 */
#include "predict/contexts.h"

#include "base/log2.h"

#include <string.h>

/* Records that columns are judged by. */
#define JUDGED 16384

/*
 * What the next byte of the number gets from this one: byte is above + carry +
 * a small difference, which went past the end of the byte, or did not. Where
 * the difference is not small, carry is off by a constant, which is as good.
 */
static int carry_of(uint8_t byte, uint8_t above)
{
	int difference = (int8_t)(byte - above);

	if (difference >= 0)
		return byte < above ? 1 : 0;
	return byte > above ? -1 : 0;
}

static uint8_t base_of(enum column_base how, uint8_t above, int carry)
{
	if (how == COLUMN_PLAIN)
		return 0;
	return (uint8_t)(how == COLUMN_CARRY ? above + carry : above);
}

uint8_t fields_base(const struct past *past)
{
	unsigned stride = past->plan.stride;

	if (past->at < stride)
		return 0;
	return base_of(past->plan.column[past->at % stride],
		       past->bytes[past->at - stride], past->carry);
}

void fields_push(struct past *past, uint8_t byte)
{
	unsigned stride = past->plan.stride;

	past->rest[past->at % RESTS] = (uint8_t)(byte - fields_base(past));
	past->carry = 0;
	if (past->at >= stride)
		past->carry = carry_of(byte, past->bytes[past->at - stride]);
}

static uint64_t rest_before(const struct past *past, size_t n)
{
	return n - 1 < past->at ? past->rest[(past->at - n) % RESTS] : 0;
}

static void add(struct view *view, unsigned *n, unsigned phase, uint64_t value)
{
	view->hash[*n] = context_hash(*n, value << 8 | phase);
	(*n)++;
}

unsigned contexts_fields(const struct past *past, struct view *view)
{
	unsigned stride = past->plan.stride, n = 0;
	unsigned phase = (unsigned)(past->at % stride);
	uint64_t up = rest_before(past, stride);
	uint64_t up2 = rest_before(past, 2 * (size_t)stride);
	uint64_t left = rest_before(past, 1), left2 = rest_before(past, 2);
	uint64_t above = byte_before(past, stride);

	view->last = (uint8_t)phase;
	view->select[0] = (uint16_t)phase;
	add(view, &n, phase, 0);
	add(view, &n, phase, left);
	add(view, &n, phase, up);
	add(view, &n, phase, above);
	add(view, &n, phase, left << 8 | left2);
	add(view, &n, phase, past->last8 & 255);
	add(view, &n, phase, up << 8 | up2);
	add(view, &n, phase, above << 8 | left);
	return n;
}

/* Bits in Q32 that counts cost by their own entropy. */
static uint64_t entropy_q32(const uint32_t counts[256])
{
	uint64_t total = 0, bits = 0;

	for (unsigned i = 0; i < 256; i++)
		total += counts[i];
	for (unsigned i = 0; i < 256; i++) {
		if (counts[i])
			bits += counts[i] *
				(log2_q32(total) - log2_q32(counts[i]));
	}
	return bits;
}

static enum column_base judge(const uint8_t *bytes, size_t count,
			      unsigned stride, unsigned phase)
{
	uint32_t counts[COLUMN_BASES][256] = {{0}};
	enum column_base best = COLUMN_PLAIN;
	uint64_t least = UINT64_MAX;

	for (size_t at = stride + phase, i = 0; at < count && i < JUDGED;
	     at += stride, i++) {
		uint8_t above = bytes[at - stride];
		int carry = 0;

		if (at > stride)
			carry = carry_of(bytes[at - 1], bytes[at - 1 - stride]);
		for (unsigned how = 0; how < COLUMN_BASES; how++)
			counts[how][(uint8_t)(bytes[at] -
					      base_of(how, above, carry))]++;
	}
	for (unsigned how = 0; how < COLUMN_BASES; how++) {
		uint64_t bits = entropy_q32(counts[how]);

		/* Only for a gain of 2%: contexts do the rest. */
		if (bits < least / 50 * 49) {
			least = bits;
			best = how;
		}
	}
	return best;
}

void fields_choose(struct predict_plan *plan, const uint8_t *bytes,
		   size_t count)
{
	for (unsigned phase = 0; phase < plan->stride; phase++)
		plan->column[phase] =
			(uint8_t)judge(bytes, count, plan->stride, phase);
}
