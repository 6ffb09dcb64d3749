#include "predict/contexts.h"

/* Two values in one. */
static uint64_t pair(uint64_t a, uint64_t b)
{
	return (a + 1) * UINT64_C(0x9fb21c651e98df25) + b;
}

static void add(struct view *view, unsigned *n, uint64_t value)
{
	view->hash[*n] = context_hash(*n, value);
	(*n)++;
}

/* Orders 1 to most, 6 and 8, shared by both families of text. */
static unsigned look_orders(const struct past *past, struct view *view,
			    unsigned most)
{
	unsigned n = 0;

	for (unsigned order = 1; order <= most; order++)
		add(view, &n, last_bytes(past, order));
	add(view, &n, last_bytes(past, 6));
	add(view, &n, past->last8);
	return n;
}

unsigned contexts_prose(const struct past *past, struct view *view)
{
	unsigned n = look_orders(past, view, 5);
	unsigned c1 = past->last8 & 255;

	add(view, &n, pair(past->word, c1));
	add(view, &n, pair(past->word, past->word1) + c1);
	add(view, &n, pair(pair(past->word, past->word1), past->word2) + c1);
	if (past->last8 & 0x80808080) {
		/* Letters of two bytes and more want twice the order. */
		view->hash[4] = context_hash(
			4, pair(past->last8, past->before8 & 0xffff));
		add(view, &n, pair(past->last8, past->before8 & 0xffffffff));
		add(view, &n,
		    pair(view->expected[0] * 32U + view->match_step[0], c1));
	} else {
		add(view, &n, pair(past->word, past->word2) + c1);
		/* Where a line is likely to end. */
		add(view, &n, pair(past->at - past->line, c1));
	}
	view->select[0] = (uint16_t)c1;
	/* The second half of a letter: the letter before says more. */
	if (c1 >= 0xc0 && c1 < 0xe0) {
		view->select[0] = 0xc0 | (past->last8 >> 8 & 63);
		view->last = (uint8_t)view->select[0];
	}
	if (past->plan.strength == STRENGTH_NIGHTLY)
		return n;
	return contexts_deep_text(past, view, n);
}

unsigned field_above(const struct past *past)
{
	unsigned field = past->fields[0];
	size_t from, offset = past->at - past->field_start[0][field];

	if (field > past->fields[1] || past->line == 0)
		return 256;
	from = past->field_start[1][field] + offset;
	if (from >= past->line)
		return 257;
	return past->bytes[from];
}

unsigned column_above(const struct past *past)
{
	size_t from = past->line_before + (past->at - past->line);

	return from < past->line ? past->bytes[from] : 256;
}

unsigned contexts_lines(const struct past *past, struct view *view)
{
	unsigned n = look_orders(past, view, 4);
	unsigned c1 = past->last8 & 255;
	unsigned field = past->fields[0], above = field_above(past), kind;
	uint64_t in_field = pair(past->field_hash, field);
	uint64_t forecasts = pair(
		forecast_byte(past, 0) * 1024U + forecast_byte(past, 1), field);

	/* In the place of order 4, which lanes ask as well. */
	view->hash[3] = context_hash(3, pair(forecasts, above));

	add(view, &n, pair(past->word, c1));
	add(view, &n, pair(column_above(past), last_bytes(past, 2)));
	add(view, &n, in_field);
	add(view, &n, pair(in_field, past->field_hash1));
	add(view, &n, pair(field * 512 + above, c1));
	kind = c1 >= '0' && c1 <= '9' ? 1 : 0;
	kind += above == c1 ? 2 : 0;
	view->select[0] = (uint16_t)((field * 8 + kind) % SET_ROWS);
	if (past->plan.strength == STRENGTH_NIGHTLY)
		return n;
	return contexts_deep_text(past, view, n);
}
