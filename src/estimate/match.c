#include "estimate/rows.h"
#include "suffix/previous.h"

#include <assert.h>

/*
 * Conventions. Position i counts from 1 and its past is i - 1 symbols; L_i is
 * one more than the longest match that begins in the past and may run into the
 * present (overlap allowed), and its yardstick is log2 i, from i = 2 on.
 * Matches near the end are cut short by it: positions from the first whose
 * match reaches the end are left out, but never more than the second half.
 * Averages are over the positions up to the last one kept; bits are n times
 * the average.
 */
#define SYMBOLS_MIN 4

static size_t positions_kept(const uint32_t *longest, size_t n)
{
	size_t kept = n / 2;

	while (kept < n && longest[kept] < n - kept)
		kept++;
	return kept;
}

struct match_sums {
	wide_uint inverse_q32; /* sum of log2 i / L_i */
	wide_uint ratio_q32;   /* sum of L_i / log2 i */
	uint64_t length;       /* sum of L_i */
};

static struct match_sums add_up(const uint32_t *longest, size_t kept)
{
	struct match_sums sums = {0};

	for (size_t i = 2; i <= kept; i++) {
		uint64_t length = (uint64_t)longest[i - 1] + 1;
		uint64_t log_q32 = log2_q32(i);

		sums.inverse_q32 += (log_q32 + length / 2) / length;
		sums.ratio_q32 += ((wide_uint)length << 64) / log_q32;
		sums.length += length;
	}
	return sums;
}

/*
 * Sum of L over the longest hundredth (at least one) of positions 2 … kept;
 * times is n + 1 zeros.
 */
static uint64_t longest_hundredth(const uint32_t *longest, size_t kept,
				  uint32_t *times)
{
	size_t left = (kept - 1 + 99) / 100;
	uint64_t sum = 0, length = 0;

	for (size_t i = 1; i < kept; i++) {
		times[longest[i]]++;
		if (longest[i] > length)
			length = longest[i];
	}
	for (length++; left; length--) {
		size_t taken = times[length - 1];

		taken = taken < left ? taken : left;
		sum += taken * length;
		left -= taken;
	}
	return sum;
}

static int64_t ratio_bits_q16(const struct match_sums *sums, size_t n,
			      size_t kept)
{
	wide_uint symbols = (wide_uint)n * kept;

	return (int64_t)(((symbols << 48) + sums->ratio_q32 / 2) /
			 sums->ratio_q32);
}

static MUST_USE enum status fill(const uint32_t *longest, size_t n,
				 struct findings *findings)
{
	size_t kept = positions_kept(longest, n);
	struct match_sums sums = add_up(longest, kept);
	uint32_t *times;
	uint64_t top;

	TRY(memory_new_zeroed(n + 1, sizeof(*times), &times));
	top = longest_hundredth(longest, kept, times);
	memory_free(times);
	TRY(findings_init(findings, 1, 0));
	findings->series[0].costs.headline_q16 =
		q16_from_q32((wide_int)(sums.inverse_q32 * n / kept));
	findings_note(findings, "ratio_q16", ratio_bits_q16(&sums, n, kept));
	findings_note(findings, "top1_share_ppm",
		      (int64_t)((wide_uint)top * 1000000 / sums.length));
	findings_note(findings, "positions", (int64_t)kept);
	return STATUS_OK;
}

static enum status match_measure(const struct estimate_input *input,
				 struct findings *findings, struct reason *why)
{
	size_t n = input->sequence->n;
	uint32_t *longest;
	enum status status;

	assert(input->suffix);
	if (n < SYMBOLS_MIN)
		return reason_give(why, STATUS_TOO_SHORT,
				   "%zu symbols; match lengths need %d", n,
				   SYMBOLS_MIN);
	status = suffix_previous(input->suffix, &longest);
	if (status == STATUS_OK) {
		status = fill(longest, n, findings);
		memory_free(longest);
	}
	if (status != STATUS_OK)
		return reason_give(why, status,
				   "out of memory: match lengths of %zu "
				   "symbols need about %zu bytes",
				   n, n * 12);
	return STATUS_OK;
}

const struct estimator estimator_match = {
	.name = "match",
	.summary = "longest matches: averaged log over length, and ratio form",
	.source = "Grassberger 1989; Kontoyiannis, Algoet, Suhov, Wyner 1998; "
		  "Gao, Kontoyiannis, Bienenstock 2008",
	.leans = LEANS_UNKNOWN,
	.needs_suffix = true,
	.work = 0.3,
	.measure = match_measure,
};
