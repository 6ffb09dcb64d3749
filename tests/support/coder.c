#include "support/coder.h"

#include "support/near.h"

#include <string.h>

/* The interval is low..high, both included. */
struct interval {
	uint64_t low, high;
};

/* Last number of the part that stands for a 1 of probability p16. */
static uint64_t split(const struct interval *at, unsigned p16)
{
	uint64_t range = at->high - at->low;

	return at->low + (range >> 16) * p16 + (((range & 0xffff) * p16) >> 16);
}

static void narrow(struct interval *at, unsigned p16, unsigned decision)
{
	uint64_t middle = split(at, p16);

	if (decision)
		at->high = middle;
	else
		at->low = middle + 1;
}

/* True while the first byte is settled. */
static bool settled(const struct interval *at)
{
	return (at->low ^ at->high) >> 56 == 0;
}

static void shift(struct interval *at)
{
	at->low <<= 8;
	at->high = at->high << 8 | 255;
}

static void put(struct buffer *out, uint64_t number)
{
	uint8_t byte = (uint8_t)(number >> 56);

	assert_int_equal(buffer_add(out, &byte, 1), 0);
}

void coder_encode(const struct coded_model *model, const uint8_t *bytes,
		  size_t count, struct buffer *out)
{
	struct interval at = {0, UINT64_MAX};

	model->restart(model->self, bytes);
	for (size_t i = 0; i < count; i++) {
		bool done = false;
		uint8_t byte;

		while (!done) {
			unsigned p16 = model->probability(model->self);
			unsigned decision =
				model->decision(model->self, bytes[i]);

			assert_in_range(p16, 1, 65535);
			narrow(&at, p16, decision);
			done = model->update(model->self, decision, &byte);
			for (; settled(&at); shift(&at))
				put(out, at.high);
		}
		assert_int_equal(byte, bytes[i]);
	}
	/* Enough of a number inside the interval to tell it apart. */
	put(out, at.high);
	at.high <<= 8;
	put(out, at.high);
}

void coder_decode(const struct coded_model *model, const struct buffer *code,
		  uint8_t *bytes, size_t count)
{
	struct interval at = {0, UINT64_MAX};
	uint64_t number = 0;
	size_t next = 0;

	memset(bytes, 0xa5, count);
	for (; next < 8; next++)
		number = number << 8 |
			 (next < code->length ? code->bytes[next] : 0);
	model->restart(model->self, bytes);
	for (size_t i = 0; i < count;) {
		unsigned p16 = model->probability(model->self);
		unsigned decision = number <= split(&at, p16);
		uint8_t byte;

		narrow(&at, p16, decision);
		if (model->update(model->self, decision, &byte))
			bytes[i++] = byte;
		for (; settled(&at); shift(&at), next++)
			number = number << 8 |
				 (next < code->length ? code->bytes[next] : 0);
	}
}
