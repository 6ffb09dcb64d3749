#include "gap/bracket.h"

#include <math.h>
#include <stdarg.h>
#include <stdio.h>

#include "gap/fitted.h"
#include "gap/gram_orders.h"

/* How far an order may move between half of the data and all of it. */
#define STABLE_SHARE 0.02
/* Chao-Jost coverage below which corrections fall short by a percent. */
#define COVERAGE_LEAST 0.9
#define UNSEEN_SHARE 0.01

/* What the edges are made of while they are found. */
struct edges {
	const struct corpus_view *view;
	const struct ground *ground;
	const struct findings *ngram, *crossfit;
	double halves[FINDING_ORDERS_MAX];
	size_t stable; /* k^ */
	size_t fitted; /* kX */
};

static enum status refuse(struct bracket_row *row, const char *format, ...)
	__attribute__((format(printf, 2, 3)));

static enum status refuse(struct bracket_row *row, const char *format, ...)
{
	va_list arguments;

	*row = (struct bracket_row){0};
	va_start(arguments, format);
	(void)vsnprintf(row->reason, sizeof(row->reason), format, arguments);
	va_end(arguments);
	return STATUS_OK;
}

static double corrected(const struct edges *edges, size_t order)
{
	return edges->view->orders[order - 1].h_corrected;
}

/* D_k: how much of h_k the second half of the data still added. */
static double growth(const struct edges *edges, size_t order)
{
	return fmax(0, corrected(edges, order) - edges->halves[order - 1]);
}

static void find_stable(struct edges *edges)
{
	size_t count = edges->view->order_count;

	for (size_t k = 1; k < count; k++) {
		double all = corrected(edges, k);

		if (fabs(all - edges->halves[k - 1]) > STABLE_SHARE * all)
			return;
		edges->stable = k;
	}
}

static void find_fitted(struct edges *edges)
{
	double least = 0;

	for (size_t i = 0; i < edges->view->order_count; i++) {
		const struct order_row *row = &edges->view->orders[i];

		if (row->has_crossfit &&
		    (!edges->fitted || row->h_crossfit < least)) {
			edges->fitted = row->order;
			least = row->h_crossfit;
		}
	}
}

/*
 * h of one more symbol of context. Where many of its grams were never seen,
 * every correction falls short, ever further from the truth than h_k^ is: then
 * one more symbol is taken to win at most what the last one did. But what was
 * not seen cannot rule out a percent either, however little it seems to win:
 * else little data would claim more than ten times as much can.
 */
static double next_order(const struct edges *edges)
{
	const struct order_row *next = &edges->view->orders[edges->stable];
	double seen = fmax(next->h_corrected, next->h_cwj);
	double here = corrected(edges, edges->stable);

	if (next->coverage >= COVERAGE_LEAST)
		return seen;
	if (edges->stable >= 2)
		seen = fmax(seen,
			    2 * here - corrected(edges, edges->stable - 1));
	return fmin(seen, (1 - UNSEEN_SHARE) * here);
}

static double lower_edge(const struct edges *edges, double w)
{
	double stable =
		corrected(edges, edges->stable) - growth(edges, edges->stable);
	double fitted =
		corrected(edges, edges->fitted) - growth(edges, edges->fitted);

	return fmax(0, fmin(fmin(stable, fitted), next_order(edges)) - w);
}

/* Lowers the upper edge to the contribution plus its own w, if it can. */
static enum status try_upper(const struct edges *edges,
			     const struct contribution *contribution,
			     struct bracket_row *row, bool *lowered)
{
	double bits = contribution->total_bits / (double)edges->view->fact->n;
	struct interval interval;

	*lowered = false;
	if (row->upper_by[0] && bits >= row->high)
		return STATUS_OK;
	TRY(ground_interval(edges->ground, contribution, NULL, &interval,
			    NULL));
	bits += interval_half_width(&interval);
	if (!interval.known || (row->upper_by[0] && bits >= row->high))
		return STATUS_OK;
	row->high = bits;
	*lowered = true;
	return STATUS_OK;
}

static enum status upper_of_crossfit(const struct edges *edges,
				     struct bracket_row *row)
{
	for (size_t i = 0; i < edges->crossfit->series_count; i++) {
		const struct series *series = &edges->crossfit->series[i];
		struct contribution contribution =
			contribution_of_crossfit(edges->view, series);
		bool lowered;

		TRY(try_upper(edges, &contribution, row, &lowered));
		if (lowered)
			(void)snprintf(row->upper_by, sizeof(row->upper_by),
				       "crossfit order %u", series->order);
	}
	return STATUS_OK;
}

static enum status upper_of_lengths(const struct edges *edges,
				    const struct lengths *lengths,
				    struct bracket_row *row)
{
	for (size_t i = 0; i < lengths->count; i++) {
		const struct length *length = &lengths->rows[i];
		bool lowered;

		if (length->page_bytes)
			continue;
		TRY(try_upper(edges, &length->contribution, row, &lowered));
		if (lowered)
			length_name(length, row->upper_by,
				    sizeof(row->upper_by));
	}
	return STATUS_OK;
}

static enum status lower_half_width(const struct edges *edges, double *w,
				    struct bracket_row *row,
				    struct interval *interval)
{
	const struct series *series =
		series_of_order(edges->ngram, (unsigned)edges->stable);
	struct contribution contribution;

	if (!series) {
		*interval = interval_none("no bits by block were recorded");
		return STATUS_OK;
	}
	contribution = contribution_of_grassberger(edges->view, series);
	TRY(ground_interval(edges->ground, &contribution, NULL, interval,
			    &row->not_calibrated));
	row->not_calibrated |=
		grams_drift_within(edges->ngram, (unsigned)edges->stable);
	*w = interval_half_width(interval);
	return STATUS_OK;
}

static enum status find_edges(const struct edges *edges,
			      const struct lengths *lengths,
			      struct bracket_row *row)
{
	const struct length *shortest = lengths_lowest(lengths, 0);
	struct bracket_row made = {.order = (unsigned)edges->stable};
	struct interval interval = {0};
	double w = 0;

	TRY(lower_half_width(edges, &w, &made, &interval));
	if (!interval.known)
		return refuse(row, "%.190s", interval.reason);
	TRY(upper_of_crossfit(edges, &made));
	TRY(upper_of_lengths(edges, lengths, &made));
	if (!made.upper_by[0])
		return refuse(row, "no upper edge: no code and no cross-fit "
				   "has an interval; a longer corpus would do");
	made.known = true;
	made.low = lower_edge(edges, w);
	made.open_below =
		made.low > made.high ||
		(shortest && shortest->contribution.total_bits /
					     (double)edges->view->fact->n <
				     made.low);
	if (made.open_below)
		made.low = 0;
	*row = made;
	return STATUS_OK;
}

static enum status refuse_drift(const struct edges *edges,
				struct bracket_row *row)
{
	double all = corrected(edges, 1);

	return refuse(row,
		      "even single symbols differ by %.1f%% between half of "
		      "the corpus and all of it, over the %.0f%% allowed: more "
		      "data, or a split where its kind changes, would do",
		      100 * fabs(all - edges->halves[0]) / fmax(all, 1e-9),
		      100 * STABLE_SHARE);
}

enum status bracket_find(const struct corpus_view *view,
			 const struct ground *ground,
			 const struct lengths *lengths, struct bracket_row *row)
{
	const struct corpus_fact *fact = view->fact;
	const struct method_fact *ngram = method_done(fact, "ngram");
	const struct method_fact *crossfit = method_done(fact, "crossfit");
	struct edges edges = {.view = view, .ground = ground};

	if (fact->kind == SYMBOL_WORD)
		return refuse(row, "words are a divisor only; survey the file "
				   "as letters27, codepoint or byte");
	if (fact->n < BRACKET_SYMBOLS_MIN)
		return refuse(row, "%llu symbols; the bracket needs %d",
			      (unsigned long long)fact->n, BRACKET_SYMBOLS_MIN);
	if (!ngram || !crossfit || view->order_count < 2)
		return refuse(row, "it needs the estimators ngram and crossfit "
				   "at 2 orders or more");
	edges.ngram = &ngram->findings;
	edges.crossfit = &crossfit->findings;
	gram_orders_halves(view, edges.halves);
	find_stable(&edges);
	find_fitted(&edges);
	if (!edges.fitted)
		return refuse(row, "cross-fitting gave no order that was "
				   "counted; survey both to the same order");
	if (!edges.stable)
		return refuse_drift(&edges, row);
	return find_edges(&edges, lengths, row);
}
