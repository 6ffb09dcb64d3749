#include "gap/extrapolation.h"

#include <math.h>
#include <stdarg.h>
#include <stdio.h>

#include "gap/curve_fit.h"

#define POINTS_MOST 16
#define POINTS_LEAST 5
/* The second start: so many points later, eight times as many symbols. */
#define LATER 3

/* Cumulative bits per symbol y after n symbols, the whole last. */
struct learning {
	double n[POINTS_MOST], y[POINTS_MOST];
	size_t count;
};

static void refuse(struct extrapolation_row *row, const char *format, ...)
	__attribute__((format(printf, 2, 3)));

static void refuse(struct extrapolation_row *row, const char *format, ...)
{
	va_list arguments;

	row->known = false;
	va_start(arguments, format);
	(void)vsnprintf(row->reason, sizeof(row->reason), format, arguments);
	va_end(arguments);
}

/* Shortest code row that has bits by block. */
static const struct length *shortest_code(const struct ground *ground,
					  const struct lengths *lengths)
{
	const struct length *best = NULL;

	for (size_t i = 0; i < lengths->count; i++) {
		const struct length *row = &lengths->rows[i];

		if (row->method && !row->page_bytes &&
		    row->contribution.costs->blocks == ground->fact->blocks &&
		    ground->fact->blocks &&
		    (!best || row->contribution.total_bits <
				      best->contribution.total_bits))
			best = row;
	}
	return best;
}

static void point_at(const struct ground *ground, const struct costs *costs,
		     size_t blocks, struct learning *learning)
{
	double symbols = 0;
	int64_t bits = 0;

	for (size_t i = 0; i < blocks; i++) {
		symbols += ground->symbols[i];
		bits += costs->block_q16[i];
	}
	learning->n[learning->count] = symbols;
	learning->y[learning->count] = bits_from_q16(bits) / symbols;
	learning->count++;
}

static void read_curve(const struct ground *ground, const struct costs *costs,
		       struct learning *learning)
{
	size_t blocks = ground->fact->blocks, halvings = 0;

	while (halvings + 1 < POINTS_MOST && blocks >> (halvings + 1))
		halvings++;
	learning->count = 0;
	for (size_t i = halvings + 1; i-- > 0;)
		point_at(ground, costs, blocks >> i, learning);
}

static bool falls(const struct learning *learning)
{
	for (size_t i = 1; i < learning->count; i++) {
		if (learning->y[i] > learning->y[i - 1])
			return false;
	}
	return true;
}

static void widen(struct extrapolation_row *row,
		  const struct learning *learning, size_t start)
{
	size_t count = learning->count - start;
	const double *n = learning->n + start, *y = learning->y + start;

	for (unsigned form = 0; form < CURVE_FORMS; form++) {
		struct curve all =
			curve_fit((enum curve_form)form, n, y, count);
		struct curve early =
			curve_fit((enum curve_form)form, n, y, count - 1);
		double miss =
			fabs(curve_at(&early, n[count - 1]) - y[count - 1]);

		row->low = row->fits ? fmin(row->low, all.h) : all.h;
		row->high = row->fits ? fmax(row->high, all.h) : all.h;
		row->miss = fmax(row->miss, miss);
		row->fits++;
	}
}

void extrapolation_find(const struct ground *ground,
			const struct lengths *lengths,
			struct extrapolation_row *row)
{
	const struct length *code = shortest_code(ground, lengths);
	struct learning learning;

	*row = (struct extrapolation_row){0};
	if (ground->fact->n < EXTRAPOLATION_SYMBOLS_MIN || !code) {
		refuse(row,
		       "%llu symbols; extrapolation needs %d and a code row",
		       (unsigned long long)ground->fact->n,
		       EXTRAPOLATION_SYMBOLS_MIN);
		return;
	}
	length_name(code, row->method, sizeof(row->method));
	read_curve(ground, code->contribution.costs, &learning);
	row->last = learning.y[learning.count - 1];
	if (!falls(&learning) || learning.count < POINTS_LEAST + LATER) {
		refuse(row,
		       "the bits per symbol of %.32s rise on the way: the "
		       "data drifts, or there is nothing to learn",
		       row->method);
		return;
	}
	row->known = true;
	widen(row, &learning, 0);
	widen(row, &learning, LATER);
	if (row->high - row->low > EXTRAPOLATION_SPREAD_MOST * row->last)
		refuse(row,
		       "forms and start points disagree by %.0f%%, over the "
		       "%.0f%% allowed: this length does not settle it",
		       100 * (row->high - row->low) / row->last,
		       100 * EXTRAPOLATION_SPREAD_MOST);
}
