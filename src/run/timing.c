#include "run/timing.h"

#include "base/sum.h"
#include "run/resident.h"

#include <stdio.h>
#include <string.h>

#define ROUNDS_MAX 99

/* One cell to time, with a round's readings in each column. */
struct timed {
	const struct plan_item *item;
	bool failed;
	double encode_cpu[ROUNDS_MAX], encode_wall[ROUNDS_MAX];
	double decode_cpu[ROUNDS_MAX], decode_wall[ROUNDS_MAX];
	uint64_t encode_peak_bytes, decode_peak_bytes;
};

const struct cell_clock timing_clock = {process_cpu_seconds, wall_seconds};

/* The cells of a corpus that are good and not timed yet. */
static size_t choose(const struct timing_job *job, size_t corpus,
		     const struct corpus_fact *held, struct timed *timed)
{
	size_t count = 0;

	for (size_t i = 0; i < job->plan->item_count; i++) {
		const struct plan_item *item = &job->plan->items[i];
		const struct cell_fact *fact;

		if (item->corpus != corpus || !item->cell)
			continue;
		fact = plan_cell_held(held, item->cell);
		if (!fact || fact->outcome != OUTCOME_DONE || fact->timed)
			continue;
		timed[count++] = (struct timed){.item = item};
	}
	return count;
}

/*
 * CPU seconds that a reading lasts at least: the clock's ticks and a cold cache
 * are then small against it. Dictionaries would be trained again each time.
 */
#define ENCODE_SECONDS 0.010
#define DECODE_SECONDS 0.002
#define READINGS_MOST 50

static void raise_to(uint64_t *most, uint64_t value)
{
	if (value > *most)
		*most = value;
}

/* Mean of as many readings as it takes. */
static MUST_USE enum status read_times(const struct plan_cell *cell,
				       struct slice input,
				       struct cell_round *mean,
				       struct reason *why)
{
	struct cell_round sum = {0};
	unsigned readings = 0;

	do {
		struct cell_round one;

		TRY(cell_time(cell->codec, &cell->setting, cell->page_bytes,
			      input, &timing_clock, &one, why));
		sum.encode_cpu += one.encode_cpu;
		sum.encode_wall += one.encode_wall;
		sum.decode_cpu += one.decode_cpu;
		sum.decode_wall += one.decode_wall;
		raise_to(&sum.encode_peak_bytes, one.encode_peak_bytes);
		raise_to(&sum.decode_peak_bytes, one.decode_peak_bytes);
		readings++;
	} while (!cell->setting.dictionary_bytes && readings < READINGS_MOST &&
		 (sum.encode_cpu < ENCODE_SECONDS ||
		  sum.decode_cpu < DECODE_SECONDS));
	*mean = (struct cell_round){
		sum.encode_cpu / readings, sum.encode_wall / readings,
		sum.decode_cpu / readings, sum.decode_wall / readings,
		sum.encode_peak_bytes,     sum.decode_peak_bytes};
	return STATUS_OK;
}

static void time_round(const struct resident *resident, struct timed *timed,
		       unsigned round)
{
	const struct plan_cell *cell = timed->item->cell;
	const struct slice input = {resident->sequence.canonical,
				    resident->sequence.canonical_bytes};
	struct cell_round reading;
	struct reason why;

	if (read_times(cell, input, &reading, &why) != STATUS_OK) {
		timed->failed = true;
		return;
	}
	timed->encode_cpu[round] = reading.encode_cpu;
	timed->encode_wall[round] = reading.encode_wall;
	timed->decode_cpu[round] = reading.decode_cpu;
	timed->decode_wall[round] = reading.decode_wall;
	raise_to(&timed->encode_peak_bytes, reading.encode_peak_bytes);
	raise_to(&timed->decode_peak_bytes, reading.decode_peak_bytes);
}

static double median_of(double *values, unsigned count, double *spread)
{
	double median;

	sort_reals(values, count);
	median = quantile_sorted(values, count, 0.5);
	if (spread)
		*spread = median > 0 ? (values[count - 1] - values[0]) / median
				     : 0;
	return median;
}

static MUST_USE enum status keep_times(const struct timing_job *job,
				       struct timed *timed, unsigned rounds,
				       struct reason *why)
{
	const struct plan_cell *cell = timed->item->cell;
	struct cell_timing timing = {.rounds = rounds};
	struct cell_key key;

	timing.encode_cpu_seconds =
		median_of(timed->encode_cpu, rounds, &timing.encode_spread);
	timing.decode_cpu_seconds =
		median_of(timed->decode_cpu, rounds, &timing.decode_spread);
	timing.encode_wall_seconds =
		median_of(timed->encode_wall, rounds, NULL);
	timing.decode_wall_seconds =
		median_of(timed->decode_wall, rounds, NULL);
	timing.encode_peak_bytes = timed->encode_peak_bytes;
	timing.decode_peak_bytes = timed->decode_peak_bytes;
	(void)snprintf(key.codec, sizeof(key.codec), "%s", cell->codec->name);
	(void)snprintf(key.level, sizeof(key.level), "%s", cell->setting.text);
	layout_format(cell->page_bytes, key.layout);
	return ledger_put_timing(
		job->ledger, job->survey,
		job->plan->set->corpora[timed->item->corpus].name, &key,
		&timing, why);
}

static void tell(const struct timing_job *job, const struct timed *timed,
		 unsigned round)
{
	char what[2 * CELL_NAME_BYTES + 24];
	struct run_progress progress = {
		.done = round,
		.total = job->rules->rounds,
		.share = 1,
		.seconds = stopwatch_seconds(job->watch),
		.seconds_left = -1,
		.corpus = job->plan->set->corpora[timed->item->corpus].name,
		.what = what,
	};

	if (!job->rules->watch)
		return;
	(void)snprintf(what, sizeof(what), "timing %s %s, round %u",
		       timed->item->cell->codec->name,
		       timed->item->cell->setting.text, round + 1);
	job->rules->watch(job->rules->context, &progress);
}

static bool stopped(const struct timing_job *job)
{
	return job->rules->stop && *job->rules->stop;
}

static MUST_USE enum status time_cells(const struct timing_job *job,
				       const struct resident *resident,
				       struct timed *timed, size_t count,
				       struct reason *why)
{
	unsigned rounds = job->rules->rounds;

	for (unsigned round = 0; round < rounds; round++) {
		for (size_t i = 0; i < count; i++) {
			if (stopped(job))
				return STATUS_OK;
			if (timed[i].failed)
				continue;
			tell(job, &timed[i], round);
			time_round(resident, &timed[i], round);
		}
	}
	for (size_t i = 0; i < count; i++) {
		if (!timed[i].failed)
			TRY(keep_times(job, &timed[i], rounds, why));
	}
	return STATUS_OK;
}

static MUST_USE enum status time_corpus(const struct timing_job *job,
					size_t corpus,
					const struct survey *held,
					struct timed *timed, struct reason *why)
{
	const struct set_corpus *declared = &job->plan->set->corpora[corpus];
	const struct corpus_fact *fact = survey_corpus(held, declared->name);
	struct resident resident;
	size_t count;
	enum status status;

	if (!fact || fact->outcome != OUTCOME_DONE || stopped(job))
		return STATUS_OK;
	count = choose(job, corpus, fact, timed);
	if (!count)
		return STATUS_OK;
	TRY(resident_init(&resident, declared, 1));
	status = STATUS_OK;
	if (resident_take(&resident, memory_available()) == STATUS_OK)
		status = time_cells(job, &resident, timed, count, why);
	resident_drop(&resident);
	resident_release(&resident);
	return status;
}

enum status timing_run(const struct timing_job *job, struct reason *why)
{
	struct survey held = {0};
	struct timed *timed;
	enum status status;

	TRY(ledger_read(job->ledger, job->survey, &held, why));
	status = memory_new(job->plan->cell_count, sizeof(*timed), &timed);
	if (status != STATUS_OK) {
		survey_release(&held);
		return status;
	}
	for (size_t i = 0; status == STATUS_OK && i < job->plan->corpus_count;
	     i++)
		status = time_corpus(job, job->plan->corpora[i], &held, timed,
				     why);
	memory_free(timed);
	survey_release(&held);
	return status;
}
