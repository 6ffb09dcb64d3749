#include "run/calibration_run.h"

#include "base/memory.h"
#include "base/pool.h"
#include "run/sample.h"
#include "run/stopwatch.h"
#include "source/frozen.h"

#include <pthread.h>
#include <stdio.h>
#include <string.h>

/* Samples of one source at one length, being measured by several threads. */
struct batch {
	const struct calibration_rules *rules;
	struct sample_rules sample; /* but for its seed */
	size_t codes; /* samples that the slow codes run on: the first ones */
	struct trial *trials;
	pthread_mutex_t lock;
	enum status status; /* the first failure */
	struct reason *why;
	double done, total; /* symbols, of the whole calibration */
	const struct stopwatch *watch;
};

static bool stopped(struct batch *batch)
{
	bool stop;

	(void)pthread_mutex_lock(&batch->lock);
	if (batch->rules->stop && *batch->rules->stop &&
	    batch->status == STATUS_OK)
		batch->status = reason_give(batch->why, STATUS_CANCELLED,
					    "stopped on request");
	stop = batch->status != STATUS_OK;
	(void)pthread_mutex_unlock(&batch->lock);
	return stop;
}

static void finish_one(struct batch *batch, enum status status,
		       const struct reason *why)
{
	const struct calibration_rules *rules = batch->rules;

	(void)pthread_mutex_lock(&batch->lock);
	if (status != STATUS_OK && batch->status == STATUS_OK) {
		batch->status = status;
		*batch->why = *why;
	}
	batch->done += (double)batch->sample.symbols;
	if (rules->watch)
		rules->watch(rules->context, batch->done / batch->total,
			     stopwatch_seconds(batch->watch));
	(void)pthread_mutex_unlock(&batch->lock);
}

static void measure_one(void *context, size_t i)
{
	struct batch *batch = context;
	struct sample_rules sample = batch->sample;
	struct reason why = {""};
	enum status status;

	if (stopped(batch))
		return;
	/* Samples of one seed never meet those of another. */
	sample.seed = (batch->rules->seed << 32) + i;
	sample.codes = i < batch->codes;
	status = sample_measure(&sample, &batch->trials[i], &why);
	if (status != STATUS_OK && !why.text[0])
		(void)reason_give(&why, status, "%s", status_words(status));
	finish_one(batch, status, &why);
}

static const char *family_of(const struct frozen_source *row)
{
	static const char *const by_order[] = {"i.i.d.", "chain", "order-2"};

	if (row->family == FROZEN_HIDDEN)
		return "hidden";
	if (row->family == FROZEN_SWITCHING)
		return "switching";
	/* Largest entropy under a constraint: no long-run variance at all. */
	if (strncmp(row->name, "runs-", 5) == 0 ||
	    strcmp(row->name, "golden-mean") == 0)
		return "constrained";
	return row->order < 3 ? by_order[row->order] : "order-3";
}

/*
 * Grams that suit the source: one symbol more than its memory. Where the
 * memory has no end, an order with at most 256 grams: too high for the
 * bias, on purpose, as a user would meet it.
 */
static unsigned order_of(const struct frozen_source *row)
{
	unsigned order = 1, grams = row->alphabet;

	if (row->family == FROZEN_FINITE)
		return row->order + 1;
	while (grams * row->alphabet <= 256) {
		grams *= row->alphabet;
		order++;
	}
	return order;
}

static enum status describe(const struct frozen_source *row, uint64_t symbols,
			    const struct source_model *model,
			    struct calibration_subject *subject,
			    struct reason *why)
{
	struct known_rate rate;

	TRY(source_model_rate(model, &rate, why));
	*subject = (struct calibration_subject){
		.finite_memory = row->family == FROZEN_FINITE,
		.hidden = row->family == FROZEN_HIDDEN,
		.drifting = row->family == FROZEN_SWITCHING,
		.order = order_of(row),
		.symbols = symbols,
		.known_rate = rate.bits_per_symbol,
	};
	(void)snprintf(subject->source, sizeof(subject->source), "%s",
		       row->name);
	(void)snprintf(subject->family, sizeof(subject->family), "%s",
		       family_of(row));
	return STATUS_OK;
}

static enum status run_samples(struct batch *batch, size_t runs,
			       const struct calibration_subject *subject,
			       struct calibration_case *made)
{
	enum status status;

	TRY(memory_new_zeroed(runs, sizeof(*batch->trials), &batch->trials));
	status = pool_run(runs, batch->rules->jobs, measure_one, batch);
	if (status == STATUS_OK)
		status = batch->status;
	if (status == STATUS_OK)
		status = calibration_judge(subject, batch->trials, runs, made);
	memory_free(batch->trials);
	return status;
}

static enum status run_case(struct batch *batch, size_t length,
			    const struct frozen_source *row,
			    struct calibration_case *made)
{
	const struct calibration_rules *rules = batch->rules;
	struct calibration_subject subject;
	struct source_model model;
	enum status status;

	TRY(row->init(&model, batch->why));
	status = describe(row, rules->symbols[length], &model, &subject,
			  batch->why);
	batch->sample = (struct sample_rules){
		.name = row->name,
		.model = &model,
		.symbols = rules->symbols[length],
		.order = subject.order,
		.orders = rules->orders,
		.gap = rules->gap[length],
	};
	batch->codes = rules->codes[length];
	if (status == STATUS_OK)
		status =
			run_samples(batch, rules->runs[length], &subject, made);
	source_model_release(&model);
	return status;
}

static bool is_wanted(const struct calibration_rules *rules, size_t length,
		      const struct frozen_source *row)
{
	if (rules->source)
		return strcmp(rules->source, row->name) == 0;
	return row->alphabet >= rules->alphabet_least[length];
}

static size_t count_wanted(const struct calibration_rules *rules, size_t length)
{
	const struct frozen_source *row;
	size_t count = 0;

	for (size_t i = 0; (row = frozen_at(i)); i++)
		count += is_wanted(rules, length, row);
	return count;
}

static double total_symbols(const struct calibration_rules *rules)
{
	double total = 0;

	for (size_t i = 0; i < rules->length_count; i++)
		total += (double)rules->symbols[i] * (double)rules->runs[i] *
			 (double)count_wanted(rules, i);
	return total;
}

static enum status run_cases(struct batch *batch,
			     struct calibration *calibration)
{
	const struct calibration_rules *rules = batch->rules;

	for (size_t length = 0; length < rules->length_count; length++) {
		const struct frozen_source *row;

		for (size_t i = 0; (row = frozen_at(i)); i++) {
			struct calibration_case *made =
				&calibration->cases[calibration->case_count];

			if (!is_wanted(rules, length, row))
				continue;
			TRY(run_case(batch, length, row, made));
			calibration->case_count++;
		}
	}
	return STATUS_OK;
}

static enum status run_all(struct calibration *made, struct reason *why)
{
	struct stopwatch watch;
	struct batch batch = {
		.rules = &made->rules,
		.lock = PTHREAD_MUTEX_INITIALIZER,
		.why = why,
		.total = total_symbols(&made->rules),
		.watch = &watch,
	};
	enum status status;

	stopwatch_start(&watch);
	status = run_cases(&batch, made);
	(void)pthread_mutex_destroy(&batch.lock);
	made->seconds = stopwatch_seconds(&watch);
	return status;
}

enum status calibration_run(const struct calibration_rules *rules,
			    struct calibration *calibration, struct reason *why)
{
	struct calibration made = {.rules = *rules};
	size_t wanted = 0;
	struct reason words = {""};
	enum status status;

	for (size_t i = 0; i < rules->length_count; i++)
		wanted += count_wanted(rules, i);
	if (!wanted)
		return reason_give(why, STATUS_BAD_USAGE,
				   "no source %s on the frozen list; leave "
				   "--source out to see them all",
				   rules->source);
	TRY(memory_new_zeroed(wanted, sizeof(*made.cases), &made.cases));
	status = run_all(&made, &words);
	if (status != STATUS_OK) {
		calibration_release(&made);
		return reason_give(why, status, "%s",
				   words.text[0] ? words.text
						 : status_words(status));
	}
	*calibration = made;
	return STATUS_OK;
}

void calibration_release(struct calibration *calibration)
{
	memory_free(calibration->cases);
	*calibration = (struct calibration){0};
}
