#include "run/retime.h"

#include "base/sum.h"
#include "run/measure.h"
#include "run/resident.h"
#include "run/stopwatch.h"

#include <stdio.h>
#include <string.h>

/* CPU seconds that a reading lasts at least: the clock's ticks and a cold cache
 * are then small against it. */
#define ENCODE_SECONDS 0.02
#define DECODE_SECONDS 0.005
#define READINGS_MOST 200

static const struct cell_clock clock_of_thread = {thread_cpu_seconds,
						  wall_seconds};

/* The two cells, and the corpus they run on. */
struct pair {
	const struct plan_cell *cell, *yardstick;
	struct slice input;
};

static const struct plan_cell *find_cell(const struct plan *plan,
					 const struct cell_key *key)
{
	for (size_t i = 0; i < plan->cell_count; i++) {
		const struct plan_cell *cell = &plan->cells[i];
		char layout[CELL_NAME_BYTES];

		layout_format(cell->page_bytes, layout);
		if (strcmp(cell->codec->name, key->codec) == 0 &&
		    strcmp(cell->setting.text, key->level) == 0 &&
		    strcmp(layout, key->layout) == 0)
			return cell;
	}
	return NULL;
}

/* As verdict's yardstick_cell: layout whole, or else its first one. */
static const struct plan_cell *find_yardstick(const struct plan *plan,
					      const char *yardstick)
{
	const struct plan_cell *found = NULL;

	for (size_t i = 0; i < plan->cell_count; i++) {
		const struct plan_cell *cell = &plan->cells[i];
		char name[2 * CELL_NAME_BYTES + 2];

		(void)snprintf(name, sizeof(name), "%s%s%s", cell->codec->name,
			       cell->setting.text[0] ? " " : "",
			       cell->setting.text);
		if (strcmp(name, yardstick) != 0)
			continue;
		if (!cell->page_bytes)
			return cell;
		if (!found)
			found = cell;
	}
	return found;
}

static const struct set_corpus *find_corpus(const struct set *set,
					    const char *name)
{
	for (size_t i = 0; i < set->corpus_count; i++) {
		if (strcmp(set->corpora[i].name, name) == 0)
			return &set->corpora[i];
	}
	return NULL;
}

/* Mean seconds of one encode and one decode. */
static MUST_USE enum status read_times(const struct plan_cell *cell,
				       struct slice input,
				       struct cell_round *mean,
				       struct reason *why)
{
	struct cell_round sum = {0, 0, 0, 0};
	unsigned readings = 0;

	while (readings < READINGS_MOST && (sum.encode_cpu < ENCODE_SECONDS ||
					    sum.decode_cpu < DECODE_SECONDS)) {
		struct cell_round round;

		TRY(cell_time(cell->codec, &cell->setting, cell->page_bytes,
			      input, &clock_of_thread, &round, why));
		sum.encode_cpu += round.encode_cpu;
		sum.decode_cpu += round.decode_cpu;
		readings++;
	}
	mean->encode_cpu = sum.encode_cpu / readings;
	mean->decode_cpu = sum.decode_cpu / readings;
	return STATUS_OK;
}

static struct relative over(double value, double yardstick)
{
	struct relative ratio = {.known = value > 0 && yardstick > 0};

	if (ratio.known)
		ratio.value = value / yardstick;
	return ratio;
}

static struct relative median_of(double *values, unsigned count)
{
	struct relative median = {.known = count > 0};

	sort_reals(values, count);
	if (count)
		median.value = quantile_sorted(values, count, 0.5);
	return median;
}

static MUST_USE enum status time_pair(const struct retime_job *job,
				      const struct pair *pair,
				      struct relative ratios[RATIO_COUNT],
				      struct reason *why)
{
	double encode[RETIME_ROUNDS_MAX], decode[RETIME_ROUNDS_MAX];
	unsigned encodes = 0, decodes = 0;

	for (unsigned i = 0; i < job->rounds; i++) {
		struct cell_round cell = {0}, yardstick = {0};
		struct relative ratio;

		if (job->stop && *job->stop)
			return reason_give(why, STATUS_CANCELLED, "stopped");
		TRY(read_times(pair->yardstick, pair->input, &yardstick, why));
		TRY(read_times(pair->cell, pair->input, &cell, why));
		ratio = over(cell.encode_cpu, yardstick.encode_cpu);
		if (ratio.known)
			encode[encodes++] = ratio.value;
		ratio = over(cell.decode_cpu, yardstick.decode_cpu);
		if (ratio.known)
			decode[decodes++] = ratio.value;
	}
	ratios[RATIO_ENCODE_TIME] = median_of(encode, encodes);
	ratios[RATIO_DECODE_TIME] = median_of(decode, decodes);
	return STATUS_OK;
}

static void weigh_pair(const struct pair *pair, const struct resident *resident,
		       struct relative ratios[RATIO_COUNT])
{
	struct cell_fact cell, yardstick;

	measure_cell(pair->cell, &resident->sequence, &resident->cuts, &cell);
	measure_cell(pair->yardstick, &resident->sequence, &resident->cuts,
		     &yardstick);
	ratios[RATIO_ENCODE_MEMORY] =
		over((double)cell.facts.encode_memory_bytes,
		     (double)yardstick.facts.encode_memory_bytes);
	ratios[RATIO_DECODE_MEMORY] =
		over((double)cell.facts.decode_memory_bytes,
		     (double)yardstick.facts.decode_memory_bytes);
	cell_fact_release(&cell);
	cell_fact_release(&yardstick);
}

static MUST_USE enum status measure_pair(const struct retime_job *job,
					 struct resident *resident,
					 struct pair *pair,
					 struct relative ratios[RATIO_COUNT],
					 struct reason *why)
{
	enum status status = resident_take(resident, memory_available());

	if (status != STATUS_OK) {
		*why = resident->why;
		return status;
	}
	if (strcmp(resident->corpus.sha256, job->sha256) != 0)
		return reason_give(why, STATUS_MISMATCH,
				   "%s has other bytes now than when it was "
				   "surveyed",
				   job->corpus);
	pair->input = (struct slice){resident->sequence.canonical,
				     resident->sequence.canonical_bytes};
	TRY(time_pair(job, pair, ratios, why));
	weigh_pair(pair, resident, ratios);
	return STATUS_OK;
}

enum status retime(const struct retime_job *job,
		   struct relative ratios[RATIO_COUNT], struct reason *why)
{
	const struct set_corpus *corpus = find_corpus(job->set, job->corpus);
	struct pair pair = {
		.cell = find_cell(job->plan, job->key),
		.yardstick = find_yardstick(job->plan, job->yardstick),
	};
	struct relative made[RATIO_COUNT] = {{.known = false}};
	struct resident resident = {.declared = NULL};
	enum status status;

	if (!corpus || !pair.cell || !pair.yardstick)
		return reason_give(why, STATUS_NOT_FOUND,
				   "%s has no %s to measure again",
				   job->set->path,
				   !corpus      ? job->corpus
				   : !pair.cell ? job->key->codec
						: job->yardstick);
	TRY(resident_init(&resident, corpus, 1));
	status = measure_pair(job, &resident, &pair, made, why);
	resident_drop(&resident);
	resident_release(&resident);
	if (status == STATUS_OK)
		memcpy(ratios, made, sizeof(made));
	return status;
}
