#include "support/sample_survey.h"

#include "base/memory.h"
#include "support/near.h"

#include <string.h>

char *sample_text(const char *text)
{
	char *copy = NULL;

	assert_int_equal(memory_new(strlen(text) + 1, 1, &copy), STATUS_OK);
	return strcpy(copy, text);
}

void sample_blocks(void *words, size_t count, int64_t first)
{
	int64_t *made = NULL;

	assert_int_equal(memory_new(count, sizeof(*made), &made), STATUS_OK);
	for (size_t i = 0; i < count; i++)
		made[i] = first + (int64_t)i * INT64_C(0x0102030405);
	memcpy(words, &made, sizeof(made));
}

static void *sample_array(size_t count, size_t size)
{
	void *made = NULL;

	assert_int_equal(memory_new_zeroed(count, size, &made), STATUS_OK);
	return made;
}

static void sample_gram(struct gram_counts *gram, uint64_t base)
{
	*gram = (struct gram_counts){
		.positions = base + 4194304,
		.distinct = base + 211,
		.once = base + 17,
		.twice = base + 9,
		.plugin_q16 = (int64_t)base * 65536 + 3,
		.grassberger_q16 = (int64_t)base * 65536 - 1,
		.psi_q16 = -(int64_t)base,
	};
}

static void sample_ngram(struct method_fact *method, size_t blocks)
{
	struct findings *findings = &method->findings;

	strcpy(method->method, "ngram");
	method->reason = sample_text("");
	assert_int_equal(findings_init(findings, 3, 2), STATUS_OK);
	for (unsigned i = 0; i < 3; i++) {
		struct series *series = &findings->series[i];

		series->order = i + 1;
		series->costs.headline_q16 = INT64_C(98765432109) - i;
		series->costs.blocks = i < 2 ? blocks : 0;
		if (i < 2)
			sample_blocks(&series->costs.block_q16, blocks,
				      -INT64_C(5) - i);
	}
	for (unsigned i = 0; i < 2; i++) {
		findings->orders[i].order = i + 1;
		sample_gram(&findings->orders[i].all, 1000 + i);
		sample_gram(&findings->orders[i].half[0], 2000 + i);
		sample_gram(&findings->orders[i].half[1], 3000 + i);
	}
	findings_note(findings, "stride", 24);
	findings_note(findings, "share ppm", -INT64_C(123456789012));
}

static void sample_methods(struct corpus_fact *corpus)
{
	struct method_fact *declined;

	corpus->method_count = 3;
	corpus->methods = sample_array(3, sizeof(*corpus->methods));
	sample_ngram(&corpus->methods[0], corpus->blocks);
	declined = &corpus->methods[1];
	strcpy(declined->method, "crossfit");
	declined->outcome = OUTCOME_DECLINED;
	declined->reason = sample_text("needs 6400 symbols, found 12");
	assert_int_equal(findings_init(&declined->findings, 0, 0), STATUS_OK);
	sample_ngram(&corpus->methods[2], corpus->blocks);
	strcpy(corpus->methods[2].method, "mix");
	corpus->methods[2].page_bytes = 65536;
}

static void sample_cell(struct cell_fact *cell, const char *codec,
			const char *level, const char *layout)
{
	strcpy(cell->key.codec, codec);
	strcpy(cell->key.level, level);
	strcpy(cell->key.layout, layout);
	cell->reason = sample_text("");
	cell->facts.bytes = UINT64_C(5000000017);
	cell->facts.framing_bytes = 18;
	cell->facts.framing_known = 1;
	cell->facts.lossless = 1;
	cell->facts.pages = 1;
	cell->facts.flushed_bytes = UINT64_C(5000100019);
	cell->facts.encode_memory_bytes = 268435;
	cell->facts.decode_memory_bytes = 32771;
}

static void sample_cells(struct corpus_fact *corpus)
{
	struct cell_fact *cells = sample_array(3, sizeof(*cells));

	corpus->cells = cells;
	corpus->cell_count = 3;
	sample_cell(&cells[0], "xz", "9e", "whole");
	cells[0].facts.flushed.headline_q16 = INT64_C(77777777777);
	cells[0].facts.flushed.blocks = corpus->blocks;
	sample_blocks(&cells[0].facts.flushed.block_q16, corpus->blocks, 41);
	cells[0].facts.storage_unit = 4096;
	cells[0].facts.stored_bytes = UINT64_C(5000003584);
	cells[0].timed = true;
	cells[0].timing = (struct cell_timing){.rounds = 5,
					       .encode_cpu_seconds = 2.385,
					       .decode_cpu_seconds = 0.125001,
					       .encode_wall_seconds = 2.401,
					       .decode_wall_seconds = 0.13,
					       .encode_spread = 0.021,
					       .decode_spread = 0.047};
	sample_cell(&cells[1], "house", "", "4096");
	cells[1].facts.dictionary_bytes = 110213;
	cells[1].page_bytes = 4096;
	cells[1].facts.pages = 1024;
	cells[1].facts.framing_bytes = 0;
	cells[1].facts.framing_known = 0;
	sample_cell(&cells[2], "zlib", "6", "whole");
	cells[2].outcome = OUTCOME_FAILED;
	memory_free(cells[2].reason);
	cells[2].reason = sample_text("byte 7: got 0x41, wanted 0x42");
	cells[2].facts.lossless = 0;
}

static void sample_done(struct corpus_fact *corpus)
{
	strcpy(corpus->name, "gauge-frames");
	corpus->reason = sample_text("");
	corpus->kind = SYMBOL_U16LE;
	corpus->file_bytes = 8388611;
	corpus->canonical_bytes = 8388608;
	corpus->n = 4194304;
	corpus->distinct = 801;
	corpus->alphabet = 65536;
	corpus->records = 349525;
	memset(corpus->sha256, 'b', 64);
	strcpy(corpus->licence, "CC0-1.0");
	corpus->origin = sample_text("ratefloor synth gauge-frames --seed 7");
	corpus->rate_known = true;
	corpus->known_rate = 1.5100372;
	corpus->rolling = true;
	corpus->blocks = 100;
	sample_blocks(&corpus->block_symbols, 100, 41943);
	sample_blocks(&corpus->block_bytes, 100, 83886);
	sample_methods(corpus);
	sample_cells(corpus);
}

static void sample_skipped(struct corpus_fact *corpus)
{
	strcpy(corpus->name, "duty-log");
	corpus->outcome = OUTCOME_SKIPPED;
	corpus->reason = sample_text("not fetched; see 'ratefloor corpora'");
	corpus->kind = SYMBOL_LETTERS27;
	corpus->origin = sample_text("");
	corpus->methods = sample_array(0, sizeof(*corpus->methods));
	corpus->cells = sample_array(0, sizeof(*corpus->cells));
}

void sample_survey(struct survey *survey)
{
	*survey = (struct survey){.set_name = "marrow-bay",
				  .program = "ratefloor 0.1.0",
				  .seed = UINT64_C(0xfedcba9876543210),
				  .orders = 16,
				  .gap_limit = 0.385,
				  .yardstick = "zstd 3",
				  .tolerance = 0.0035,
				  .speed_tolerance = 0.175,
				  .set_path = "bay/night.set"};
	survey->library_count = 2;
	survey->libraries = sample_array(2, sizeof(*survey->libraries));
	survey->libraries[0] = (struct library_fact){"zlib", "1.2.13"};
	survey->libraries[1] = (struct library_fact){"liblzma", "5.4.1"};
	survey->corpus_count = 2;
	survey->corpora = sample_array(2, sizeof(*survey->corpora));
	sample_done(&survey->corpora[0]);
	sample_skipped(&survey->corpora[1]);
}

static void write_corpus(struct ledger *ledger, int64_t id, size_t place,
			 const struct corpus_fact *corpus)
{
	struct reason why = {""};

	assert_int_equal(ledger_put_corpus(ledger, id, place, corpus, &why),
			 STATUS_OK);
	for (size_t i = 0; i < corpus->method_count; i++)
		assert_int_equal(ledger_put_method(ledger, id, corpus->name, i,
						   &corpus->methods[i], &why),
				 STATUS_OK);
	for (size_t i = 0; i < corpus->cell_count; i++)
		assert_int_equal(ledger_put_cell(ledger, id, corpus->name, i,
						 &corpus->cells[i], &why),
				 STATUS_OK);
}

int64_t sample_write(struct ledger *ledger, struct survey *survey, bool finish)
{
	struct reason why = {""};

	assert_int_equal(ledger_begin(ledger, survey, SAMPLE_PLAN, &why),
			 STATUS_OK);
	for (size_t i = 0; i < survey->corpus_count; i++)
		write_corpus(ledger, survey->id, i, &survey->corpora[i]);
	if (finish)
		assert_int_equal(ledger_finish(ledger, survey->id, &why),
				 STATUS_OK);
	return survey->id;
}

static void equal_costs(const struct costs *got, const struct costs *wanted)
{
	assert_int_equal(got->headline_q16, wanted->headline_q16);
	assert_int_equal(got->blocks, wanted->blocks);
	if (wanted->blocks)
		assert_memory_equal(got->block_q16, wanted->block_q16,
				    8 * wanted->blocks);
	else
		assert_null(got->block_q16);
}

static void equal_grams(const struct gram_counts *got,
			const struct gram_counts *wanted)
{
	/* Seven 64-bit numbers: no padding between them. */
	assert_int_equal(sizeof(*got), 7 * 8);
	assert_memory_equal(got, wanted, sizeof(*got));
}

static void equal_methods(const struct method_fact *got,
			  const struct method_fact *wanted)
{
	const struct findings *a = &got->findings;
	const struct findings *b = &wanted->findings;

	assert_string_equal(got->method, wanted->method);
	assert_int_equal(got->page_bytes, wanted->page_bytes);
	assert_int_equal(got->outcome, wanted->outcome);
	assert_string_equal(got->reason, wanted->reason);
	assert_int_equal(a->series_count, b->series_count);
	for (size_t i = 0; i < b->series_count; i++) {
		assert_int_equal(a->series[i].order, b->series[i].order);
		equal_costs(&a->series[i].costs, &b->series[i].costs);
	}
	assert_int_equal(a->order_count, b->order_count);
	for (size_t i = 0; i < b->order_count; i++) {
		assert_int_equal(a->orders[i].order, b->orders[i].order);
		equal_grams(&a->orders[i].all, &b->orders[i].all);
		equal_grams(&a->orders[i].half[0], &b->orders[i].half[0]);
		equal_grams(&a->orders[i].half[1], &b->orders[i].half[1]);
	}
	assert_int_equal(a->note_count, b->note_count);
	for (size_t i = 0; i < b->note_count; i++) {
		assert_string_equal(a->notes[i].key, b->notes[i].key);
		assert_int_equal(a->notes[i].value, b->notes[i].value);
	}
}

static void equal_timings(const struct cell_timing *got,
			  const struct cell_timing *wanted)
{
	assert_int_equal(got->rounds, wanted->rounds);
	assert_near(got->encode_cpu_seconds, wanted->encode_cpu_seconds, 0);
	assert_near(got->decode_cpu_seconds, wanted->decode_cpu_seconds, 0);
	assert_near(got->encode_wall_seconds, wanted->encode_wall_seconds, 0);
	assert_near(got->decode_wall_seconds, wanted->decode_wall_seconds, 0);
	assert_near(got->encode_spread, wanted->encode_spread, 0);
	assert_near(got->decode_spread, wanted->decode_spread, 0);
}

static void equal_cells(const struct cell_fact *got,
			const struct cell_fact *wanted)
{
	const struct cell_facts *a = &got->facts;
	const struct cell_facts *b = &wanted->facts;

	assert_string_equal(got->key.codec, wanted->key.codec);
	assert_string_equal(got->key.level, wanted->key.level);
	assert_string_equal(got->key.layout, wanted->key.layout);
	assert_int_equal(got->page_bytes, wanted->page_bytes);
	assert_int_equal(got->outcome, wanted->outcome);
	assert_string_equal(got->reason, wanted->reason);
	assert_int_equal(a->bytes, b->bytes);
	assert_int_equal(a->framing_bytes, b->framing_bytes);
	assert_int_equal(a->framing_known, b->framing_known);
	assert_int_equal(a->lossless, b->lossless);
	assert_int_equal(a->pages, b->pages);
	equal_costs(&a->flushed, &b->flushed);
	assert_int_equal(a->flushed_bytes, b->flushed_bytes);
	assert_int_equal(a->encode_memory_bytes, b->encode_memory_bytes);
	assert_int_equal(a->decode_memory_bytes, b->decode_memory_bytes);
	assert_int_equal(a->dictionary_bytes, b->dictionary_bytes);
	assert_int_equal(a->storage_unit, b->storage_unit);
	assert_int_equal(a->stored_bytes, b->stored_bytes);
	assert_int_equal(got->timed, wanted->timed);
	equal_timings(&got->timing, &wanted->timing);
}

static void equal_corpora(const struct corpus_fact *got,
			  const struct corpus_fact *wanted)
{
	assert_string_equal(got->name, wanted->name);
	assert_int_equal(got->outcome, wanted->outcome);
	assert_string_equal(got->reason, wanted->reason);
	assert_int_equal(got->kind, wanted->kind);
	assert_int_equal(got->file_bytes, wanted->file_bytes);
	assert_int_equal(got->canonical_bytes, wanted->canonical_bytes);
	assert_int_equal(got->n, wanted->n);
	assert_int_equal(got->distinct, wanted->distinct);
	assert_int_equal(got->alphabet, wanted->alphabet);
	assert_int_equal(got->records, wanted->records);
	assert_string_equal(got->sha256, wanted->sha256);
	assert_string_equal(got->licence, wanted->licence);
	assert_string_equal(got->origin, wanted->origin);
	assert_int_equal(got->rate_known, wanted->rate_known);
	assert_near(got->known_rate, wanted->known_rate, 0);
	assert_int_equal(got->rolling, wanted->rolling);
	assert_int_equal(got->blocks, wanted->blocks);
	for (size_t i = 0; i < wanted->blocks; i++) {
		assert_int_equal(got->block_symbols[i],
				 wanted->block_symbols[i]);
		assert_int_equal(got->block_bytes[i], wanted->block_bytes[i]);
	}
	assert_int_equal(got->method_count, wanted->method_count);
	for (size_t i = 0; i < wanted->method_count; i++)
		equal_methods(&got->methods[i], &wanted->methods[i]);
	assert_int_equal(got->cell_count, wanted->cell_count);
	for (size_t i = 0; i < wanted->cell_count; i++)
		equal_cells(&got->cells[i], &wanted->cells[i]);
}

void sample_assert_equal(const struct survey *got, const struct survey *wanted)
{
	assert_string_equal(got->set_name, wanted->set_name);
	assert_string_equal(got->program, wanted->program);
	assert_int_equal(got->seed, wanted->seed);
	assert_int_equal(got->orders, wanted->orders);
	assert_near(got->gap_limit, wanted->gap_limit, 0);
	assert_string_equal(got->yardstick, wanted->yardstick);
	assert_near(got->tolerance, wanted->tolerance, 0);
	assert_near(got->speed_tolerance, wanted->speed_tolerance, 0);
	assert_string_equal(got->set_path, wanted->set_path);
	assert_int_equal(got->library_count, wanted->library_count);
	for (size_t i = 0; i < wanted->library_count; i++) {
		assert_string_equal(got->libraries[i].name,
				    wanted->libraries[i].name);
		assert_string_equal(got->libraries[i].version,
				    wanted->libraries[i].version);
	}
	assert_int_equal(got->corpus_count, wanted->corpus_count);
	for (size_t i = 0; i < wanted->corpus_count; i++)
		equal_corpora(&got->corpora[i], &wanted->corpora[i]);
}
