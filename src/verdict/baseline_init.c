#include "verdict/baseline.h"

#include <stdio.h>
#include <string.h>

#include "base/memory.h"
#include "verdict/pairing.h"

/* Intervals as reports have them, so that both tell the same story. */
static void keep_text(char *to, size_t room, const char *text)
{
	(void)snprintf(to, room, "%s", text ? text : "");
}

const struct cell_fact *yardstick_cell(const struct corpus_fact *corpus,
				       const char *yardstick)
{
	const struct cell_fact *found = NULL;

	for (size_t i = 0; *yardstick && i < corpus->cell_count; i++) {
		const struct cell_fact *cell = &corpus->cells[i];
		struct cell_key key = cell->key;

		key.layout[0] = '\0';
		if (!cell_is_sound(cell) ||
		    strcmp(cell_words(&key).text, yardstick) != 0)
			continue;
		if (!cell->page_bytes)
			return cell;
		if (!found)
			found = cell;
	}
	return found;
}

struct relative relative_of(double value, double yardstick)
{
	struct relative relative = {.known = value > 0 && yardstick > 0};

	if (relative.known)
		relative.value = value / yardstick;
	return relative;
}

struct relative relative_memory(uint64_t bytes, uint64_t yardstick)
{
	if (bytes == CELL_MEMORY_UNKNOWN || yardstick == CELL_MEMORY_UNKNOWN)
		return (struct relative){.known = false};
	return relative_of((double)bytes, (double)yardstick);
}

/* Shorter passes are mostly set-up and the state of caches: no basis. */
#define SECONDS_LEAST 0.001

static struct relative relative_time(double seconds, double yardstick)
{
	if (seconds < SECONDS_LEAST || yardstick < SECONDS_LEAST)
		return (struct relative){.known = false};
	return relative_of(seconds, yardstick);
}

static void find_ratios(const struct cell_fact *cell,
			const struct cell_fact *yardstick,
			struct relative ratios[RATIO_COUNT])
{
	/* A yardstick is no measure of itself. */
	if (!yardstick || cell == yardstick)
		return;
	ratios[RATIO_ENCODE_MEMORY] =
		relative_memory(cell->facts.encode_memory_bytes,
				yardstick->facts.encode_memory_bytes);
	ratios[RATIO_DECODE_MEMORY] =
		relative_memory(cell->facts.decode_memory_bytes,
				yardstick->facts.decode_memory_bytes);
	if (!cell->timed || !yardstick->timed)
		return;
	ratios[RATIO_ENCODE_TIME] =
		relative_time(cell->timing.encode_cpu_seconds,
			      yardstick->timing.encode_cpu_seconds);
	ratios[RATIO_DECODE_TIME] =
		relative_time(cell->timing.decode_cpu_seconds,
			      yardstick->timing.decode_cpu_seconds);
}

static void find_gap(const struct corpus_view *view, const struct cell_row *row,
		     struct baseline_cell *cell)
{
	cell->has_gap = row->known && row->has_percent;
	if (!cell->has_gap)
		return;
	cell->gap = cell->gap_least = row->gap_percent / 100;
	if (view->fact->rolling && row->gap_interval.known)
		cell->gap_least =
			row->gap_interval.low / view->floor.bits_per_symbol;
}

static void fill_cell(const struct corpus_view *view, size_t i,
		      const struct cell_fact *yardstick,
		      struct baseline_cell *cell)
{
	const struct cell_fact *fact = &view->fact->cells[i];

	keep_text(cell->corpus, sizeof(cell->corpus), view->fact->name);
	cell->key = fact->key;
	cell->ran = fact->outcome == OUTCOME_DONE || fact->facts.bytes > 0;
	cell->lossless = cell_is_sound(fact);
	keep_text(cell->reason, sizeof(cell->reason), fact->reason);
	if (!cell->lossless)
		return;
	cell->bytes = fact->facts.bytes;
	find_ratios(fact, yardstick, cell->ratios);
	find_gap(view, &view->cells[i], cell);
}

static void fill_corpus(const struct corpus_view *view,
			struct baseline_corpus *corpus)
{
	const struct corpus_fact *fact = view->fact;

	keep_text(corpus->name, sizeof(corpus->name), fact->name);
	corpus->outcome = fact->outcome;
	keep_text(corpus->reason, sizeof(corpus->reason), fact->reason);
	corpus->kind = fact->kind;
	corpus->rolling = fact->rolling;
	corpus->n = fact->n;
	keep_text(corpus->sha256, sizeof(corpus->sha256), fact->sha256);
	corpus->floor_known = view->floor.known;
	corpus->floor_by_codec = view->floor.known && view->floor.by_codec;
	keep_text(corpus->floor_held_by, sizeof(corpus->floor_held_by),
		  view->floor.held_by);
	corpus->floor_bits_per_symbol = view->floor.bits_per_symbol;
	for (size_t i = 0; i < fact->method_count; i++) {
		const struct method_fact *method = &fact->methods[i];

		if (method->outcome == OUTCOME_FAILED && !corpus->broken[0])
			(void)snprintf(corpus->broken, sizeof(corpus->broken),
				       "%.60s: %.120s", method->method,
				       method->reason ? method->reason : "");
	}
}

static enum status find_pairs(const struct survey *survey,
			      const struct corpus_fact *fact,
			      const struct cell_fact *yardstick,
			      struct baseline_cell *cells)
{
	struct ground ground;
	struct lengths lengths;
	struct pairing pairing = {&ground, &lengths, yardstick};
	enum status status;

	TRY(ground_init(&ground, survey, fact, &analysis_usual));
	status = lengths_init(&lengths, fact);
	if (status == STATUS_OK) {
		for (size_t i = 0; status == STATUS_OK && i < fact->cell_count;
		     i++) {
			if (cells[i].lossless)
				status = pairing_find(&pairing, &fact->cells[i],
						      &cells[i].pair);
		}
		lengths_release(&lengths);
	}
	ground_release(&ground);
	return status;
}

static void fill_head(struct baseline *baseline, const struct survey *survey)
{
	keep_text(baseline->program, sizeof(baseline->program),
		  survey->program);
	keep_text(baseline->set_name, sizeof(baseline->set_name),
		  survey->set_name);
	keep_text(baseline->started, sizeof(baseline->started),
		  survey->started);
	keep_text(baseline->yardstick, sizeof(baseline->yardstick),
		  survey->yardstick);
	baseline->survey = survey->id;
	baseline->seed = survey->seed;
	baseline->orders = survey->orders;
	baseline->gap_limit = survey->gap_limit;
	baseline->tolerance = survey->tolerance;
	baseline->speed_tolerance = survey->speed_tolerance;
}

static enum status make_room(struct baseline *baseline,
			     const struct analysis *analysis)
{
	const struct survey *survey = analysis->survey;
	size_t cells = 0;

	for (size_t i = 0; i < analysis->corpus_count; i++)
		cells += analysis->corpora[i].fact->cell_count;
	TRY(memory_new_zeroed(survey->library_count,
			      sizeof(*baseline->libraries),
			      &baseline->libraries));
	TRY(memory_new_zeroed(analysis->corpus_count,
			      sizeof(*baseline->corpora), &baseline->corpora));
	TRY(memory_new_zeroed(cells, sizeof(*baseline->cells),
			      &baseline->cells));
	baseline->library_count = survey->library_count;
	if (survey->library_count)
		memcpy(baseline->libraries, survey->libraries,
		       survey->library_count * sizeof(*survey->libraries));
	return STATUS_OK;
}

static enum status fill(struct baseline *baseline,
			const struct analysis *analysis)
{
	TRY(make_room(baseline, analysis));
	for (size_t i = 0; i < analysis->corpus_count; i++) {
		const struct corpus_view *view = &analysis->corpora[i];
		const struct corpus_fact *fact = view->fact;
		const struct cell_fact *yardstick =
			yardstick_cell(fact, analysis->survey->yardstick);
		struct baseline_cell *cells =
			baseline->cells + baseline->cell_count;

		fill_corpus(view, &baseline->corpora[baseline->corpus_count++]);
		for (size_t j = 0; j < view->cell_count; j++)
			fill_cell(view, j, yardstick, &cells[j]);
		if (fact->rolling && fact->n)
			TRY(find_pairs(analysis->survey, fact, yardstick,
				       cells));
		baseline->cell_count += view->cell_count;
	}
	return STATUS_OK;
}

enum status baseline_init(struct baseline *baseline,
			  const struct analysis *analysis, struct reason *why)
{
	struct baseline made = {.survey = 0};
	enum status status;

	fill_head(&made, analysis->survey);
	status = fill(&made, analysis);
	if (status != STATUS_OK) {
		baseline_release(&made);
		return reason_give(why, status,
				   "out of memory while reading figures off "
				   "the survey");
	}
	baseline_sort(&made);
	*baseline = made;
	return STATUS_OK;
}
