/*
 * Do real corpora map to the symbols they are known to have? They are fetched
 * by scripts/fetch-corpora; those that are not there are passed over.
 */
#include "symbols/sequence.h"

#include "support/fetched.h"
#include "support/near.h"
#include "support/symbols_of.h"

#include <math.h>
#include <stdio.h>

#define CORPUS_BYTES_MAX 10000000

/* Bytes of a fetched corpus; length 0 where it is not there. */
static struct slice corpus_read(const char *name)
{
	struct fetched file = fetched_read(name, CORPUS_BYTES_MAX);

	return (struct slice){file.bytes, file.length};
}

/* Entropy of grams of one or two codes of one byte, cyclic, in bits. */
static double entropy_of(const struct sequence *sequence, unsigned order)
{
	static size_t counts[65536];
	double bits = 0, n = (double)sequence->n;

	for (size_t i = 0; i < 65536; i++)
		counts[i] = 0;
	for (size_t i = 0; i < sequence->n; i++) {
		size_t next = i + 1 == sequence->n ? 0 : i + 1;
		size_t gram = sequence->codes[i];

		counts[order == 2 ? gram * 256 + sequence->codes[next]
				  : gram]++;
	}
	for (size_t i = 0; i < 65536; i++) {
		double p = (double)counts[i] / n;

		if (counts[i])
			bits -= p * log2(p);
	}
	return bits;
}

/*
 * Symbols, and entropy of one, measured with another program on the same
 * bytes (digests in scripts/fetch-corpora).
 */
static const struct {
	const char *name;
	enum symbol_kind kind;
	size_t symbols;
	double entropy;
} known[] = {
	{"classic_alice29.txt", SYMBOL_BYTE, 152089, 4.5677},
	{"classic_plrabn12.txt", SYMBOL_BYTE, 481861, 4.5314},
	{"ecoli_mg1655.seq", SYMBOL_NUCLEOTIDE, 4639675, 1.9998},
	{"moby_dick.txt", SYMBOL_LETTERS27, 1148977, 4.0910},
	{"pi_100k.txt", SYMBOL_BYTE, 100003, 3.3222},
};

static void counts_agree(void **state)
{
	(void)state;
	for (size_t i = 0; i < sizeof(known) / sizeof(known[0]); i++) {
		struct slice bytes = corpus_read(known[i].name);
		struct sequence sequence;

		if (!bytes.length)
			continue;
		sequence = sequence_of(bytes, known[i].kind);
		assert_int_equal(sequence.n, known[i].symbols);
		assert_near(entropy_of(&sequence, 1), known[i].entropy, 5.1e-5);
		/* The same measurement at two letters: 2 x 3.7032. */
		if (sequence.kind == SYMBOL_LETTERS27)
			assert_near(entropy_of(&sequence, 2), 7.4064, 1.1e-4);
		sequence_release(&sequence);
		memory_free((void *)(uintptr_t)bytes.bytes);
	}
}

/* Counted by Python 3.11: len and set of bytes.split() and bytes.decode(). */
static void texts_are_split_alike(void **state)
{
	static const struct {
		const char *name;
		size_t points, distinct_points, words, distinct_words;
	} texts[] = {
		{"dasher_russian_RU.txt", 324726, 164, 42509, 21371},
		{"classic_alice29.txt", 152089, 74, 26458, 5312},
		{"king_james.txt", 4404412, 73, 820736, 59958},
	};

	(void)state;
	for (size_t i = 0; i < sizeof(texts) / sizeof(texts[0]); i++) {
		struct slice bytes = corpus_read(texts[i].name);
		struct sequence sequence;

		if (!bytes.length)
			continue;
		sequence = sequence_of(bytes, SYMBOL_CODEPOINT);
		assert_int_equal(sequence.n, texts[i].points);
		assert_int_equal(sequence.distinct, texts[i].distinct_points);
		sequence_release(&sequence);
		sequence = sequence_of(bytes, SYMBOL_WORD);
		assert_int_equal(sequence.n, texts[i].words);
		assert_int_equal(sequence.distinct, texts[i].distinct_words);
		sequence_release(&sequence);
		memory_free((void *)(uintptr_t)bytes.bytes);
	}
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(counts_agree),
		cmocka_unit_test(texts_are_split_alike),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
