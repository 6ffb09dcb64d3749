#include "gap/fitted.h"

#include <math.h>

#include "estimate/crossfit_folds.h"
#include "gap/gram_orders.h"

#define FOLDS ((double)CROSSFIT_FOLDS)

/* Grams of an order that were counted often enough to fit, and contexts. */
struct fitted {
	double grams, contexts;
};

static double often(const struct gram_counts *counts)
{
	return (double)(counts->distinct - counts->once - counts->twice);
}

static struct fitted fitted_at(const struct corpus_view *view, unsigned order)
{
	const struct method_fact *ngram = method_done(view->fact, "ngram");
	const struct order_counts *orders;

	if (!ngram || order < 1 || order > ngram->findings.order_count)
		return (struct fitted){0, 0};
	orders = ngram->findings.orders;
	return (struct fitted){
		often(&orders[order - 1].all),
		order > 1 ? often(&orders[order - 2].all) : 1,
	};
}

static double square_bits(double square_nats)
{
	return fmax(0, square_nats) / (log(2) * log(2));
}

struct contribution contribution_of_plugin(const struct corpus_view *view,
					   const struct series *series,
					   double total_bits)
{
	struct contribution made = contribution_of_series(series, total_bits);
	struct fitted fitted = fitted_at(view, series->order);

	made.excess = square_bits((fitted.grams - fitted.contexts) * (1 - 0.5));
	return made;
}

struct contribution contribution_of_grassberger(const struct corpus_view *view,
						const struct series *series)
{
	double h = view->orders[series->order - 1].h_corrected;
	struct contribution made =
		contribution_of_series(series, h * (double)view->fact->n);
	struct fitted fitted = fitted_at(view, series->order);

	made.excess = square_bits((fitted.grams - fitted.contexts) * (1 - 0.5) -
				  (fitted.grams + fitted.contexts) * 0.25);
	return made;
}

/*
 * With m folds, and Z_f the deviations of a fold's counts in standard errors,
 * the total deviates by -A/2 + B (2m - 1) / (2 (m - 1)^2) nats, A and B
 * independent chi-squares of K and (m - 1) K degrees: A of the sum of the Z_f,
 * B of their differences. The losses themselves spread by K m / (m - 1).
 */
struct contribution contribution_of_crossfit(const struct corpus_view *view,
					     const struct series *series)
{
	struct contribution made = contribution_of_series(
		series, bits_from_q16(series->costs.headline_q16));
	struct fitted fitted = fitted_at(view, series->order);
	double others = FOLDS - 1;
	double share = (2 * FOLDS - 1) / (2 * others * others);
	double own = 0.5 + 2 * others * share * share;

	made.excess = square_bits((fitted.grams - fitted.contexts) *
				  (FOLDS / others - own));
	return made;
}
