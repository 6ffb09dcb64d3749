#include "support/tiny_survey.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

#include "base/memory.h"
#include "base/random.h"
#include "support/near.h"

static void sure(enum status status)
{
	assert_int_equal(status, STATUS_OK);
}

static char *no_text(void)
{
	char *text;

	sure(memory_new_zeroed(1, 1, &text));
	return text;
}

void tiny_survey(struct survey *survey, size_t blocks, uint64_t block_symbols)
{
	struct corpus_fact *fact;

	*survey = (struct survey){.seed = 7, .orders = 4, .corpus_count = 1};
	sure(memory_new_zeroed(1, sizeof(*survey->corpora), &survey->corpora));
	fact = survey->corpora;
	(void)snprintf(fact->name, sizeof(fact->name), "gauge-frames");
	fact->n = blocks ? blocks * block_symbols : block_symbols;
	fact->file_bytes = fact->canonical_bytes = fact->n;
	fact->distinct = fact->alphabet = 256;
	fact->blocks = blocks;
	fact->reason = no_text();
	fact->origin = no_text();
	sure(memory_new(blocks, sizeof(uint64_t), &fact->block_symbols));
	sure(memory_new(blocks, sizeof(uint64_t), &fact->block_bytes));
	for (size_t i = 0; i < blocks; i++)
		fact->block_symbols[i] = fact->block_bytes[i] = block_symbols;
	sure(memory_new_zeroed(TINY_METHODS_MOST, sizeof(*fact->methods),
			       &fact->methods));
	sure(memory_new_zeroed(TINY_CELLS_MOST, sizeof(*fact->cells),
			       &fact->cells));
}

struct method_fact *tiny_method(struct survey *survey, const char *method,
				size_t series_count)
{
	struct corpus_fact *fact = survey->corpora;
	struct method_fact *row = &fact->methods[fact->method_count++];

	assert_true(fact->method_count <= TINY_METHODS_MOST);
	(void)snprintf(row->method, sizeof(row->method), "%s", method);
	row->reason = no_text();
	sure(findings_init(&row->findings, series_count, 0));
	return row;
}

static void scatter_costs(const struct corpus_fact *fact, struct costs *costs,
			  double bits_per_symbol, double scatter, uint64_t seed)
{
	struct random_stream random;

	random_init(&random, seed, 1);
	sure(costs_init(costs, fact->blocks));
	for (size_t i = 0; i < fact->blocks; i++) {
		double factor = 1 + scatter * (2 * random_unit(&random) - 1);

		costs->block_q16[i] = llround((double)fact->block_symbols[i] *
					      bits_per_symbol * factor * 65536);
	}
	costs->headline_q16 = costs_block_total(costs);
	if (!fact->blocks)
		costs->headline_q16 =
			llround((double)fact->n * bits_per_symbol * 65536);
}

void tiny_series(const struct survey *survey, struct series *series,
		 double bits_per_symbol, double scatter, uint64_t seed)
{
	scatter_costs(survey->corpora, &series->costs, bits_per_symbol, scatter,
		      seed);
}

/* Every one of 2^bits grams seen N / 2^bits times. */
static struct gram_counts even_counts(uint64_t positions, unsigned bits)
{
	double each = (double)positions / (double)(UINT64_C(1) << bits);
	double n = (double)positions * 65536;

	/* G(c) = ln c and psi(c) = ln c - 1 / 2c, both but for c^-2. */
	return (struct gram_counts){
		.positions = positions,
		.distinct = UINT64_C(1) << bits,
		.plugin_q16 = llround(n * log2(each)),
		.grassberger_q16 = llround(n * log2(each)),
		.psi_q16 = llround(n * (log2(each) - 1 / (2 * each * log(2)))),
	};
}

struct method_fact *tiny_grams(struct survey *survey, unsigned orders,
			       unsigned bits, double scatter)
{
	struct method_fact *row = tiny_method(survey, "ngram", 0);
	uint64_t n = survey->corpora->n;

	survey->corpora->alphabet = UINT64_C(1) << bits;
	findings_release(&row->findings);
	sure(findings_init(&row->findings, orders, orders));
	for (unsigned k = 1; k <= orders; k++) {
		struct order_counts *counts = &row->findings.orders[k - 1];

		counts->order = k;
		counts->all = even_counts(n, k * bits);
		counts->half[0] = even_counts(n / 2, k * bits);
		counts->half[1] = even_counts(n - n / 2, k * bits);
		row->findings.series[k - 1].order = k;
		tiny_series(survey, &row->findings.series[k - 1], bits, scatter,
			    k);
	}
	return row;
}

struct cell_fact *tiny_cell(struct survey *survey, const char *codec,
			    const char *level, size_t page_bytes,
			    uint64_t bytes)
{
	struct corpus_fact *fact = survey->corpora;
	struct cell_fact *cell = &fact->cells[fact->cell_count++];

	assert_true(fact->cell_count <= TINY_CELLS_MOST);
	(void)snprintf(cell->key.codec, CELL_NAME_BYTES, "%s", codec);
	(void)snprintf(cell->key.level, CELL_NAME_BYTES, "%s", level);
	(void)snprintf(cell->key.layout, CELL_NAME_BYTES, "%s", "whole");
	if (page_bytes)
		(void)snprintf(cell->key.layout, CELL_NAME_BYTES, "%zu",
			       page_bytes);
	cell->page_bytes = page_bytes;
	cell->reason = no_text();
	cell->facts.bytes = bytes;
	cell->facts.framing_known = 1;
	cell->facts.lossless = 1;
	cell->facts.pages = page_bytes ? fact->n / page_bytes : 1;
	return cell;
}

void tiny_flush(const struct survey *survey, struct cell_fact *cell,
		double flush, double scatter, uint64_t seed)
{
	const struct corpus_fact *fact = survey->corpora;

	scatter_costs(fact, &cell->facts.flushed,
		      8 * (double)cell->facts.bytes * (1 + flush) /
			      (double)fact->n,
		      scatter, seed);
	cell->facts.flushed_bytes =
		(uint64_t)llround((double)cell->facts.bytes * (1 + flush));
}

void tiny_analyse(const struct survey *survey, struct analysis *analysis)
{
	const struct analysis_rules rules = {1999, .95};

	sure(analysis_init(analysis, survey, &rules, NULL));
}
