#include "run/survey_run.h"

#include "base/pool.h"
#include "run/measure.h"
#include "run/resident.h"
#include "run/resume.h"
#include "run/stopwatch.h"
#include "run/timing.h"

#include <pthread.h>
#include <stdio.h>
#include <string.h>

/* Everything the threads of one run share. */
struct run {
	const struct plan *plan;
	const struct run_rules *rules;
	struct ledger *ledger;
	int64_t survey;
	struct resident *resident; /* one for every corpus of the set */
	bool *corpus_written;      /* likewise; under lock */
	bool *item_done;           /* one for every item: found on resuming */
	pthread_mutex_t lock;      /* ledger, progress, counts, status */
	enum status status;        /* first failure of the ledger */
	struct reason why;
	struct run_outcome outcome;
	struct stopwatch watch;
	double work_total, work_done;
	size_t done;
};

static bool must_stop(struct run *run)
{
	bool stop;

	if (run->rules->stop && *run->rules->stop)
		return true;
	(void)pthread_mutex_lock(&run->lock);
	stop = run->status != STATUS_OK;
	(void)pthread_mutex_unlock(&run->lock);
	return stop;
}

/* Under lock. */
static void keep_status(struct run *run, enum status status,
			const struct reason *why)
{
	if (status == STATUS_OK || run->status != STATUS_OK)
		return;
	run->status = status;
	run->why = *why;
}

/* Under lock. */
static void write_corpus(struct run *run, size_t corpus)
{
	struct corpus_fact fact;
	struct reason why = {""};
	enum status status;

	if (run->corpus_written[corpus] || run->status != STATUS_OK)
		return;
	status = resident_fact(&run->resident[corpus], &fact);
	if (status != STATUS_OK) {
		(void)reason_give(&why, status, "out of memory");
		keep_status(run, status, &why);
		return;
	}
	status = ledger_put_corpus(run->ledger, run->survey, corpus, &fact,
				   &why);
	keep_status(run, status, &why);
	run->corpus_written[corpus] = true;
	run->outcome.failed += fact.outcome == OUTCOME_FAILED;
	run->outcome.skipped += fact.outcome == OUTCOME_SKIPPED;
	corpus_fact_release(&fact);
}

/* Under lock. */
static void report_progress(struct run *run, const char *corpus,
			    const char *what)
{
	double share =
		run->work_total > 0 ? run->work_done / run->work_total : 1;
	struct run_progress progress = {
		.done = run->done,
		.total = run->plan->item_count,
		.share = share,
		.seconds = stopwatch_seconds(&run->watch),
		.seconds_left = -1,
		.corpus = corpus,
		.what = what,
	};

	if (share > 0.01)
		progress.seconds_left = progress.seconds * (1 - share) / share;
	if (run->rules->watch)
		run->rules->watch(run->rules->context, &progress);
}

static void finish_item(struct run *run, const struct plan_item *item,
			const char *what)
{
	(void)pthread_mutex_lock(&run->lock);
	run->done++;
	run->work_done += item->work;
	report_progress(run, run->plan->set->corpora[item->corpus].name, what);
	(void)pthread_mutex_unlock(&run->lock);
}

static void put_cell(struct run *run, const struct plan_item *item,
		     const struct cell_fact *cell)
{
	struct reason why = {""};
	enum status status;

	(void)pthread_mutex_lock(&run->lock);
	write_corpus(run, item->corpus);
	if (run->status == STATUS_OK) {
		status = ledger_put_cell(
			run->ledger, run->survey,
			run->plan->set->corpora[item->corpus].name,
			item->cell->place, cell, &why);
		keep_status(run, status, &why);
		run->outcome.failed += cell->outcome == OUTCOME_FAILED;
	}
	(void)pthread_mutex_unlock(&run->lock);
}

static void put_method(void *context, const struct plan_item *item,
		       size_t place, const struct method_fact *method)
{
	struct run *run = context;
	struct reason why = {""};
	enum status status;

	(void)pthread_mutex_lock(&run->lock);
	write_corpus(run, item->corpus);
	if (run->status == STATUS_OK) {
		status = ledger_put_method(
			run->ledger, run->survey,
			run->plan->set->corpora[item->corpus].name, place,
			method, &why);
		keep_status(run, status, &why);
		run->outcome.failed += method->outcome == OUTCOME_FAILED;
	}
	(void)pthread_mutex_unlock(&run->lock);
}

static void run_cell(struct run *run, const struct plan_item *item,
		     const struct resident *resident)
{
	struct cell_fact cell;
	char what[2 * CELL_NAME_BYTES + 2];

	measure_cell(item->cell, &resident->sequence, &resident->cuts, &cell);
	put_cell(run, item, &cell);
	(void)snprintf(what, sizeof(what), "%s %s", cell.key.codec,
		       cell.key.level);
	cell_fact_release(&cell);
	finish_item(run, item, what);
}

static void run_rows(struct run *run, const struct plan_item *item,
		     const struct resident *resident)
{
	const struct measure_rows job = {
		.item = item,
		.sequence = &resident->sequence,
		.cuts = &resident->cuts,
		.orders = run->rules->orders,
		.put = put_method,
		.context = run,
	};

	measure_rows(&job);
	finish_item(run, item, item->rows->row[0]->name);
}

static void run_item(void *context, size_t i)
{
	struct run *run = context;
	const struct plan_item *item = &run->plan->items[i];
	struct resident *resident = &run->resident[item->corpus];
	enum status status;

	if (run->item_done[i] || must_stop(run))
		return;
	status = resident_take(resident, memory_available());
	if (status != STATUS_OK) {
		(void)pthread_mutex_lock(&run->lock);
		write_corpus(run, item->corpus);
		(void)pthread_mutex_unlock(&run->lock);
		finish_item(run, item, "skipped");
	} else if (item->cell) {
		run_cell(run, item, resident);
	} else {
		run_rows(run, item, resident);
	}
	resident_drop(resident);
}

static MUST_USE enum status init_residents(struct run *run)
{
	const struct set *set = run->plan->set;

	TRY(memory_new_zeroed(set->corpus_count, sizeof(*run->resident),
			      &run->resident));
	TRY(memory_new_zeroed(set->corpus_count, sizeof(*run->corpus_written),
			      &run->corpus_written));
	TRY(memory_new_zeroed(run->plan->item_count, sizeof(*run->item_done),
			      &run->item_done));
	for (size_t i = 0; i < set->corpus_count; i++)
		TRY(resident_init(&run->resident[i], &set->corpora[i], 0));
	return STATUS_OK;
}

static MUST_USE enum status take_up(struct run *run, const char *digest,
				    struct reason *why)
{
	struct survey held = {0};

	TRY(ledger_resume(run->ledger, digest, &run->survey, why));
	TRY(ledger_read(run->ledger, run->survey, &held, why));
	for (size_t i = 0; i < run->plan->item_count; i++) {
		run->item_done[i] =
			resume_holds(&held, run->plan, &run->plan->items[i]);
		run->done += run->item_done[i];
	}
	run->outcome.failed += resume_failed(&held);
	survey_release(&held);
	return STATUS_OK;
}

static MUST_USE enum status begin_survey(struct run *run, struct reason *why)
{
	struct survey survey = {.seed = run->rules->seed,
				.orders = run->rules->orders,
				.gap_limit = run->plan->set->gap_limit,
				.tolerance = run->plan->set->tolerance,
				.speed_tolerance =
					run->plan->set->speed_tolerance};
	char digest[RESUME_DIGEST_BYTES];
	enum status status;

	TRY(resume_digest(run->plan, run->rules, digest));
	if (run->rules->resume)
		return take_up(run, digest, why);
	(void)snprintf(survey.set_name, sizeof(survey.set_name), "%s",
		       run->plan->set->name);
	(void)snprintf(survey.program, sizeof(survey.program), "%s",
		       run->rules->program);
	(void)snprintf(survey.yardstick, sizeof(survey.yardstick), "%s",
		       run->plan->set->yardstick);
	(void)snprintf(survey.set_path, sizeof(survey.set_path), "%s",
		       run->plan->set->path);
	TRY(measure_libraries(run->plan, &survey));
	status = ledger_begin(run->ledger, &survey, digest, why);
	run->survey = survey.id;
	survey_release(&survey);
	return status;
}

static void count_work(struct run *run)
{
	for (size_t i = 0; i < run->plan->item_count; i++) {
		if (run->item_done[i])
			continue;
		run->work_total += run->plan->items[i].work;
		run->resident[run->plan->items[i].corpus].users++;
	}
}

static MUST_USE enum status run_sizes(struct run *run, struct reason *why)
{
	TRY(pool_run(run->plan->item_count, run->rules->jobs, run_item, run));
	if (run->status != STATUS_OK)
		*why = run->why;
	return run->status;
}

static MUST_USE enum status run_all(struct run *run, struct reason *why)
{
	TRY(init_residents(run));
	TRY(begin_survey(run, why));
	count_work(run);
	stopwatch_start(&run->watch);
	TRY(run_sizes(run, why));
	if (run->rules->rounds) {
		const struct timing_job job = {
			.plan = run->plan,
			.rules = run->rules,
			.ledger = run->ledger,
			.survey = run->survey,
			.watch = &run->watch,
		};

		TRY(timing_run(&job, why));
	}
	run->outcome.stopped = run->rules->stop && *run->rules->stop;
	if (run->outcome.stopped)
		return STATUS_OK;
	return ledger_finish(run->ledger, run->survey, why);
}

enum status survey_run(const struct plan *plan, struct ledger *ledger,
		       const struct run_rules *rules,
		       struct run_outcome *outcome, struct reason *why)
{
	struct run run = {.plan = plan, .rules = rules, .ledger = ledger};
	enum status status;

	if (pthread_mutex_init(&run.lock, NULL) != 0)
		return reason_give(why, STATUS_NO_MEMORY, "out of memory");
	status = run_all(&run, why);
	if (status == STATUS_NO_MEMORY && why && !why->text[0])
		(void)reason_give(why, status, "out of memory");
	for (size_t i = 0; run.resident && i < plan->set->corpus_count; i++)
		resident_release(&run.resident[i]);
	memory_free(run.resident);
	memory_free(run.corpus_written);
	memory_free(run.item_done);
	(void)pthread_mutex_destroy(&run.lock);
	if (status == STATUS_OK) {
		*outcome = run.outcome;
		outcome->survey = run.survey;
	}
	return status;
}
