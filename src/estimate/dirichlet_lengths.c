#include "estimate/dirichlet_lengths.h"

/* Counts with a logarithm at hand: tables that stay in the nearest caches. */
#define TABLED 2048

static MUST_USE enum status tabulate(uint64_t factor, uint64_t **table)
{
	TRY(memory_new(TABLED, sizeof(**table), table));
	for (uint64_t c = 0; c < TABLED; c++)
		(*table)[c] = log2_q32(factor * c + 1);
	return STATUS_OK;
}

enum status dirichlet_codes_init(struct dirichlet_codes *codes,
				 const struct sequence *sequence)
{
	struct dirichlet_codes made = {
		.code = {{.alphabet = sequence->alphabet},
			 {.alphabet = sequence->distinct}},
	};
	enum status status = quick_log2_new(&made.logs);

	if (status == STATUS_OK)
		status = tabulate(1, &made.context_q32);

	for (int i = 0; i < DIRICHLET_ALPHABETS && status == STATUS_OK; i++) {
		struct dirichlet_code *code = &made.code[i];

		code->alphabet_q32 = log2_q32(code->alphabet);
		status = tabulate(code->alphabet, &code->letter_q32);
	}
	if (status == STATUS_OK)
		*codes = made;
	else
		dirichlet_codes_release(&made);
	return status;
}

void dirichlet_codes_release(struct dirichlet_codes *codes)
{
	for (int i = 0; i < DIRICHLET_ALPHABETS; i++)
		memory_free(codes->code[i].letter_q32);
	memory_free(codes->context_q32);
	memory_free(codes->logs);
	*codes = (struct dirichlet_codes){0};
}

/* Bits of the symbols first … last - 1 at one alphabet. */
static wide_int add_up(const struct dirichlet_codes *codes,
		       const struct dirichlet_code *code,
		       const struct gram_chain *chain, size_t first,
		       size_t last)
{
	const struct quick_log2 *logs = codes->logs;
	wide_int sum = 0;

	for (size_t t = first; t < last; t++) {
		uint64_t s = chain->context[t], sx = chain->times[t];
		uint64_t bits = code->alphabet_q32;

		bits += s < TABLED ? codes->context_q32[s]
				   : quick_log2_q32(logs, s + 1);
		bits -= sx < TABLED
				? code->letter_q32[sx]
				: quick_log2_q32(logs, code->alphabet * sx + 1);
		sum += (int64_t)bits;
	}
	return sum;
}

void dirichlet_codes_add(const struct dirichlet_codes *codes,
			 const struct gram_chain *chain, size_t first,
			 size_t last, wide_int sum_q32[DIRICHLET_ALPHABETS])
{
	for (int i = 0; i < DIRICHLET_ALPHABETS; i++)
		sum_q32[i] +=
			add_up(codes, &codes->code[i], chain, first, last);
}

wide_int dirichlet_subset_q32(uint64_t alphabet, uint64_t seen)
{
	uint64_t chosen = seen < alphabet - seen ? seen : alphabet - seen;
	wide_int sum_q32 = (wide_int)log2_q32(alphabet);
	const wide_int unit = (wide_int)1 << 16;

	for (uint64_t i = 0; i < chosen; i++)
		sum_q32 += (wide_int)log2_q32(alphabet - i) -
			   (wide_int)log2_q32(i + 1);
	return (sum_q32 + unit - 1) / unit * unit;
}
