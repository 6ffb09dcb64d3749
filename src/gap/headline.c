#include "gap/headline.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

#include "base/memory.h"
#include "estimate/estimator.h"
#include "gap/fitted.h"
#include "gap/gram_orders.h"

bool method_is_code(const char *method)
{
	const struct estimator *row = estimator_find(method);

	return row && row->is_code;
}

static const char *leaning_of(const char *method)
{
	static const char *const words[] = {
		[LEANS_ABOVE] = "above",
		[LEANS_NONE] = "none",
		[LEANS_UNKNOWN] = "unknown",
	};
	const struct estimator *row = estimator_find(method);

	return words[row ? row->leans : LEANS_UNKNOWN];
}

static const struct series *lowest(const struct findings *findings)
{
	const struct series *best = findings->series;

	for (size_t i = 1; i < findings->series_count; i++) {
		if (findings->series[i].costs.headline_q16 <
		    best->costs.headline_q16)
			best = &findings->series[i];
	}
	return best;
}

bool code_contribution(const struct method_fact *fact,
		       struct contribution *contribution, unsigned *order)
{
	const struct findings *findings = &fact->findings;
	const struct series *best;

	if (fact->outcome != OUTCOME_DONE || !findings->series_count)
		return false;
	best = lowest(findings);
	*contribution = contribution_of_series(
		best, bits_from_q16(best->costs.headline_q16) +
			      log2((double)findings->series_count));
	contribution->learns = true;
	if (order)
		*order = best->order;
	return true;
}

/* The corrected entropy at the trusted order; the plug-in blocks shifted. */
static bool ngram_headline(const struct corpus_view *view,
			   struct estimate_row *row,
			   struct contribution *contribution)
{
	const struct series *series =
		series_of_order(&row->fact->findings, view->trusted_order);

	if (!view->trusted_order || !series) {
		row->interval = interval_none("no order can be trusted: %.150s",
					      view->trust_limit);
		return false;
	}
	row->order = view->trusted_order;
	*contribution = contribution_of_grassberger(view, series);
	return true;
}

/* The row's headline in bits; false: none, and the row says why. */
static bool headline(const struct corpus_view *view, struct estimate_row *row,
		     struct contribution *contribution)
{
	const struct findings *findings = &row->fact->findings;
	const struct series *series = findings->series;

	if (row->fact->outcome != OUTCOME_DONE || !findings->series_count)
		return false;
	if (strcmp(row->fact->method, "ngram") == 0)
		return ngram_headline(view, row, contribution);
	if (row->is_code)
		return code_contribution(row->fact, contribution, &row->order);
	if (strcmp(row->fact->method, "crossfit") == 0) {
		series = lowest(findings);
		row->order = series->order;
		*contribution = contribution_of_crossfit(view, series);
		return true;
	}
	row->order = series->order;
	*contribution = contribution_of_series(
		series, bits_from_q16(series->costs.headline_q16));
	return true;
}

static enum status fill(const struct corpus_view *view,
			const struct ground *ground, struct estimate_row *row)
{
	struct contribution contribution;

	row->known = headline(view, row, &contribution);
	if (!row->known) {
		if (row->interval.reason[0] == '\0')
			row->interval =
				interval_none("%.190s", row->fact->reason);
		return STATUS_OK;
	}
	row->bits_per_symbol = contribution.total_bits / (double)view->fact->n;
	if (strcmp(row->leans, "unknown") == 0) {
		row->interval = interval_none(
			"a diagnostic that may lie on either side of the rate; "
			"take crossfit or a code for an interval");
		return STATUS_OK;
	}
	return ground_interval(ground, &contribution, NULL, &row->interval,
			       NULL);
}

enum status headlines_init(struct corpus_view *view,
			   const struct ground *ground)
{
	const struct corpus_fact *fact = view->fact;

	TRY(memory_new_zeroed(fact->method_count, sizeof(*view->estimates),
			      &view->estimates));
	view->estimate_count = fact->method_count;
	for (size_t i = 0; i < fact->method_count; i++) {
		struct estimate_row *row = &view->estimates[i];

		row->fact = &fact->methods[i];
		row->leans = leaning_of(row->fact->method);
		row->is_code = method_is_code(row->fact->method);
		TRY(fill(view, ground, row));
	}
	return STATUS_OK;
}
