#include "gap/gram_orders.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

#include "base/memory.h"
#include "estimate/ngram_drift.h"
#include "estimate/trust.h"
#include "resample/batches.h"

const struct method_fact *method_done(const struct corpus_fact *fact,
				      const char *method)
{
	for (size_t i = 0; i < fact->method_count; i++) {
		const struct method_fact *row = &fact->methods[i];

		if (row->outcome == OUTCOME_DONE && !row->page_bytes &&
		    row->findings.series_count &&
		    strcmp(row->method, method) == 0)
			return row;
	}
	return NULL;
}

const struct series *series_of_order(const struct findings *findings,
				     unsigned order)
{
	for (size_t i = 0; i < findings->series_count; i++) {
		if (findings->series[i].order == order)
			return &findings->series[i];
	}
	return NULL;
}

bool grams_drift_within(const struct findings *ngram, unsigned order)
{
	double lag1, parts;

	return drift_find(ngram, order, &lag1, &parts) &&
	       lag1_without_bias(lag1, parts) > DRIFT_LAG1;
}

static double symbol_bits(const struct corpus_fact *fact)
{
	return fact->alphabet > 1 ? log2((double)fact->alphabet) : 0;
}

static void fill_rows(struct corpus_view *view, const struct findings *ngram)
{
	double ceiling = symbol_bits(view->fact);
	struct corrected before = {0};

	for (size_t i = 0; i < view->order_count; i++) {
		const struct order_counts *counts = &ngram->orders[i];
		struct order_row *row = &view->orders[i];
		struct corrected here, rate;

		corrected_from_counts(&counts->all,
				      (double)counts->order * ceiling, &here);
		rate = corrected_difference(&here, i ? &before : NULL);
		*row = (struct order_row){
			.order = counts->order,
			.H = here.plugin,
			.h_plugin = rate.plugin,
			.h_corrected = rate.grassberger,
			.h_cwj = rate.chao_wang_jost,
			.coverage = coverage_chao_jost(&counts->all),
			.distinct = counts->all.distinct,
		};
		before = here;
	}
}

/* h of cross-fitting into the rows; how many orders from 1 on have it. */
static size_t fill_crossfit(struct corpus_view *view, double *crossfit)
{
	const struct method_fact *row = method_done(view->fact, "crossfit");
	size_t filled = 0;

	for (size_t i = 0; row && i < view->order_count; i++) {
		const struct series *series =
			series_of_order(&row->findings, view->orders[i].order);

		if (!series)
			break;
		crossfit[i] = bits_from_q16(series->costs.headline_q16) /
			      (double)view->fact->n;
		view->orders[i].has_crossfit = true;
		view->orders[i].h_crossfit = crossfit[i];
		filled = i + 1;
	}
	return filled;
}

static void explain_limit(struct corpus_view *view, const struct trust *trust)
{
	const char *remedy = "about ten times as much data would add an order";

	if (trust->failed == TRUST_ALL_PASSED &&
	    trust->order < view->order_count) {
		(void)snprintf(view->trust_limit, sizeof(view->trust_limit),
			       "order %u could not be cross-fitted; %s",
			       trust->order + 1, remedy);
		return;
	}
	if (trust->failed == TRUST_ALL_PASSED) {
		(void)snprintf(view->trust_limit, sizeof(view->trust_limit),
			       "every order up to %u passes; ask for more with "
			       "--orders",
			       trust->order);
		return;
	}
	if (trust->drifts)
		remedy = "the two halves differ although both are well "
			 "covered: split the corpus where its kind changes";
	(void)snprintf(view->trust_limit, sizeof(view->trust_limit),
		       "order %u fails %s; %s", trust->order + 1,
		       trust_test_name(trust->failed), remedy);
}

static void judge(struct corpus_view *view, const struct findings *ngram,
		  double *crossfit)
{
	size_t fitted = fill_crossfit(view, crossfit);
	size_t count = fitted ? fitted : view->order_count;
	struct trust trust =
		trust_judge(ngram->orders, count, view->fact->alphabet,
			    fitted ? crossfit : NULL);

	view->trusted_order = trust.order;
	for (size_t i = 0; i < view->order_count; i++)
		view->orders[i].trusted = view->orders[i].order <= trust.order;
	explain_limit(view, &trust);
}

enum status gram_orders_init(struct corpus_view *view)
{
	const struct method_fact *row = method_done(view->fact, "ngram");
	double crossfit[FINDING_ORDERS_MAX];
	size_t count = row ? row->findings.order_count : 0;

	if (!count) {
		(void)snprintf(view->trust_limit, sizeof(view->trust_limit),
			       "grams were not counted; survey with the "
			       "estimator ngram");
		return STATUS_OK;
	}
	if (count > FINDING_ORDERS_MAX)
		count = FINDING_ORDERS_MAX;
	TRY(memory_new_zeroed(count, sizeof(*view->orders), &view->orders));
	view->order_count = count;
	fill_rows(view, &row->findings);
	judge(view, &row->findings, crossfit);
	return STATUS_OK;
}

static double half_rate(const struct order_counts *orders, size_t i, int half,
			double ceiling)
{
	struct corrected here, before;

	if (!orders[i].half[half].positions)
		return 0;
	corrected_from_counts(&orders[i].half[half],
			      (double)orders[i].order * ceiling, &here);
	if (i)
		corrected_from_counts(&orders[i - 1].half[half],
				      (double)orders[i - 1].order * ceiling,
				      &before);
	return corrected_difference(&here, i ? &before : NULL).grassberger;
}

void gram_orders_halves(const struct corpus_view *view, double *halves)
{
	const struct method_fact *row = method_done(view->fact, "ngram");
	double ceiling = symbol_bits(view->fact);

	for (size_t i = 0; row && i < view->order_count; i++)
		halves[i] = (half_rate(row->findings.orders, i, 0, ceiling) +
			     half_rate(row->findings.orders, i, 1, ceiling)) /
			    2;
}
