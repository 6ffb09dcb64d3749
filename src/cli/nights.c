#include "cli/nights.h"

#include <stdio.h>
#include <string.h>

#include "run/retime.h"

static const struct analysis_rules rules = {.draws = 1999, .confidence = 0.95};

/* Rounds of a repeat: an odd number, so that the median is one of them. */
#define PIN_ROUNDS 5
#define JUDGE_ROUNDS 7

enum status night_read(struct ledger *ledger, int64_t id, struct night *night,
		       struct reason *why)
{
	struct survey survey = {0};
	struct analysis analysis;
	enum status status;

	TRY(ledger_read(ledger, id, &survey, why));
	status = analysis_init(&analysis, &survey, &rules, why);
	if (status == STATUS_OK) {
		status = baseline_init(&night->figures, &analysis, why);
		analysis_release(&analysis);
	}
	if (status == STATUS_OK) {
		night->finished = survey.finished;
		(void)snprintf(night->set_path, sizeof(night->set_path), "%s",
			       survey.set_path);
	}
	survey_release(&survey);
	return status;
}

void night_release(struct night *night)
{
	baseline_release(&night->figures);
}

enum status remeasure_init(struct remeasure *again, const char *path,
			   bool outside, struct reason *why)
{
	const struct selection all = {.part = 1, .parts = 1};
	enum status status;

	if (!*path)
		return reason_give(why, STATUS_NOT_FOUND,
				   "the ledger does not say where the set file "
				   "lies: give --set");
	TRY(set_load(path, outside, &again->set, why));
	status = plan_init(&again->plan, &again->set, &all, why);
	if (status != STATUS_OK)
		set_release(&again->set);
	return status;
}

void remeasure_release(struct remeasure *again)
{
	plan_release(&again->plan);
	set_release(&again->set);
}

/* One cell; the corpus must still have the bytes of the figures. */
static MUST_USE enum status
measure(const struct remeasure *again, const struct baseline *figures,
	const struct baseline_cell *cell, unsigned rounds,
	struct relative ratios[RATIO_COUNT], struct reason *why)
{
	const struct baseline_corpus *corpus =
		baseline_corpus_find(figures, cell->corpus);
	const struct retime_job job = {
		.set = &again->set,
		.plan = &again->plan,
		.corpus = cell->corpus,
		.sha256 = corpus ? corpus->sha256 : "",
		.yardstick = figures->yardstick,
		.key = &cell->key,
		.rounds = rounds,
	};

	if (!again->quiet)
		(void)fprintf(stderr, "measuring again: %s, %s\n", cell->corpus,
			      cell_words(&cell->key).text);
	return retime(&job, ratios, why);
}

static bool is_timed(const struct baseline_cell *cell)
{
	return cell->ratios[RATIO_ENCODE_TIME].known ||
	       cell->ratios[RATIO_DECODE_TIME].known;
}

enum status remeasure_pin(const struct remeasure *again,
			  struct baseline *baseline, struct reason *why)
{
	for (size_t i = 0; i < baseline->cell_count; i++) {
		struct baseline_cell *cell = &baseline->cells[i];
		struct relative ratios[RATIO_COUNT];

		if (!is_timed(cell))
			continue;
		TRY(measure(again, baseline, cell, PIN_ROUNDS, ratios, why));
		for (size_t j = 0; j < RATIO_COUNT; j++) {
			if (cell->ratios[j].known && ratios[j].known)
				cell->ratios[j] = ratios[j];
		}
	}
	return STATUS_OK;
}

/* The lower of two is what counts: a breach must be seen twice. */
static MUST_USE enum status measure_twice(const struct remeasure *again,
					  const struct gate *gate,
					  const struct baseline_cell *cell,
					  struct relative ratios[RATIO_COUNT],
					  struct reason *why)
{
	struct relative second[RATIO_COUNT];

	TRY(measure(again, gate->tonight, cell, JUDGE_ROUNDS, ratios, why));
	TRY(measure(again, gate->tonight, cell, JUDGE_ROUNDS, second, why));
	for (size_t i = 0; i < RATIO_COUNT; i++) {
		if (second[i].known && second[i].value < ratios[i].value)
			ratios[i] = second[i];
	}
	return STATUS_OK;
}

void remeasure_suspects(const struct remeasure *again, struct gate *gate)
{
	struct relative ratios[RATIO_COUNT];
	const struct baseline_cell *measured = NULL;
	enum status status = STATUS_OK;

	for (size_t i = 0; i < gate->count; i++) {
		struct gate_check *check = &gate->checks[i];
		const struct baseline_cell *cell;
		struct reason why = {""};

		if (check->outcome != GATE_SUSPECTED)
			continue;
		cell = baseline_cell_find(gate->tonight, check->corpus,
					  &check->key);
		if (cell != measured) {
			status = measure_twice(again, gate, cell, ratios, &why);
			measured = cell;
			if (status != STATUS_OK)
				(void)fprintf(stderr,
					      "ratefloor gate: %s, %s cannot "
					      "be measured again: %s\n",
					      check->corpus,
					      cell_words(&check->key).text,
					      why.text);
		}
		if (status == STATUS_OK)
			gate_repeat(gate, check, &ratios[check->ratio]);
	}
}
