#include "gap/trial.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

#include "base/memory.h"
#include "gap/bracket.h"
#include "gap/fitted.h"
#include "gap/gram_orders.h"
#include "gap/headline.h"

const char *const trial_codes[] = {"mix", "ctw", NULL};

static struct trial_row *add_row(struct trial *trial, const char *name,
				 double bits_per_symbol)
{
	struct trial_row *row = &trial->rows[trial->row_count];

	if (trial->row_count == TRIAL_ROWS_MAX)
		return NULL;
	*row = (struct trial_row){.known = true,
				  .bits_per_symbol = bits_per_symbol};
	(void)snprintf(row->name, sizeof(row->name), "%.*s",
		       (int)sizeof(row->name) - 1, name);
	trial->row_count++;
	return row;
}

/* The same blocks about another mean: an interval only moves. */
static void add_shifted(struct trial *trial, const char *name,
			double bits_per_symbol, double from,
			const struct interval *interval)
{
	struct trial_row *row = add_row(trial, name, bits_per_symbol);

	if (!row || !interval->known)
		return;
	row->has_interval = true;
	row->low = interval->low + (bits_per_symbol - from);
	row->high = interval->high + (bits_per_symbol - from);
}

/* Keeps the place of a row that has nothing to say. */
static void add_unknown(struct trial *trial, const char *name)
{
	struct trial_row *row = add_row(trial, name, 0);

	if (row)
		row->known = false;
}

static enum status find_grams(const struct corpus_view *view,
			      const struct ground *ground, unsigned order,
			      struct trial *trial)
{
	const struct method_fact *method = method_done(view->fact, "ngram");
	const struct series *series =
		method ? series_of_order(&method->findings, order) : NULL;
	const struct order_row *row;
	struct contribution contribution;
	struct interval interval, corrected;

	if (!series || order > view->order_count) {
		add_unknown(trial, "plug-in");
		add_unknown(trial, "grassberger");
		add_unknown(trial, "chao-wang-jost");
		return STATUS_OK;
	}
	row = &view->orders[order - 1];
	contribution = contribution_of_plugin(
		view, series, row->h_plugin * (double)view->fact->n);
	TRY(ground_interval(ground, &contribution, NULL, &interval,
			    &trial->drifts));
	trial->drift_known = interval.effective_blocks > 0;
	trial->drifts |= grams_drift_within(&method->findings, order);
	add_shifted(trial, "plug-in", row->h_plugin, row->h_plugin, &interval);
	contribution = contribution_of_grassberger(view, series);
	TRY(ground_interval(ground, &contribution, NULL, &corrected, NULL));
	add_shifted(trial, "grassberger", row->h_corrected, row->h_corrected,
		    &corrected);
	add_shifted(trial, "chao-wang-jost", row->h_cwj, row->h_plugin,
		    &interval);
	return STATUS_OK;
}

static enum status find_series(const struct ground *ground, const char *name,
			       const struct contribution *contribution,
			       struct trial *trial)
{
	double bits = contribution->total_bits / (double)ground->fact->n;
	struct interval interval;

	TRY(ground_interval(ground, contribution, NULL, &interval, NULL));
	add_shifted(trial, name, bits, bits, &interval);
	return STATUS_OK;
}

static enum status find_crossfit(const struct corpus_view *view,
				 const struct ground *ground, unsigned order,
				 struct trial *trial)
{
	const struct method_fact *method =
		method_done(ground->fact, "crossfit");
	const struct series *series =
		method ? series_of_order(&method->findings, order) : NULL;
	struct contribution contribution;

	if (!series) {
		add_unknown(trial, "crossfit");
		return STATUS_OK;
	}
	contribution = contribution_of_crossfit(view, series);
	return find_series(ground, "crossfit", &contribution, trial);
}

static enum status find_codes(const struct ground *ground,
			      const struct lengths *lengths,
			      struct trial *trial)
{
	for (size_t i = 0; i < lengths->count; i++) {
		const struct length *length = &lengths->rows[i];

		if (length->method && !length->page_bytes)
			TRY(find_series(ground, length->method->method,
					&length->contribution, trial));
	}
	return STATUS_OK;
}

/* The corrected entropy with its plug-in blocks: no learning to drift by. */
static bool corrected_floor(const struct corpus_view *view, unsigned order,
			    struct contribution *floor)
{
	const struct method_fact *method = method_done(view->fact, "ngram");
	const struct series *series =
		method ? series_of_order(&method->findings, order) : NULL;

	if (!series || order > view->order_count)
		return false;
	*floor = contribution_of_grassberger(view, series);
	return true;
}

static enum status find_gap(const struct corpus_view *view,
			    const struct ground *ground, unsigned order,
			    struct trial *trial)
{
	const struct corpus_fact *fact = ground->fact;
	struct interval paired, achieved, reference;
	struct contribution cell, floor;

	if (!fact->cell_count || !cell_is_sound(&fact->cells[0]) ||
	    !corrected_floor(view, order, &floor))
		return STATUS_OK;
	cell = contribution_of_cell(&fact->cells[0],
				    8 * (double)fact->cells[0].facts.bytes);
	TRY(ground_interval(ground, &cell, &floor, &paired, NULL));
	TRY(ground_interval(ground, &cell, NULL, &achieved, NULL));
	TRY(ground_interval(ground, &floor, NULL, &reference, NULL));
	trial->gap_known = paired.known && achieved.known && reference.known;
	trial->gap = (cell.total_bits - floor.total_bits) / (double)fact->n;
	trial->gap_low = paired.low;
	trial->gap_high = paired.high;
	trial->unpaired_width = 2 * hypot(interval_half_width(&achieved),
					  interval_half_width(&reference));
	return STATUS_OK;
}

static const struct length *length_of(const struct lengths *lengths,
				      const char *method)
{
	for (size_t i = 0; i < lengths->count; i++) {
		const struct length *length = &lengths->rows[i];

		if (length->method && !length->page_bytes &&
		    strcmp(length->method->method, method) == 0)
			return length;
	}
	return NULL;
}

static void skip_code(struct trial *trial, const char *name)
{
	struct trial_row *row = add_row(trial, name, 0);

	if (row) {
		row->known = false;
		row->skipped = true;
	}
}

/* all: the lengths of fact, slow codes included. */
static enum status find_slow_codes(const struct corpus_view *view,
				   const struct ground *ground,
				   const struct lengths *all,
				   struct trial *trial)
{
	struct bracket_row bracket;

	for (size_t i = 0; trial_codes[i]; i++) {
		const struct length *length = length_of(all, trial_codes[i]);

		if (!length) {
			skip_code(trial, trial_codes[i]);
			continue;
		}
		trial->codes_ran = true;
		TRY(find_series(ground, trial_codes[i], &length->contribution,
				trial));
	}
	if (!trial->codes_ran)
		return STATUS_OK;
	TRY(bracket_find(view, ground, all, &bracket));
	trial->with_codes = (struct trial_bracket){
		bracket.known, bracket.open_below, bracket.low, bracket.high};
	return STATUS_OK;
}

static enum status find_all(struct corpus_view *view,
			    const struct ground *ground,
			    const struct lengths *lengths, unsigned order,
			    struct trial *trial)
{
	struct bracket_row bracket;

	TRY(find_grams(view, ground, order, trial));
	TRY(find_crossfit(view, ground, order, trial));
	TRY(find_codes(ground, lengths, trial));
	TRY(find_gap(view, ground, order, trial));
	TRY(bracket_find(view, ground, lengths, &bracket));
	trial->trusted_order = view->trusted_order;
	trial->bracket_known = bracket.known;
	trial->open_below = bracket.open_below;
	trial->not_calibrated = bracket.not_calibrated;
	trial->bracket_order = bracket.order;
	trial->bracket_low = bracket.low;
	trial->bracket_high = bracket.high;
	return STATUS_OK;
}

enum status trial_find(const struct corpus_fact *fact, size_t quick,
		       uint64_t seed, const struct analysis_rules *rules,
		       unsigned order, struct trial *trial)
{
	const struct survey survey = {.seed = seed};
	struct corpus_fact quick_fact = *fact;
	struct corpus_view view = {.fact = &quick_fact};
	struct lengths lengths = {0}, all = {0};
	struct trial made = {0};
	struct ground ground;
	enum status status;

	quick_fact.method_count = quick;
	TRY(ground_init(&ground, &survey, &quick_fact, rules));
	status = gram_orders_init(&view);
	if (status == STATUS_OK)
		status = lengths_init(&lengths, &quick_fact);
	if (status == STATUS_OK)
		status = lengths_init(&all, fact);
	if (status == STATUS_OK)
		status = find_all(&view, &ground, &lengths, order, &made);
	if (status == STATUS_OK)
		status = find_slow_codes(&view, &ground, &all, &made);
	lengths_release(&all);
	lengths_release(&lengths);
	memory_free(view.orders);
	ground_release(&ground);
	if (status == STATUS_OK)
		*trial = made;
	return status;
}
