#include "estimate/ngram_counts.h"

#include "base/memory.h"

enum status gram_tally_init(struct gram_tally *tally,
			    const struct count_logs *logs, unsigned orders)
{
	struct gram_tally made = {
		.logs = logs, .orders = orders, .stride = orders + 2};

	for (int set = 0; set < COUNT_SETS; set++) {
		if (memory_new_zeroed(COUNT_LOGS_TABLED * made.stride,
				      sizeof(uint32_t),
				      &made.rare[set]) != STATUS_OK ||
		    memory_new_zeroed(made.stride, sizeof(struct frequent),
				      &made.frequent[set]) != STATUS_OK) {
			gram_tally_release(&made);
			return STATUS_NO_MEMORY;
		}
	}
	*tally = made;
	return STATUS_OK;
}

void gram_tally_release(struct gram_tally *tally)
{
	for (int set = 0; set < COUNT_SETS; set++) {
		memory_free(tally->rare[set]);
		memory_free(tally->frequent[set]);
	}
	*tally = (struct gram_tally){0};
}

static void shift(struct frequent *to, const struct frequent *by, int sign)
{
	to->distinct += sign * by->distinct;
	to->plain_q32 += sign * by->plain_q32;
	to->psi_q56 += sign * by->psi_q56;
	to->grassberger_q56 += sign * by->grassberger_q56;
}

/* times grams, seen count times each. */
static struct frequent weigh(const struct count_logs *logs, uint64_t count,
			     int64_t times)
{
	wide_int weight = (wide_int)count * times;
	struct frequent sums = {
		.distinct = times,
		.plain_q32 = weight * logs->plain_q32,
		.psi_q56 = weight * logs->psi_q56,
		.grassberger_q56 = weight * logs->grassberger_q56,
	};

	return sums;
}

void gram_tally_add_frequent(struct gram_tally *tally, enum count_set set,
			     uint64_t count, unsigned above, unsigned deepest)
{
	struct count_logs logs = count_logs_large(count);
	struct frequent one = weigh(&logs, count, 1);

	shift(&tally->frequent[set][above + 1], &one, 1);
	shift(&tally->frequent[set][deepest + 1], &one, -1);
}

void gram_tally_add_once(struct gram_tally *tally, enum count_set set,
			 uint64_t times, unsigned above)
{
	uint32_t *row = tally->rare[set] + tally->stride;

	row[above + 1] += (uint32_t)times;
	row[tally->orders + 1] -= (uint32_t)times;
}

static int64_t q16_from_q56(wide_int q56)
{
	const wide_int half = (wide_int)1 << 39;

	if (q56 < 0)
		return -(int64_t)((-q56 + half) >> 40);
	return (int64_t)((q56 + half) >> 40);
}

/* Turns the differences at order k into the values themselves. */
static void step_to_order(struct gram_tally *tally, enum count_set set,
			  unsigned k)
{
	struct frequent *frequent = tally->frequent[set];

	for (size_t c = 1; c < COUNT_LOGS_TABLED; c++) {
		uint32_t *row = tally->rare[set] + c * tally->stride;

		row[k] += row[k - 1];
	}
	shift(&frequent[k], &frequent[k - 1], 1);
}

static struct frequent total_at_order(const struct gram_tally *tally,
				      enum count_set set, unsigned k)
{
	struct frequent sums = tally->frequent[set][k];

	for (size_t c = 1; c < COUNT_LOGS_TABLED; c++) {
		int64_t times = tally->rare[set][c * tally->stride + k];

		if (times) {
			struct frequent part = weigh(&tally->logs[c], c, times);

			shift(&sums, &part, 1);
		}
	}
	return sums;
}

static wide_int evaluate(struct gram_tally *tally, enum count_set set,
			 unsigned k, struct gram_counts *counts)
{
	const uint32_t *rare = tally->rare[set];
	struct frequent sums;

	step_to_order(tally, set, k);
	sums = total_at_order(tally, set, k);
	counts->distinct = (uint64_t)sums.distinct;
	counts->once = rare[tally->stride + k];
	counts->twice = rare[2 * tally->stride + k];
	counts->plugin_q16 = q16_from_q32(sums.plain_q32);
	counts->psi_q16 = q16_from_q56(sums.psi_q56);
	counts->grassberger_q16 = q16_from_q56(sums.grassberger_q56);
	return sums.plain_q32;
}

void gram_tally_evaluate(struct gram_tally *tally, size_t n,
			 struct order_counts *orders, wide_int *plugin_q32)
{
	for (unsigned k = 1; k <= tally->orders; k++) {
		struct order_counts *at = &orders[k - 1];

		at->order = k;
		at->all.positions = n;
		at->half[0].positions = n / 2;
		at->half[1].positions = n - n / 2;
		plugin_q32[k - 1] = evaluate(tally, COUNT_ALL, k, &at->all);
		evaluate(tally, COUNT_FIRST_HALF, k, &at->half[0]);
		evaluate(tally, COUNT_SECOND_HALF, k, &at->half[1]);
	}
}
