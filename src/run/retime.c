#include "run/retime.h"

#include "base/sum.h"
#include "run/measure.h"
#include "run/resident.h"
#include "run/timing.h"

#include <stdio.h>
#include <string.h>

/* CPU seconds that a round of a cell lasts at least: many short passes find a
 * quiet moment, one long pass is its own average. */
#define ENCODE_SECONDS 0.02
#define DECODE_SECONDS 0.005
#define PASSES_MOST 200
/* A round is not stretched for a quick decoder behind a slow encoder. */
#define ROUND_SECONDS_MOST 0.1
/* Long passes need fewer rounds: so many at least, and no more after so many
 * seconds of CPU. */
#define ROUNDS_LEAST 3
#define SECONDS_MOST 2.0

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

/* The shortest passes of a cell: in this round, and in all so far. */
struct lows {
	double encode, decode;
};

static void lower(struct lows *lows, double encode, double decode)
{
	if (encode > 0 && (!(lows->encode > 0) || encode < lows->encode))
		lows->encode = encode;
	if (decode > 0 && (!(lows->decode > 0) || decode < lows->decode))
		lows->decode = decode;
}

/* Adds the CPU that it took to *spent. */
static MUST_USE enum status time_round(const struct plan_cell *cell,
				       struct slice input, struct lows *lows,
				       double *spent, struct reason *why)
{
	double encode = 0, decode = 0;

	*lows = (struct lows){0, 0};
	for (unsigned i = 0;
	     i < PASSES_MOST && encode + decode < ROUND_SECONDS_MOST &&
	     (encode < ENCODE_SECONDS || decode < DECODE_SECONDS);
	     i++) {
		struct cell_round pass;

		TRY(cell_time(cell->codec, &cell->setting, cell->page_bytes,
			      input, &timing_clock, &pass, why));
		lower(lows, pass.encode_cpu, pass.decode_cpu);
		encode += pass.encode_cpu;
		decode += pass.decode_cpu;
	}
	*spent += encode + decode;
	return STATUS_OK;
}

static bool is_enough(const struct retime_job *job,
		      const struct relative ratios[RATIO_COUNT])
{
	return job->enough &&
	       ratios[RATIO_ENCODE_TIME].value <=
		       job->enough[RATIO_ENCODE_TIME] &&
	       ratios[RATIO_DECODE_TIME].value <=
		       job->enough[RATIO_DECODE_TIME];
}

static double unrest_of(double *rounds, unsigned count, double best)
{
	sort_reals(rounds, count);
	return best > 0 ? quantile_sorted(rounds, count, 0.5) / best - 1 : 0;
}

static MUST_USE enum status time_pair(const struct retime_job *job,
				      const struct pair *pair,
				      struct retime_result *result,
				      struct reason *why)
{
	struct lows cell = {0, 0}, yardstick = {0, 0};
	double rounds[RETIME_ROUNDS], spent = 0;
	unsigned count = 0;

	while (count < RETIME_ROUNDS &&
	       (count < ROUNDS_LEAST || spent < SECONDS_MOST)) {
		struct lows round;

		if (job->stop && *job->stop)
			return reason_give(why, STATUS_CANCELLED, "stopped");
		TRY(time_round(pair->yardstick, pair->input, &round, &spent,
			       why));
		lower(&yardstick, round.encode, round.decode);
		rounds[count++] = round.encode;
		TRY(time_round(pair->cell, pair->input, &round, &spent, why));
		lower(&cell, round.encode, round.decode);
		result->ratios[RATIO_ENCODE_TIME] =
			relative_of(cell.encode, yardstick.encode);
		result->ratios[RATIO_DECODE_TIME] =
			relative_of(cell.decode, yardstick.decode);
		if (count >= ROUNDS_LEAST && is_enough(job, result->ratios))
			break;
	}
	result->unrest = unrest_of(rounds, count, yardstick.encode);
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
		relative_memory(cell.facts.encode_memory_bytes,
				yardstick.facts.encode_memory_bytes);
	ratios[RATIO_DECODE_MEMORY] =
		relative_memory(cell.facts.decode_memory_bytes,
				yardstick.facts.decode_memory_bytes);
	cell_fact_release(&cell);
	cell_fact_release(&yardstick);
}

static MUST_USE enum status measure_pair(const struct retime_job *job,
					 struct resident *resident,
					 struct pair *pair,
					 struct retime_result *result,
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
	TRY(time_pair(job, pair, result, why));
	if (job->memory)
		weigh_pair(pair, resident, result->ratios);
	return STATUS_OK;
}

void retime_wait(unsigned seconds)
{
	const struct timespec wait = {(time_t)seconds, 0};

	(void)nanosleep(&wait, NULL);
}

enum status retime(const struct retime_job *job, struct retime_result *result,
		   struct reason *why)
{
	const struct set_corpus *corpus = find_corpus(job->set, job->corpus);
	struct pair pair = {
		.cell = find_cell(job->plan, job->key),
		.yardstick = find_yardstick(job->plan, job->yardstick),
	};
	struct retime_result made = {.unrest = 0};
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
	status = measure_pair(job, &resident, &pair, &made, why);
	resident_drop(&resident);
	resident_release(&resident);
	if (status == STATUS_OK)
		*result = made;
	return status;
}
