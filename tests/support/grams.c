#define _GNU_SOURCE /* qsort_r */
#include "support/grams.h"

#include "base/random.h"
#include "estimate/estimator.h"
#include "suffix/suffix.h"
#include "support/near.h"

#include <stdlib.h>
#include <string.h>

static int compare_codes(const void *left, const void *right, void *width)
{
	return memcmp(left, right, *(const size_t *)width);
}

static uint32_t count_distinct(const uint8_t *codes, size_t n, size_t width)
{
	uint8_t *sorted = malloc(n * width + 1);
	uint32_t distinct = n > 0;

	memcpy(sorted, codes, n * width);
	qsort_r(sorted, n, width, compare_codes, &width);
	for (size_t i = 1; i < n; i++)
		distinct += memcmp(sorted + (i - 1) * width, sorted + i * width,
				   width) != 0;
	free(sorted);
	return distinct;
}

struct sequence grams_sequence(const uint8_t *codes, size_t n, unsigned width)
{
	uint64_t alphabet = UINT64_C(1) << 8 * width;

	return (struct sequence){
		.canonical = codes,
		.canonical_bytes = n * width,
		.n = n,
		.codes = codes,
		.code_width = width,
		.code_count =
			alphabet > UINT32_MAX ? UINT32_MAX : (uint32_t)alphabet,
		.distinct = count_distinct(codes, n, width),
		.alphabet = alphabet,
	};
}

struct cuts grams_cuts(size_t n, size_t blocks)
{
	struct cuts cuts = {.blocks = blocks};

	cuts.symbol = malloc((blocks + 1) * sizeof(*cuts.symbol));
	for (size_t i = 0; i <= blocks; i++)
		cuts.symbol[i] = n * i / blocks;
	return cuts;
}

/* The circle unrolled as far as the grams reach. */
struct unrolled {
	uint8_t *bytes;
	size_t width, gram_bytes;
};

static struct unrolled unroll(const struct sequence *sequence, unsigned k)
{
	size_t width = sequence->code_width, period = sequence->n * width;
	struct unrolled unrolled = {malloc(period + k * width + 1), width,
				    k * width};

	for (size_t i = 0; i < period + k * width; i++)
		unrolled.bytes[i] = sequence->codes[i % period];
	return unrolled;
}

static int compare(const void *left, const void *right, void *context)
{
	const struct unrolled *unrolled = context;
	size_t a = *(const size_t *)left, b = *(const size_t *)right;

	return memcmp(unrolled->bytes + a * unrolled->width,
		      unrolled->bytes + b * unrolled->width,
		      unrolled->gram_bytes);
}

void grams_count(const struct sequence *sequence, unsigned k, size_t first,
		 size_t last, uint64_t *count)
{
	struct unrolled unrolled = unroll(sequence, k);
	size_t n = sequence->n, end;
	size_t *starts = malloc(n * sizeof(*starts));

	for (size_t i = 0; i < n; i++)
		starts[i] = i;
	qsort_r(starts, n, sizeof(*starts), compare, &unrolled);
	for (size_t i = 0; i < n; i = end) {
		uint64_t inside = 0;

		for (end = i; end < n &&
			      compare(&starts[i], &starts[end], &unrolled) == 0;
		     end++)
			inside += starts[end] >= first && starts[end] < last;
		for (size_t j = i; j < end; j++)
			count[starts[j]] = inside;
	}
	free(starts);
	free(unrolled.bytes);
}

struct findings grams_findings(const struct sequence *sequence, unsigned orders,
			       const struct cuts *cuts)
{
	const struct cuts none = {0};
	struct findings findings;
	struct suffix suffix;
	struct estimate_input input = {.sequence = sequence,
				       .cuts = cuts ? cuts : &none,
				       .suffix = &suffix,
				       .orders = orders,
				       .threads = 1};

	assert_int_equal(suffix_init(&suffix, sequence, orders, NULL),
			 STATUS_OK);
	assert_int_equal(
		estimator_find("ngram")->measure(&input, &findings, NULL),
		STATUS_OK);
	suffix_release(&suffix);
	assert_int_equal(findings.order_count, orders);
	assert_int_equal(findings.series_count, orders);
	return findings;
}

void grams_pseudo_text(uint8_t *bytes, size_t n, uint64_t seed)
{
	struct random_stream random;
	uint8_t words[512][8];

	random_init(&random, seed, random_name("pseudo text"));
	for (size_t w = 0; w < 512; w++) {
		for (size_t i = 0; i < 8; i++)
			words[w][i] =
				(uint8_t)('a' + random_below(&random, 26));
	}
	for (size_t i = 0; i < n;) {
		uint32_t limit = 2 + random_below(&random, 511);
		uint32_t w = random_below(&random, limit);

		for (size_t j = 0; j < 1 + w % 8 && i < n; j++)
			bytes[i++] = words[w][j];
		if (i < n)
			bytes[i++] = random_below(&random, 12) ? ' ' : '\n';
	}
}

void grams_fibonacci(uint8_t *bytes, size_t n)
{
	size_t length = 2, shorter = 1;

	/* f_{j+1} = f_j f_{j-1}, from 01 and 0. */
	bytes[0] = 0;
	if (n > 1)
		bytes[1] = 1;
	while (length < n) {
		size_t more = shorter < n - length ? shorter : n - length;

		memcpy(bytes + length, bytes, more);
		shorter = length;
		length += more;
	}
}

void grams_thue_morse(uint8_t *bytes, size_t n)
{
	for (size_t i = 0; i < n; i++)
		bytes[i] = (uint8_t)(__builtin_popcountll(i) & 1);
}

/* Prefer one: append 1 unless that repeats a k-gram (Martin 1934). */
void grams_de_bruijn(uint8_t *bytes, unsigned k)
{
	size_t count = (size_t)1 << k, gram = 0;
	uint8_t *seen = calloc(count, 1);

	/* The word starts after k zeros, and those end it cyclically. */
	seen[0] = 1;
	for (size_t i = 0; i < count; i++) {
		size_t with_one = (gram << 1 | 1) & (count - 1);

		bytes[i] = !seen[with_one];
		gram = bytes[i] ? with_one : with_one & ~(size_t)1;
		seen[gram] = 1;
	}
	free(seen);
}
