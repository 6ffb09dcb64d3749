#include "report/json_parts.h"

#include "ledger/outcome.h"
#include "report/json_value.h"

static json_t *order_object(const struct order_row *row)
{
	struct json_maker made;

	json_begin(&made);
	json_put_count(&made, "order", row->order);
	json_put_real(&made, "H", true, row->H);
	json_put_real(&made, "h_plugin", true, row->h_plugin);
	json_put_real(&made, "h_corrected", true, row->h_corrected);
	json_put_real(&made, "h_crossfit", row->has_crossfit, row->h_crossfit);
	json_put_real(&made, "coverage", true, row->coverage);
	json_put_count(&made, "distinct", row->distinct);
	json_put_bool(&made, "trusted", row->trusted);
	json_put_real(&made, "h_cwj", true, row->h_cwj);
	return json_done(&made);
}

static json_t *estimate_object(const struct estimate_row *row)
{
	const struct interval *interval = &row->interval;
	struct json_maker made;

	json_begin(&made);
	json_put_text(&made, "method", row->fact->method);
	json_put_real(&made, "bits_per_symbol", row->known,
		      row->bits_per_symbol);
	json_put_real(&made, "low", row->known && interval->known,
		      interval->low);
	json_put_real(&made, "high", row->known && interval->known,
		      interval->high);
	json_put_text(&made, "leans", row->leans ? row->leans : "unknown");
	json_put_bool(&made, "is_code", row->is_code);
	json_put_known_count(&made, "order", row->known && row->order,
			     row->order);
	json_put_count(&made, "page_bytes", row->fact->page_bytes);
	json_put_text(&made, "status", outcome_name(row->fact->outcome));
	json_put_reason(&made, "reason", row->fact->reason);
	json_put_reason(&made, "interval_reason", interval->reason);
	return json_done(&made);
}

static json_t *floor_object(const struct floor_row *floor)
{
	const struct interval *interval = &floor->interval;
	bool known = floor->known;
	struct json_maker made;

	json_begin(&made);
	json_put_reason(&made, "held_by", known ? floor->held_by : "");
	json_put_real(&made, "bits_per_symbol", known, floor->bits_per_symbol);
	json_put_real(&made, "low", known && interval->known, interval->low);
	json_put_real(&made, "high", known && interval->known, interval->high);
	json_put_bool(&made, "by_codec", known && floor->by_codec);
	json_put_count(&made, "rows", known ? floor->rows : 0);
	json_put_reason(&made, "interval_reason",
			known ? interval->reason : "");
	return json_done(&made);
}

static json_t *bracket_object(const struct bracket_row *bracket)
{
	bool known = bracket->known;
	struct json_maker made;

	json_begin(&made);
	/* A refuted edge is no number any more. */
	json_put_real(&made, "low", known && !bracket->open_below,
		      bracket->low);
	json_put_real(&made, "high", known, bracket->high);
	json_put_bool(&made, "open_below", known && bracket->open_below);
	json_put_bool(&made, "not_calibrated",
		      known && bracket->not_calibrated);
	json_put_known_count(&made, "order", known, bracket->order);
	json_put_reason(&made, "upper_by", known ? bracket->upper_by : "");
	json_put_reason(&made, "reason", known ? "" : bracket->reason);
	return json_done(&made);
}

static json_t *extrapolation_object(const struct extrapolation_row *row)
{
	struct json_maker made;

	json_begin(&made);
	json_put_reason(&made, "method", row->method);
	json_put_real(&made, "low", row->known, row->low);
	json_put_real(&made, "high", row->known, row->high);
	json_put_real(&made, "last", row->known, row->last);
	json_put_real(&made, "worst_miss", row->known, row->miss);
	json_put_reason(&made, "reason", row->reason);
	return json_done(&made);
}

static void put_rows(struct json_maker *made, const struct corpus_view *view)
{
	json_t *orders = json_array();
	json_t *estimates = json_array();

	for (size_t i = 0; i < view->order_count; i++)
		made->failed |=
			json_array_append_new(
				orders, order_object(&view->orders[i])) != 0;
	for (size_t i = 0; i < view->estimate_count; i++)
		made->failed |=
			json_array_append_new(
				estimates,
				estimate_object(&view->estimates[i])) != 0;
	json_put(made, "orders", orders);
	json_put_count(made, "trusted_order", view->trusted_order);
	json_put(made, "estimates", estimates);
}

static void put_cells(struct json_maker *made, const struct corpus_view *view)
{
	json_t *cells = json_array();

	for (size_t i = 0; i < view->cell_count; i++)
		made->failed |=
			json_array_append_new(
				cells, json_cell(view, &view->cells[i])) != 0;
	json_put(made, "cells", cells);
}

static void put_more(struct json_maker *made, const struct corpus_view *view)
{
	const struct corpus_fact *fact = view->fact;

	json_put_text(made, "status", outcome_name(fact->outcome));
	json_put_reason(made, "reason", fact->reason);
	json_put_reason(made, "trust_limit", view->trust_limit);
	json_put_count(made, "distinct", fact->distinct);
	json_put_count(made, "records", fact->records);
	json_put_count(made, "file_bytes", fact->file_bytes);
	json_put_count(made, "canonical_bytes", fact->canonical_bytes);
	json_put_reason(made, "licence", fact->licence);
	json_put_reason(made, "origin", fact->origin);
	json_put(made, "extrapolation",
		 extrapolation_object(&view->extrapolation));
}

json_t *json_corpus(const struct corpus_view *view)
{
	const struct corpus_fact *fact = view->fact;
	struct json_maker made;

	json_begin(&made);
	json_put_text(&made, "name", fact->name);
	json_put_text(&made, "symbols", symbol_kind_name(fact->kind));
	json_put_count(&made, "n", fact->n);
	json_put_count(&made, "alphabet", fact->alphabet);
	json_put_text(&made, "sha256", fact->sha256);
	json_put_real(&made, "known_rate", fact->rate_known, fact->known_rate);
	put_rows(&made, view);
	json_put(&made, "floor", floor_object(&view->floor));
	json_put(&made, "bracket", bracket_object(&view->bracket));
	put_cells(&made, view);
	put_more(&made, view);
	json_put(&made, "extrapolation",
		 extrapolation_object(&view->extrapolation));
	return json_done(&made);
}
