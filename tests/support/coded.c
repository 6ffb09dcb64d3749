#include "support/coded.h"

#include "estimate/estimator.h"
#include "suffix/suffix.h"
#include "support/near.h"

struct sequence coded_sequence(const uint8_t *codes, size_t n,
			       uint64_t alphabet)
{
	struct sequence sequence = {
		.kind = SYMBOL_BYTE,
		.canonical = codes,
		.canonical_bytes = n,
		.n = n,
		.codes = codes,
		.code_width = 1,
		.code_count = 256,
		.alphabet = alphabet,
	};
	bool seen[256] = {false};

	for (size_t i = 0; i < n; i++) {
		sequence.distinct += !seen[codes[i]];
		seen[codes[i]] = true;
	}
	return sequence;
}

struct findings coded_findings(struct coded_run run,
			       const struct sequence *sequence)
{
	static const struct cuts none = {.blocks = 0};
	const struct estimator *row = estimator_find(run.row);
	struct suffix suffix = {.n = 0};
	struct estimate_input input = {
		.sequence = sequence,
		.cuts = run.cuts ? run.cuts : &none,
		.orders = run.orders ? run.orders : 1,
		.page_bytes = run.page_bytes,
		.threads = 1,
	};
	struct reason why = {""};
	struct findings findings = {0};
	enum status status = STATUS_OK;

	assert_non_null(row);
	if (row->needs_suffix) {
		status = suffix_init(&suffix, sequence, input.orders, &why);
		input.suffix = &suffix;
	}
	if (status == STATUS_OK)
		status = row->measure(&input, &findings, &why);
	suffix_release(&suffix);
	if (status != STATUS_OK)
		fail_msg("%s: %s", run.row, why.text);
	return findings;
}

double coded_dirichlet(const struct sequence *sequence, size_t page_bytes,
		       unsigned context_symbols,
		       enum dirichlet_alphabet alphabet)
{
	wide_int sum_q32[DIRICHLET_ALPHABETS] = {0};
	struct dirichlet_codes codes;
	struct gram_chain chain;
	bool full;

	assert_int_equal(dirichlet_codes_init(&codes, sequence), STATUS_OK);
	assert_int_equal(
		gram_chain_init(&chain, sequence, page_bytes, GRAM_SLOTS_MAX),
		STATUS_OK);
	for (unsigned i = 0; i <= context_symbols; i++) {
		assert_int_equal(gram_chain_lengthen(&chain, &full), STATUS_OK);
		assert_false(full);
	}
	dirichlet_codes_add(&codes, &chain, 0, sequence->n, sum_q32);
	gram_chain_release(&chain);
	dirichlet_codes_release(&codes);
	return (double)sum_q32[alphabet] * 0x1p-32;
}
