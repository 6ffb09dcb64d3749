#include "estimate/dirichlet_lengths.h"
#include "estimate/rows.h"

#include <assert.h>
#include <stdio.h>
#include <string.h>

/* One of so many ways to code is named first: log2(12) in 2^-16, rounded up. */
#define WAYS (DIRICHLET_ORDERS * DIRICHLET_ALPHABETS)
#define WAY_Q32 ((wide_int)234945 << 16)

/* What one measurement holds. */
struct dirichlet {
	struct gram_chain chain;
	struct dirichlet_codes codes;
	wide_int charge_q32[DIRICHLET_ALPHABETS];
	size_t parts; /* blocks, or 1 for the whole */
	/* Owned; bits by part, of one order and of the best way so far. */
	wide_int *sum_q32[DIRICHLET_ALPHABETS];
	wide_int *best_q32;
	wide_int best_total_q32;
	unsigned best_order;
	enum dirichlet_alphabet best_alphabet;
	int64_t order_q16[DIRICHLET_ORDERS];
	unsigned orders; /* measured */
};

static void dirichlet_release(struct dirichlet *held)
{
	gram_chain_release(&held->chain);
	dirichlet_codes_release(&held->codes);
	for (int i = 0; i < DIRICHLET_ALPHABETS; i++)
		memory_free(held->sum_q32[i]);
	memory_free(held->best_q32);
}

static MUST_USE enum status dirichlet_init(struct dirichlet *held,
					   const struct estimate_input *input)
{
	const struct sequence *sequence = input->sequence;

	held->parts = input->cuts->blocks ? input->cuts->blocks : 1;
	held->charge_q32[ALPHABET_OF_KIND] = WAY_Q32;
	held->charge_q32[ALPHABET_SEEN] =
		WAY_Q32 +
		dirichlet_subset_q32(sequence->alphabet, sequence->distinct);
	for (int i = 0; i < DIRICHLET_ALPHABETS; i++)
		TRY(memory_new(held->parts, sizeof(wide_int),
			       &held->sum_q32[i]));
	TRY(memory_new(held->parts, sizeof(wide_int), &held->best_q32));
	TRY(dirichlet_codes_init(&held->codes, sequence));
	return gram_chain_init(&held->chain, sequence, input->page_bytes,
			       GRAM_SLOTS_MAX);
}

/* Keeps the sums of one alphabet if they are the fewest so far. */
static void compare(struct dirichlet *held, enum dirichlet_alphabet alphabet)
{
	wide_int *sum_q32 = held->sum_q32[alphabet], total = 0;
	unsigned order = held->orders;
	int64_t total_q16;

	sum_q32[0] += held->charge_q32[alphabet];
	for (size_t i = 0; i < held->parts; i++)
		total += sum_q32[i];
	total_q16 = q16_from_q32(total);
	if (alphabet == 0 || total_q16 < held->order_q16[order])
		held->order_q16[order] = total_q16;
	if (order + (unsigned)alphabet > 0 && total >= held->best_total_q32)
		return;
	held->best_total_q32 = total;
	held->best_order = order;
	held->best_alphabet = alphabet;
	held->sum_q32[alphabet] = held->best_q32;
	held->best_q32 = sum_q32;
}

static void add_order(struct dirichlet *held, const struct cuts *cuts)
{
	size_t n = held->chain.sequence->n;

	for (size_t i = 0; i < held->parts; i++) {
		wide_int sum_q32[DIRICHLET_ALPHABETS] = {0};

		dirichlet_codes_add(&held->codes, &held->chain,
				    cuts->blocks ? cuts->symbol[i] : 0,
				    cuts->blocks ? cuts->symbol[i + 1] : n,
				    sum_q32);
		for (int j = 0; j < DIRICHLET_ALPHABETS; j++)
			held->sum_q32[j][i] = sum_q32[j];
	}
	for (int j = 0; j < DIRICHLET_ALPHABETS; j++)
		compare(held, (enum dirichlet_alphabet)j);
	held->orders++;
}

static MUST_USE enum status add_orders(struct dirichlet *held,
				       const struct estimate_input *input)
{
	while (held->orders < DIRICHLET_ORDERS) {
		bool full;

		TRY(gram_chain_lengthen(&held->chain, &full));
		if (full)
			return STATUS_OK;
		add_order(held, input->cuts);
	}
	return STATUS_OK;
}

/* Rounds the running total at every cut, so that the blocks add up. */
static void set_costs(const struct dirichlet *held, struct costs *costs)
{
	wide_int running = 0;
	int64_t before = 0;

	for (size_t i = 0; i < costs->blocks; i++) {
		int64_t now;

		running += held->best_q32[i];
		now = q16_from_q32(running);
		costs->block_q16[i] = now - before;
		before = now;
	}
	costs->headline_q16 = q16_from_q32(held->best_total_q32);
}

static void take_notes(const struct dirichlet *held, struct findings *findings)
{
	findings_note(findings, "alphabet",
		      (int64_t)held->codes.code[held->best_alphabet].alphabet);
	findings_note(findings, "charge_q16",
		      q16_from_q32(held->charge_q32[held->best_alphabet]));
	findings_note(findings, "orders", held->orders);
	for (unsigned i = 0; i < held->orders; i++) {
		char key[] = "order0_q16";

		key[5] = (char)('0' + i);
		findings_note(findings, key, held->order_q16[i]);
	}
}

static MUST_USE enum status measure(struct dirichlet *held,
				    const struct estimate_input *input,
				    struct findings *findings)
{
	struct findings made;
	enum status status;

	TRY(dirichlet_init(held, input));
	TRY(add_orders(held, input));
	TRY(findings_init(&made, 1, 0));
	made.series[0].order = held->best_order;
	status = costs_init(&made.series[0].costs, input->cuts->blocks);
	if (status != STATUS_OK) {
		findings_release(&made);
		return status;
	}
	set_costs(held, &made.series[0].costs);
	take_notes(held, &made);
	*findings = made;
	return STATUS_OK;
}

static enum status dirichlet_measure(const struct estimate_input *input,
				     struct findings *findings,
				     struct reason *why)
{
	size_t n = input->sequence->n;
	struct dirichlet held = {.parts = 0};
	enum status status;

	if (n == 0)
		return reason_give(why, STATUS_TOO_SHORT, "no symbols");
	if (n > UINT32_MAX)
		return reason_give(why, STATUS_NO_MEMORY,
				   "%zu symbols are too many: counts hold at "
				   "most 4294967295",
				   n);
	status = measure(&held, input, findings);
	dirichlet_release(&held);
	if (status != STATUS_OK)
		return reason_give(why, status,
				   "out of memory: coding %zu symbols by their "
				   "contexts needs up to %zu bytes",
				   n,
				   n * 12 + GRAM_SLOTS_MAX * 3 / 2 *
						    sizeof(struct gram_slot));
	return STATUS_OK;
}

const struct estimator estimator_dirichlet = {
	.name = "dirichlet",
	.summary = "sequential Dirichlet(1/A) code, the best of contexts of 0 "
		   "to 5 symbols",
	.source = "Krichevsky, Trofimov 1981; Rissanen 1984",
	.leans = LEANS_ABOVE,
	.is_code = true,
	.work = 0.2,
	.measure = dirichlet_measure,
};
