#include "estimate/ctw_model.h"
#include "estimate/dirichlet_lengths.h"
#include "estimate/pages.h"
#include "estimate/rows.h"

/* Alphabets up to this size keep their symbols; others go byte by byte. */
#define SMALL_MAX 16
/* How a sequence is taken apart. */
struct ctw_plan {
	const uint8_t *symbols; /* those coded, each below alphabet */
	uint8_t *owned;         /* NULL where they are the sequence's own */
	size_t count;
	const size_t *cuts; /* borrowed; NULL: no blocks */
	bool bytes;         /* symbols are the canonical bytes */
	unsigned alphabet, depth;
	wide_int charge_q32; /* for what the sequence was asked */
};

/* Depths are fixed by the alphabet and therefore free. */
static unsigned depth_of(unsigned alphabet)
{
	if (alphabet <= 2)
		return 24;
	if (alphabet <= 4)
		return 12;
	return alphabet <= SMALL_MAX ? 8 : 6;
}

/* Ranks of the codes; those of kinds with a fixed small alphabet are free. */
static MUST_USE enum status plan_small(const struct sequence *sequence,
				       struct ctw_plan *plan)
{
	uint8_t rank[256] = {0};
	unsigned count = 0;

	TRY(memory_new(sequence->n, 1, &plan->owned));
	if (sequence->kind == SYMBOL_NUCLEOTIDE) {
		for (; count < 4; count++)
			rank[(uint8_t) "ACGT"[count]] = (uint8_t)count;
	} else if (sequence->kind == SYMBOL_BIT) {
		rank[1] = 1;
		count = 2;
	} else {
		for (size_t i = 0; i < sequence->n; i++)
			rank[sequence->codes[i]] = 1;
		for (unsigned i = 0; i < 256; i++) {
			if (rank[i])
				rank[i] = (uint8_t)count++;
		}
		plan->charge_q32 += dirichlet_subset_q32(sequence->alphabet,
							 sequence->distinct);
	}
	for (size_t i = 0; i < sequence->n; i++)
		plan->owned[i] = rank[sequence->codes[i]];
	plan->symbols = plan->owned;
	plan->count = sequence->n;
	plan->alphabet = count;
	return STATUS_OK;
}

static MUST_USE enum status plan_init(const struct estimate_input *input,
				      struct ctw_plan *plan)
{
	const struct sequence *sequence = input->sequence;
	bool fixed = sequence->kind == SYMBOL_NUCLEOTIDE ||
		     sequence->kind == SYMBOL_BIT;

	*plan = (struct ctw_plan){.charge_q32 = fixed ? 0 : BIT_Q32};
	if (fixed || sequence->distinct <= SMALL_MAX) {
		TRY(plan_small(sequence, plan));
		plan->cuts = input->cuts->blocks ? input->cuts->symbol : NULL;
	} else {
		plan->bytes = true;
		plan->symbols = sequence->canonical;
		plan->count = sequence->canonical_bytes;
		plan->alphabet = 256;
		plan->cuts = input->cuts->blocks ? input->cuts->byte : NULL;
	}
	plan->depth = depth_of(plan->alphabet);
	return STATUS_OK;
}

static size_t end_of_page(const struct ctw_plan *plan,
			  const struct estimate_input *input, size_t i)
{
	size_t page = input->page_bytes, end;

	if (!plan->bytes)
		return page_end(input->sequence, page, i);
	end = page ? (i / page + 1) * page : plan->count;
	return end < plan->count ? end : plan->count;
}

/* Where a run stands. */
struct ctw_run {
	const struct estimate_input *input;
	const struct ctw_plan *plan;
	struct ctw_model model;
	size_t page_begin, page_end;
	uint64_t nodes; /* the most on one page */
};

/* Codes from one symbol to another, starting afresh at every page. */
static wide_int run_to(struct ctw_run *run, size_t from, size_t to)
{
	struct ctw_tree *tree = &run->model.tree;
	wide_int total = 0;

	while (from < to) {
		size_t end;

		if (from == run->page_end) {
			ctw_tree_restart(tree);
			run->page_begin = from;
			run->page_end =
				end_of_page(run->plan, run->input, from);
		}
		end = run->page_end < to ? run->page_end : to;
		total += ctw_model_measure_q32(&run->model, run->plan->symbols,
					       run->page_begin, from, end);
		if (tree->nodes > run->nodes)
			run->nodes = tree->nodes;
		from = end;
	}
	return total;
}

static void measure_blocks(struct ctw_run *run, struct costs *costs)
{
	const struct ctw_plan *plan = run->plan;
	wide_int total = plan->charge_q32;
	int64_t before = 0;

	for (size_t i = 0; i < costs->blocks; i++) {
		int64_t now;

		total += run_to(run, plan->cuts[i], plan->cuts[i + 1]);
		now = q16_from_q32(total);
		costs->block_q16[i] = now - before;
		before = now;
	}
	if (!costs->blocks)
		total += run_to(run, 0, plan->count);
	costs->headline_q16 = q16_from_q32(total);
}

static MUST_USE enum status measure(struct ctw_run *run,
				    struct findings *findings)
{
	const struct ctw_plan *plan = run->plan;

	TRY(ctw_model_init(&run->model, plan->alphabet, plan->depth,
			   CTW_SLOTS_MAX));
	findings->series[0].order = plan->depth;
	TRY(costs_init(&findings->series[0].costs, run->input->cuts->blocks));
	measure_blocks(run, &findings->series[0].costs);
	if (run->model.tree.exhausted)
		return STATUS_NO_MEMORY;
	findings_note(findings, "alphabet", plan->alphabet);
	findings_note(findings, "charge_q16", q16_from_q32(plan->charge_q32));
	findings_note(findings, "nodes", (int64_t)run->nodes);
	findings_note(findings, "refused", (int64_t)run->model.tree.refused);
	return STATUS_OK;
}

static MUST_USE enum status measure_planned(const struct estimate_input *input,
					    const struct ctw_plan *plan,
					    struct findings *findings)
{
	struct ctw_run run = {.input = input, .plan = plan};
	struct findings made;
	enum status status;

	TRY(findings_init(&made, 1, 0));
	status = measure(&run, &made);
	ctw_model_release(&run.model);
	if (status == STATUS_OK)
		*findings = made;
	else
		findings_release(&made);
	return status;
}

static enum status ctw_measure(const struct estimate_input *input,
			       struct findings *findings, struct reason *why)
{
	struct ctw_plan plan;
	enum status status;

	if (input->sequence->n == 0)
		return reason_give(why, STATUS_TOO_SHORT, "no symbols");
	status = plan_init(input, &plan);
	if (status == STATUS_OK) {
		status = measure_planned(input, &plan, findings);
		memory_free(plan.owned);
	}
	if (status != STATUS_OK)
		return reason_give(why, status,
				   "out of memory: the context trees may take "
				   "up to %zu bytes",
				   CTW_SLOTS_MAX / 2 * 3 *
					   sizeof(struct ctw_slot));
	return STATUS_OK;
}

const struct estimator estimator_ctw = {
	.name = "ctw",
	.summary = "context-tree weighting of binary decisions, contexts of "
		   "symbols or bytes",
	.source = "Willems, Shtarkov, Tjalkens 1995; Tjalkens, Volf, Willems "
		  "1997",
	.leans = LEANS_ABOVE,
	.is_code = true,
	.work = 2,
	.measure = ctw_measure,
};
