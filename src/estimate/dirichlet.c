#include "estimate/dirichlet_code.h"
#include "estimate/rows.h"

#include "base/memory.h"

#include <assert.h>
#include <stdio.h>

/* What a decoder is told first: an order, and one of two alphabets. */
#define CHOICES (DIRICHLET_ORDERS * ALPHABET_CHOICES)

/*
 * What naming the alphabet costs: nothing for that of the kind; the number of
 * symbols seen, 1 to A, and which they are.
 */
static MUST_USE enum status alphabet_bits(const struct sequence *sequence,
					  wide_int bits_q32[ALPHABET_CHOICES])
{
	TRY(subset_bits_q32(sequence->alphabet, sequence->distinct,
			    &bits_q32[ALPHABET_SEEN]));
	bits_q32[ALPHABET_SEEN] += (wide_int)log2_q32(sequence->alphabet);
	bits_q32[ALPHABET_OF_KIND] = 0;
	return STATUS_OK;
}

struct choice {
	unsigned order;
	enum dirichlet_alphabet alphabet;
};

static enum dirichlet_alphabet
cheaper(const wide_int total_q32[ALPHABET_CHOICES])
{
	return total_q32[ALPHABET_SEEN] < total_q32[ALPHABET_OF_KIND]
		       ? ALPHABET_SEEN
		       : ALPHABET_OF_KIND;
}

/* Adds the alphabets to the totals; the least of all, the lower order first. */
static struct choice choose(struct dirichlet_sums *sums,
			    const wide_int alphabet_q32[ALPHABET_CHOICES],
			    struct findings *findings)
{
	struct choice best = {0, ALPHABET_OF_KIND};

	for (unsigned order = 0; order < DIRICHLET_ORDERS; order++) {
		wide_int *total = sums->total_q32[order];
		char key[sizeof(findings->notes[0].key)];
		struct choice here = {order, ALPHABET_OF_KIND};

		for (unsigned a = 0; a < ALPHABET_CHOICES; a++)
			total[a] += alphabet_q32[a];
		here.alphabet = cheaper(total);
		snprintf(key, sizeof(key), "order%u_q16", order);
		findings_note(findings, key,
			      q16_from_q32(total[here.alphabet]));
		if (total[here.alphabet] <
			    sums->total_q32[best.order][best.alphabet] ||
		    order == 0)
			best = here;
	}
	return best;
}

/* The charge for the choice and the alphabet goes to the first block. */
static MUST_USE enum status fill_costs(const struct dirichlet_sums *sums,
				       struct choice choice,
				       wide_int alphabet_q32,
				       struct series *series)
{
	wide_int charge_q32 = (wide_int)log2_q32(CHOICES);
	wide_int total = sums->total_q32[choice.order][choice.alphabet];

	series->order = choice.order;
	TRY(costs_init(&series->costs, sums->blocks));
	if (sums->blocks) {
		int64_t *block =
			dirichlet_blocks(sums, choice.order, choice.alphabet);

		block[0] += (int64_t)(charge_q32 + alphabet_q32);
		costs_set_q32(&series->costs, block);
	}
	series->costs.headline_q16 = q16_from_q32(total + charge_q32);
	return STATUS_OK;
}

static MUST_USE enum status fill(struct dirichlet_sums *sums,
				 const struct sequence *sequence,
				 struct findings *findings)
{
	wide_int alphabet_q32[ALPHABET_CHOICES];
	struct findings made;
	struct choice choice;

	TRY(alphabet_bits(sequence, alphabet_q32));
	TRY(findings_init(&made, 1, 0));
	choice = choose(sums, alphabet_q32, &made);
	if (fill_costs(sums, choice, alphabet_q32[choice.alphabet],
		       &made.series[0]) != STATUS_OK) {
		findings_release(&made);
		return STATUS_NO_MEMORY;
	}
	findings_note(&made, "alphabet_seen", choice.alphabet == ALPHABET_SEEN);
	*findings = made;
	return STATUS_OK;
}

static enum status dirichlet_measure(const struct estimate_input *input,
				     struct findings *findings,
				     struct reason *why)
{
	const struct sequence *sequence = input->sequence;
	struct dirichlet_input coded = {
		.sequence = sequence,
		.cuts = input->cuts,
		.page_bytes = input->page_bytes,
		.alphabet = {sequence->alphabet, sequence->distinct},
	};
	struct dirichlet_sums sums;
	enum status status;

	assert(sequence->distinct >= 1);
	assert(sequence->distinct <= sequence->alphabet);
	status = dirichlet_code(&coded, &sums);
	if (status == STATUS_OK) {
		status = fill(&sums, sequence, findings);
		dirichlet_sums_release(&sums);
	}
	if (status != STATUS_OK)
		return reason_give(why, status,
				   "out of memory: counting the contexts of "
				   "%zu symbols needs about %zu bytes",
				   sequence->n, sequence->n * 24);
	return STATUS_OK;
}

const struct estimator estimator_dirichlet = {
	.name = "dirichlet",
	.summary = "sequential Dirichlet(1/A) code, best of orders 0 to 5",
	.source = "Krichevsky and Trofimov 1981; Willems, Shtarkov, Tjalkens "
		  "1995",
	.leans = LEANS_ABOVE,
	.is_code = true,
	.work = 0.4,
	.measure = dirichlet_measure,
};
