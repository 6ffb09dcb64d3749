#include "cli/nights.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

#include "cli/others.h"
#include "run/retime.h"

/* Ratios that are of no interest. */
#define ANY_RATIO HUGE_VAL

enum status night_read(struct ledger *ledger, int64_t id, struct night *night,
		       struct reason *why)
{
	struct survey survey = {0};
	struct analysis analysis;
	enum status status;

	TRY(ledger_read(ledger, id, &survey, why));
	status = analysis_init(&analysis, &survey, &analysis_usual, why);
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
			   bool outside, bool own_codecs, struct reason *why)
{
	struct selection all = {.part = 1, .parts = 1};
	enum status status;

	if (!*path)
		return reason_give(why, STATUS_NOT_FOUND,
				   "the ledger does not say where the set file "
				   "lies: give --set");
	if (own_codecs) {
		TRY(beside_host(again->codec_host, why));
		all.codec_host = again->codec_host;
	}
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

static double larger(double a, double b)
{
	return a > b ? a : b;
}

/* One cell; the corpus must still have the bytes of the figures. */
static MUST_USE enum status
measure(const struct remeasure *again, const struct baseline *figures,
	const struct baseline_cell *cell, const double *enough,
	struct retime_result *result, struct reason *why)
{
	const struct baseline_corpus *corpus =
		baseline_corpus_find(figures, cell->corpus);
	const struct others before = others_now();
	const struct retime_job job = {
		.set = &again->set,
		.plan = &again->plan,
		.corpus = cell->corpus,
		.sha256 = corpus ? corpus->sha256 : "",
		.yardstick = figures->yardstick,
		.key = &cell->key,
		.enough = enough,
		.memory = enough && (enough[RATIO_ENCODE_MEMORY] < ANY_RATIO ||
				     enough[RATIO_DECODE_MEMORY] < ANY_RATIO),
	};

	if (!again->quiet)
		(void)fprintf(stderr, "measuring again: %s, %s\n", cell->corpus,
			      cell_words(&cell->key).text);
	TRY(retime(&job, result, why));
	/* A busy neighbour need not be uneven to disturb. */
	result->unrest = larger(result->unrest, others_since(&before));
	return STATUS_OK;
}

static bool is_timed(const struct baseline_cell *cell)
{
	return cell->ratios[RATIO_ENCODE_TIME].known ||
	       cell->ratios[RATIO_DECODE_TIME].known;
}

/* The slower of two: a lucky pin would cry wolf every night. */
static MUST_USE enum status pin_cell(const struct remeasure *again,
				     const struct baseline *baseline,
				     struct baseline_cell *cell, double *unrest,
				     struct reason *why)
{
	struct retime_result first, second;

	TRY(measure(again, baseline, cell, NULL, &first, why));
	TRY(measure(again, baseline, cell, NULL, &second, why));
	for (size_t i = RATIO_ENCODE_TIME; i <= RATIO_DECODE_TIME; i++) {
		const struct relative *a = &first.ratios[i];
		const struct relative *b = &second.ratios[i];

		if (cell->ratios[i].known && a->known && b->known)
			cell->ratios[i] = a->value > b->value ? *a : *b;
	}
	*unrest = larger(*unrest, larger(first.unrest, second.unrest));
	return STATUS_OK;
}

enum status remeasure_pin(const struct remeasure *again,
			  struct baseline *baseline, struct reason *why)
{
	double unrest = 0;

	for (size_t i = 0; i < baseline->cell_count; i++) {
		if (is_timed(&baseline->cells[i]))
			TRY(pin_cell(again, baseline, &baseline->cells[i],
				     &unrest, why));
	}
	if (unrest > baseline->speed_tolerance / 2)
		(void)fprintf(stderr,
			      "ratefloor gate: the machine was busy (%.0f%% "
			      "unrest): pin again on a quiet one, or times "
			      "are judged against uncertain ones\n",
			      100 * unrest);
	return STATUS_OK;
}

/* Checks of one cell, side by side, some of them suspected. */
struct suspects {
	size_t first, count;
	double enough[RATIO_COUNT]; /* see run/retime.h */
};

static bool same_cell(const struct gate_check *a, const struct gate_check *b)
{
	return strcmp(a->corpus, b->corpus) == 0 &&
	       strcmp(cell_words(&a->key).text, cell_words(&b->key).text) == 0;
}

static void gather(const struct gate *gate, size_t first,
		   struct suspects *suspects)
{
	*suspects = (struct suspects){.first = first};
	for (size_t i = 0; i < RATIO_COUNT; i++)
		suspects->enough[i] = ANY_RATIO;
	for (size_t i = first; i < gate->count; i++) {
		const struct gate_check *check = &gate->checks[i];

		if (!same_cell(check, &gate->checks[first]))
			break;
		if (check->outcome == GATE_SUSPECTED)
			suspects->enough[check->ratio] =
				gate_enough(gate, check);
		suspects->count++;
	}
}

/* Whether anything that was suspected is over its tolerance so far. */
static bool any_over(const struct gate *gate, const struct suspects *suspects,
		     const struct retime_result *result)
{
	for (size_t i = 0; i < suspects->count; i++) {
		const struct gate_check *check =
			&gate->checks[suspects->first + i];

		if (check->outcome == GATE_SUSPECTED &&
		    gate_over(gate, check, &result->ratios[check->ratio]))
			return true;
	}
	return false;
}

/* The better of two attempts counts, for each ratio. */
static void keep_better(struct retime_result *kept,
			const struct retime_result *other)
{
	for (size_t i = 0; i < RATIO_COUNT; i++) {
		if (!kept->ratios[i].known ||
		    (other->ratios[i].known &&
		     other->ratios[i].value < kept->ratios[i].value))
			kept->ratios[i] = other->ratios[i];
	}
	kept->unrest = larger(kept->unrest, other->unrest);
}

/*
 * A disturbance from outside, another guest of the same machine for example,
 * shows in no count of ours, but it passes: a breach is seen in each of several
 * attempts some time apart.
 */
static MUST_USE enum status attempt(const struct remeasure *again,
				    const struct gate *gate,
				    const struct suspects *suspects,
				    struct retime_result *result,
				    struct reason *why)
{
	static const unsigned waits[] = {0, 3, 15};
	const struct gate_check *check = &gate->checks[suspects->first];
	const struct baseline_cell *cell =
		baseline_cell_find(gate->tonight, check->corpus, &check->key);

	for (size_t i = 0; i < sizeof(waits) / sizeof(waits[0]); i++) {
		struct retime_result next;

		retime_wait(waits[i]);
		TRY(measure(again, gate->tonight, cell, suspects->enough, &next,
			    why));
		if (i)
			keep_better(result, &next);
		else
			*result = next;
		if (!any_over(gate, suspects, result))
			break;
	}
	return STATUS_OK;
}

static void settle(const struct remeasure *again, struct gate *gate,
		   const struct suspects *suspects)
{
	struct gate_check *check = &gate->checks[suspects->first];
	struct retime_result result;
	struct reason why = {""};

	if (attempt(again, gate, suspects, &result, &why) != STATUS_OK) {
		(void)fprintf(stderr,
			      "ratefloor gate: %s, %s cannot be measured "
			      "again: %s\n",
			      check->corpus, cell_words(&check->key).text,
			      why.text);
		return;
	}
	for (size_t i = 0; i < suspects->count; i++)
		gate_repeat(gate, &check[i], &result.ratios[check[i].ratio],
			    result.unrest);
}

void remeasure_suspects(const struct remeasure *again, struct gate *gate)
{
	for (size_t i = 0; i < gate->count;) {
		struct suspects suspects = {.count = 1};

		if (gate->checks[i].outcome == GATE_SUSPECTED) {
			gather(gate, i, &suspects);
			settle(again, gate, &suspects);
		}
		i += suspects.count;
	}
}
