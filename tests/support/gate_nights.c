#include "support/gate_nights.h"

#include "base/memory.h"
#include "support/near.h"

#include <stdio.h>
#include <string.h>

#define CORPORA 2
#define CELLS_EACH 3

static const struct cell_key keys[CELLS_EACH] = {
	{"zlib", "6", "whole"}, {"zlib", "9", "4096"}, {"zstd", "3", "whole"}};

static struct baseline_corpus corpus_of(const char *name, bool rolling)
{
	struct baseline_corpus corpus = {
		.outcome = OUTCOME_DONE,
		.kind = SYMBOL_BYTE,
		.rolling = rolling,
		.n = 80000,
		.floor_known = true,
		.floor_held_by = "mix",
		.floor_bits_per_symbol = 1.75,
	};

	(void)snprintf(corpus.name, sizeof(corpus.name), "%s", name);
	(void)snprintf(corpus.sha256, sizeof(corpus.sha256), "%s",
		       rolling ? "f00d" : "beef");
	return corpus;
}

static struct baseline_cell cell_of(const char *corpus, size_t i)
{
	bool is_yardstick = i == 2;
	struct baseline_cell cell = {
		.key = keys[i],
		.ran = true,
		.lossless = true,
		.bytes = 20000 + 1000 * i,
		.has_gap = true,
		.gap = 0.25,
		.gap_least = 0.25,
	};

	(void)snprintf(cell.corpus, sizeof(cell.corpus), "%s", corpus);
	if (strcmp(corpus, "feed") == 0)
		cell.pair = (struct baseline_pair){
			.known = true,
			.mean = is_yardstick ? 0.5 : -0.125,
			.standard_error = 0.003,
			.effective_blocks = 61,
		};
	(void)snprintf(cell.pair.against, sizeof(cell.pair.against), "%s",
		       is_yardstick ? "mix" : "zstd 3");
	for (size_t j = 0; j < RATIO_COUNT && !is_yardstick; j++)
		cell.ratios[j] = (struct relative){true, 2.5 + (double)j};
	return cell;
}

void gate_night_init(struct baseline *night)
{
	static const struct library_fact libraries[] = {
		{"mix", "1"}, {"zlib", "1.2.13"}, {"zstd", "1.5.4"}};

	*night = (struct baseline){
		.program = "ratefloor 0.1.0",
		.set_name = "marrow-bay",
		.survey = 3,
		.started = "2031-05-02T01:00:00Z",
		.seed = 1,
		.orders = 16,
		.yardstick = "zstd 3",
		.gap_limit = 0.4,
		.tolerance = 0.003,
		.speed_tolerance = 0.15,
		.library_count = 3,
	};
	assert_int_equal(
		memory_new(3, sizeof(*night->libraries), &night->libraries),
		STATUS_OK);
	memcpy(night->libraries, libraries, sizeof(libraries));
	assert_int_equal(
		memory_new(CORPORA, sizeof(*night->corpora), &night->corpora),
		STATUS_OK);
	assert_int_equal(memory_new(CORPORA * CELLS_EACH, sizeof(*night->cells),
				    &night->cells),
			 STATUS_OK);
	for (size_t i = 0; i < CORPORA; i++) {
		const char *name = i ? "feed" : "frames";

		night->corpora[night->corpus_count++] = corpus_of(name, i == 1);
		for (size_t j = 0; j < CELLS_EACH; j++)
			night->cells[night->cell_count++] = cell_of(name, j);
	}
	baseline_sort(night);
}

struct baseline_cell *gate_night_cell(struct baseline *night,
				      const char *corpus, const char *codec,
				      const char *level)
{
	for (size_t i = 0; i < night->cell_count; i++) {
		struct baseline_cell *cell = &night->cells[i];

		if (strcmp(cell->corpus, corpus) == 0 &&
		    strcmp(cell->key.codec, codec) == 0 &&
		    strcmp(cell->key.level, level) == 0)
			return cell;
	}
	fail_msg("no cell %s %s %s", corpus, codec, level);
	return NULL;
}

struct baseline_corpus *gate_night_corpus(struct baseline *night,
					  const char *name)
{
	for (size_t i = 0; i < night->corpus_count; i++) {
		if (strcmp(night->corpora[i].name, name) == 0)
			return &night->corpora[i];
	}
	fail_msg("no corpus %s", name);
	return NULL;
}

void gate_nights_judge(const struct baseline *pin, const struct baseline *night,
		       struct gate *gate)
{
	struct reason why = {""};
	enum status status = gate_init(gate, pin, night, &why);

	if (status != STATUS_OK)
		fail_msg("%s", why.text);
}

struct gate_check *gate_only_breach(struct gate *gate, enum gate_rule rule)
{
	struct gate_check *found = NULL;

	for (size_t i = 0; i < gate->count; i++) {
		struct gate_check *check = &gate->checks[i];

		if (check->outcome != GATE_BREACHED)
			continue;
		if (found || check->rule != rule)
			fail_msg("also %s: %s", gate_rule_name(check->rule),
				 check->words);
		found = check;
	}
	assert_non_null(found);
	return found;
}

size_t gate_checks(const struct gate *gate, enum gate_rule rule,
		   enum gate_outcome outcome)
{
	size_t count = 0;

	for (size_t i = 0; i < gate->count; i++)
		count += gate->checks[i].rule == rule &&
			 gate->checks[i].outcome == outcome;
	return count;
}
