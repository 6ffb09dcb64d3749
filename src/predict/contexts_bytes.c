#include "predict/contexts.h"

static void add(struct view *view, unsigned *n, uint64_t value)
{
	view->hash[*n] = context_hash(*n, value);
	(*n)++;
}

unsigned contexts_binary(const struct past *past, struct view *view)
{
	uint64_t last = past->last8;
	unsigned n = 0, phase = (unsigned)past->at & 3;

	for (unsigned order = 1; order <= 4; order++)
		add(view, &n, last_bytes(past, order));
	add(view, &n, last_bytes(past, 6));
	add(view, &n, last & 0xff00);
	add(view, &n, last & 0xffff00);
	add(view, &n, last & 0xff0000);
	add(view, &n, (last & 0xff000000) << 8 | phase);
	add(view, &n, (last & 0xf0f0f0ff) << 8 | phase);
	add(view, &n, (last & 0xff000000ff000000) | phase);
	add(view, &n, (last & UINT64_C(0xf8f8f8f8ff)) << 8 | phase);
	add(view, &n, past->word);
	view->select[0] = (uint16_t)(last & 255);
	if (past->plan.strength == STRENGTH_DEEP)
		return contexts_deep_bytes(past, view, n);
	return n;
}

/* The byte that stands n records before the next one. */
static unsigned above(const struct past *past, unsigned n)
{
	return byte_before(past, (size_t)n * past->plan.stride);
}

unsigned contexts_records(const struct past *past, struct view *view)
{
	unsigned stride = past->plan.stride, n = 0;
	uint64_t phase = past->at % stride;
	uint64_t last1 = past->last8 & 255;
	uint64_t up = above(past, 1), up2 = above(past, 2);
	uint64_t up_left = byte_before(past, (size_t)stride + 1);
	uint64_t risen = (last1 - up_left) & 255;

	view->select[0] = (uint16_t)(phase & 255);
	add(view, &n, last_bytes(past, 1));
	add(view, &n, last_bytes(past, 2));
	add(view, &n, last_bytes(past, 3));
	add(view, &n, phase << 16 | last_bytes(past, 2));
	add(view, &n, phase << 16 | up << 8 | up2);
	add(view, &n, phase << 16 | up << 8 | last1);
	add(view, &n, phase << 8 | last1);
	add(view, &n, phase << 24 | up << 16 | last1 << 8 | up_left);
	if (past->plan.strength == STRENGTH_NIGHTLY)
		return n;
	add(view, &n, phase);
	add(view, &n, phase << 16 | up << 8 | risen);
	add(view, &n, phase << 8 | up);
	add(view, &n, last_bytes(past, 4));
	add(view, &n, last_bytes(past, 6));
	return contexts_deep_bytes(past, view, n);
}

unsigned contexts_image(const struct past *past, struct view *view)
{
	int w = (int)byte_before(past, 1), n = (int)above(past, 1);
	int nw = (int)byte_before(past, (size_t)past->plan.stride + 1);
	int ne = (int)byte_before(past, (size_t)past->plan.stride - 1);
	int ww = (int)byte_before(past, 2), nn = (int)above(past, 2);
	int slope = w + n - nw;
	uint64_t column = past->at % past->plan.stride;
	unsigned k = 0;

	slope = slope < 0 ? 0 : slope > 255 ? 255 : slope;
	view->select[0] = (uint16_t)((slope >> 3) << 3 | (w > n) << 2 |
				     (n > nw) << 1 | (w > nw));
	add(view, &k, (uint64_t)(n << 8 | ne));
	add(view, &k, (uint64_t)(slope << 8 | (w + ne) >> 1));
	add(view, &k, (uint64_t)(w << 8 | ww));
	add(view, &k, (uint64_t)(n << 8 | nn));
	add(view, &k, (uint64_t)slope);
	add(view, &k,
	    (uint64_t)((w >> 3) << 20 | (n >> 3) << 15 | (nw >> 3) << 10 |
		       (ww >> 3) << 5 | nn >> 3));
	add(view, &k, (uint64_t)(2 * w - ww + 512));
	add(view, &k, (uint64_t)(2 * n - nn + 512) << 8 | (uint64_t)w >> 2);
	if (past->plan.strength == STRENGTH_NIGHTLY)
		return k;
	add(view, &k, (uint64_t)(w << 8 | n));
	add(view, &k, (uint64_t)(w << 8 | nw));
	add(view, &k, (uint64_t)((w + n) >> 1) << 16 | column);
	add(view, &k,
	    (uint64_t)((w >> 2) << 18 | (n >> 2) << 12 | (nw >> 2) << 6 |
		       ne >> 2));
	add(view, &k,
	    (uint64_t)((w + n + nw + ne) >> 2) << 8 |
		    (uint64_t)((w - nw + n - ne + 1024) >> 2));
	return k;
}

/* By the high bits of the last three bytes, or by how forecasts stand. */
static void select_deep(const struct past *past, struct view *view)
{
	uint64_t last = past->last8;
	unsigned high = (unsigned)((last >> 5 & 7) | (last >> 10 & 0x38) |
				   (last >> 15 & 0xc0));

	if (past->plan.family == FAMILY_LINES) {
		unsigned a = forecast_byte(past, 0), b = forecast_byte(past, 1);

		high = (high & 7) * 3 + (a > 511 ? 2 : (a & 1));
		high = high * 3 + (b > 511 ? 2 : (b & 1));
		high = high * 2 + (a >> 1 == b >> 1);
	}
	view->select[1] = (uint16_t)high;
}

void contexts_look(const struct past *past, struct view *view)
{
	unsigned n, all = past_contexts(&past->plan);

	switch (past->plan.family) {
	case FAMILY_PROSE:
		n = contexts_prose(past, view);
		break;
	case FAMILY_LINES:
		n = contexts_lines(past, view);
		break;
	case FAMILY_RECORDS:
		n = contexts_records(past, view);
		break;
	case FAMILY_FIELDS:
		n = contexts_fields(past, view);
		break;
	case FAMILY_IMAGE:
		n = contexts_image(past, view);
		break;
	default:
		n = contexts_binary(past, view);
		break;
	}
	if (past->plan.strength == STRENGTH_DEEP)
		select_deep(past, view);
	while (n < all)
		view->hash[n++] = 0;
}
