/* What reviews look at beside the contexts of every night. */
#include "predict/contexts.h"

static uint64_t pair(uint64_t a, uint64_t b)
{
	return (a + 1) * UINT64_C(0x9fb21c651e98df25) + b;
}

static void add(struct view *view, unsigned *n, uint64_t value)
{
	view->hash[*n] = context_hash(*n, value);
	(*n)++;
}

/* The match that the last context is about; the steps before it are known. */
static uint64_t expectation(const struct view *view, unsigned i)
{
	return view->expected[i] * 32U + view->match_step[i];
}

unsigned contexts_deep_text(const struct past *past, struct view *view,
			    unsigned n)
{
	uint64_t last = past->last8, c1 = last & 255;
	unsigned field = past->fields[0];

	add(view, &n, last_bytes(past, 7));
	add(view, &n, pair(last, past->before8 & 0xffff));
	add(view, &n, pair(last, past->before8 & 0xffffffff));
	add(view, &n, pair(last, past->before8));
	add(view, &n, last & 0xff00ffff);
	add(view, &n, last & 0xffff00);
	add(view, &n, last & 0xffff0000);
	add(view, &n, last & 0xdfdfdfdfdf);
	add(view, &n, pair(past->word1, past->word) ^ past->word2 << 7);
	add(view, &n, pair(past->word1, c1));
	add(view, &n, pair(past->word, last & 0xffff));
	add(view, &n, pair(past->first, past->word) + c1);
	if (past->plan.family == FAMILY_LINES) {
		unsigned next = forecast_byte(past, 0);

		add(view, &n, last_bytes(past, 4));
		add(view, &n, pair(past->at - past->line, c1));
		add(view, &n, pair(field * 1024 + next, field_above(past)));
	} else {
		add(view, &n, pair(column_above(past), c1));
		add(view, &n, pair(past->at - past->line, past->word));
	}
	add(view, &n, pair(field * 512 + field_above(past), last & 0xffff));
	add(view, &n, pair(expectation(view, 0), c1));
	return n;
}

unsigned contexts_deep_bytes(const struct past *past, struct view *view,
			     unsigned n)
{
	uint64_t last = past->last8, c1 = last & 255;
	uint64_t stride = past->plan.stride, phase = past->at % stride;
	uint64_t up = byte_before(past, stride);
	uint64_t up2 = byte_before(past, 2 * stride);
	uint64_t quarter = past->at & 3;

	add(view, &n, last_bytes(past, 5));
	add(view, &n, last);
	add(view, &n, pair(last, past->before8 & 0xffffffff));
	add(view, &n, last_bytes(past, 4) << 8 | quarter);
	add(view, &n, (last & 0xff0000ff) << 8 | quarter);
	add(view, &n, (last & 0xffff0000) << 8 | quarter);
	add(view, &n, last & 0xff00ff00);
	add(view, &n, pair(last & UINT64_C(0xffff00000000), c1));
	add(view, &n, pair(expectation(view, 0), c1));
	add(view, &n, pair(expectation(view, 1), last & 0xffff));
	add(view, &n, pair(up << 8 | up2, c1));
	add(view, &n, pair(up << 8 | phase, last & 0xffff));
	add(view, &n, pair(past->word, past->word1));
	add(view, &n, pair(byte_before(past, 12), last & 0xff000000ff));
	add(view, &n, (last & UINT64_C(0xfcfcfcfcfcfcfcfc)) | quarter);
	return n;
}
