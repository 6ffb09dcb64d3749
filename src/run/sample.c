#include "run/sample.h"

#include "base/memory.h"
#include "codec/codec.h"
#include "estimate/estimator.h"
#include "suffix/suffix.h"

#include <stdio.h>
#include <string.h>

/* Draws of each bootstrap, and its confidence: the survey's own. */
static const struct analysis_rules interval_rules = {1999, 0.95};

/* Rows that are always run; the slow codes are those of gap/trial.h. */
static const char *const row_names[] = {"ngram", "crossfit", "dirichlet"};
#define ROW_COUNT (sizeof(row_names) / sizeof(row_names[0]))
#define CODES_MOST 4

/* Everything made of one sample; released whole. */
struct sample {
	uint8_t *bytes; /* owned */
	struct sequence sequence;
	struct cuts cuts;
	struct suffix suffix;
	struct corpus_fact fact;
};

static void sample_release(struct sample *sample)
{
	corpus_fact_release(&sample->fact);
	suffix_release(&sample->suffix);
	cuts_release(&sample->cuts);
	sequence_release(&sample->sequence);
	memory_free(sample->bytes);
}

static enum status draw(const struct sample_rules *rules, struct sample *sample,
			struct reason *why)
{
	const struct symbol_rules kind = {.kind = SYMBOL_BYTE};
	struct slice bytes;

	TRY(memory_new(rules->symbols, 1, &sample->bytes));
	source_model_make(rules->model, rules->symbols, rules->seed,
			  sample->bytes);
	bytes = (struct slice){sample->bytes, rules->symbols};
	TRY(sequence_init(&sample->sequence, bytes, &kind, why));
	TRY(cuts_init(&sample->cuts, &sample->sequence));
	return suffix_init(&sample->suffix, &sample->sequence, rules->orders,
			   why);
}

static enum status describe(const struct sample_rules *rules,
			    struct sample *sample)
{
	const struct sequence *sequence = &sample->sequence;
	const struct cuts *cuts = &sample->cuts;
	struct corpus_fact *fact = &sample->fact;

	(void)snprintf(fact->name, sizeof(fact->name), "%s", rules->name);
	fact->kind = sequence->kind;
	fact->file_bytes = rules->symbols;
	fact->canonical_bytes = sequence->canonical_bytes;
	fact->n = sequence->n;
	fact->distinct = sequence->distinct;
	fact->alphabet = sequence->alphabet;
	fact->blocks = cuts->blocks;
	TRY(memory_new(cuts->blocks, sizeof(uint64_t), &fact->block_symbols));
	for (size_t i = 0; i < cuts->blocks; i++)
		fact->block_symbols[i] = cuts->symbol[i + 1] - cuts->symbol[i];
	TRY(memory_new_zeroed(ROW_COUNT + CODES_MOST, sizeof(*fact->methods),
			      &fact->methods));
	return memory_new_zeroed(1, sizeof(*fact->cells), &fact->cells);
}

static enum status measure_row(const struct sample_rules *rules,
			       struct sample *sample,
			       const struct estimator *row, struct reason *why)
{
	const struct estimate_input input = {
		.sequence = &sample->sequence,
		.cuts = &sample->cuts,
		.suffix = &sample->suffix,
		.orders = rules->orders,
		.threads = 1,
	};
	struct corpus_fact *fact = &sample->fact;
	struct method_fact *method = &fact->methods[fact->method_count];
	enum status status = row->measure(&input, &method->findings, why);

	if (status == STATUS_TOO_SHORT)
		return STATUS_OK;
	if (status != STATUS_OK)
		return status;
	(void)snprintf(method->method, sizeof(method->method), "%s", row->name);
	fact->method_count++;
	return STATUS_OK;
}

/* The codec whose gap is calibrated. */
static enum status measure_gap(struct sample *sample, struct reason *why)
{
	struct cell_fact *cell = sample->fact.cells;
	const struct codec *codec = codec_find("zlib");
	const struct setting_words words = {.level = "9"};
	struct codec_setting setting;

	if (!codec)
		return STATUS_OK;
	TRY(setting_parse(codec, &words, &setting, why));
	TRY(cell_measure(codec, &setting, 0, &sample->sequence, &sample->cuts,
			 &cell->facts, why));
	sample->fact.cell_count = 1;
	return STATUS_OK;
}

static enum status measure(const struct sample_rules *rules,
			   struct sample *sample, struct trial *trial,
			   struct reason *why)
{
	size_t quick;

	TRY(draw(rules, sample, why));
	TRY(describe(rules, sample));
	for (size_t i = 0; i < ROW_COUNT; i++) {
		const struct estimator *row = estimator_find(row_names[i]);

		if (row)
			TRY(measure_row(rules, sample, row, why));
	}
	quick = sample->fact.method_count;
	for (size_t i = 0; rules->codes && trial_codes[i]; i++) {
		const struct estimator *row = estimator_find(trial_codes[i]);

		if (row)
			TRY(measure_row(rules, sample, row, why));
	}
	if (rules->gap)
		TRY(measure_gap(sample, why));
	return trial_find(&sample->fact, quick, rules->seed, &interval_rules,
			  rules->order, trial);
}

enum status sample_measure(const struct sample_rules *rules,
			   struct trial *trial, struct reason *why)
{
	struct sample sample = {0};
	enum status status = measure(rules, &sample, trial, why);

	sample_release(&sample);
	return status;
}
