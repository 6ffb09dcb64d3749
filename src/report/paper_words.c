#include "report/paper.h"

static void corpus_identity(const struct writer *writer,
			    const struct corpus_fact *fact)
{
	write_paragraph(
		writer,
		"%s symbols of kind %s; %s different ones seen, of %s "
		"possible. "
		"File: %s bytes (%s after reading it as %s), SHA-256 %.12s.",
		figure_count(fact->n).text, symbol_kind_name(fact->kind),
		figure_count(fact->distinct).text,
		figure_count(fact->alphabet).text,
		figure_count(fact->file_bytes).text,
		figure_count(fact->canonical_bytes).text,
		symbol_kind_name(fact->kind), fact->sha256);
	if (fact->records)
		write_paragraph(writer, "Records declared: %s.",
				figure_count(fact->records).text);
	if ((fact->origin && fact->origin[0]) || fact->licence[0])
		write_paragraph(writer, "Origin: %s. Licence: %s.",
				fact->origin && fact->origin[0] ? fact->origin
								: "not stated",
				fact->licence[0] ? fact->licence
						 : "not stated");
	if (fact->rate_known)
		write_paragraph(writer,
				"Entropy rate of the source, as its set file "
				"states it: %s bits per symbol.",
				figure_bits(true, fact->known_rate).text);
}

static void floor_words(const struct writer *writer,
			const struct floor_row *floor)
{
	const struct interval *interval = &floor->interval;

	if (!floor->known) {
		write_paragraph(writer,
				"Floor: none. No code and no codec gave a "
				"result on this corpus, so there is nothing to "
				"measure a gap from.");
		return;
	}
	write_paragraph(
		writer,
		"Floor: %s bits per symbol, held by %s, the shortest "
		"of %u code lengths. This file: exact, for a decoder "
		"could live on it. Data of this kind: %s%s.",
		figure_bits(true, floor->bits_per_symbol).text, floor->held_by,
		floor->rows,
		interval->known
			? figure_interval(interval->low, interval->high).text
			: "no interval: ",
		interval->known ? "" : interval->reason);
	if (floor->by_codec)
		write_paragraph(writer,
				"Floor held by a codec: it beat every "
				"estimator, so the data has a structure that "
				"they all miss, and how much lower one could "
				"go is less sure than usual.");
}

static void bracket_edges(const struct writer *writer,
			  const struct bracket_row *bracket)
{
	if (bracket->open_below)
		write_paragraph(writer,
				"Rate bracket: open below, at most %s bits per "
				"symbol (by %s).",
				figure_bits(true, bracket->high).text,
				bracket->upper_by);
	else
		write_paragraph(
			writer,
			"Rate bracket: between %s and %s bits per "
			"symbol for the entropy rate of the source; the "
			"lower edge comes from corrected grams, which "
			"are steady up to order %u, the upper from %s.",
			figure_bits(true, bracket->low).text,
			figure_bits(true, bracket->high).text, bracket->order,
			bracket->upper_by);
}

static void bracket_words(const struct writer *writer,
			  const struct bracket_row *bracket)
{
	if (!bracket->known) {
		write_paragraph(writer, "No rate bracket: %s.",
				bracket->reason[0] ? bracket->reason
						   : "no reason was recorded");
		return;
	}
	bracket_edges(writer, bracket);
	if (bracket->open_below)
		write_paragraph(writer,
				"Open below: a code length came out lower than "
				"the lower edge, which is refuted by that. The "
				"data has structure longer than grams of order "
				"%u can see. The floor stands.",
				bracket->order);
	else
		write_paragraph(writer,
				"The lower edge takes for granted that memory "
				"reaches no further than %u symbols. Nothing "
				"here refutes that; nothing proves it either.",
				bracket->order + 1);
	if (bracket->not_calibrated)
		write_paragraph(writer,
				"Not calibrated: the data drifts from one end "
				"of the file to the other, so the edges are "
				"less sure than intervals of steady data.");
}

/* A stated rate is a test that the bracket may fail. */
static void known_rate_words(const struct writer *writer,
			     const struct corpus_fact *fact,
			     const struct bracket_row *bracket)
{
	if (!fact->rate_known || !bracket->known)
		return;
	if (!bracket->open_below && fact->known_rate < bracket->low)
		write_paragraph(writer,
				"The stated rate lies below the bracket: this "
				"source remembers further back than %u "
				"symbols, which the lower edge cannot see.",
				bracket->order + 1);
	if (fact->known_rate > bracket->high)
		write_paragraph(writer,
				"The stated rate lies above the bracket: one "
				"file in about twenty is as untypical.");
}

static void trust_words(const struct writer *writer,
			const struct corpus_view *view)
{
	if (view->order_count == 0 && view->trust_limit[0])
		write_paragraph(writer, "No trusted order: %s.",
				view->trust_limit);
	if (view->order_count == 0)
		return;
	if (view->trusted_order)
		write_paragraph(
			writer, "Trusted order: %u. Why not one more: %s.",
			view->trusted_order,
			view->trust_limit[0] ? view->trust_limit
					     : "no higher one was measured");
	else
		write_paragraph(writer,
				"Trusted order: none. Why not even order 1: "
				"%s.",
				view->trust_limit[0] ? view->trust_limit
						     : "no reason was "
						       "recorded");
}

void paper_corpus_words(const struct writer *writer,
			const struct corpus_view *view)
{
	const struct corpus_fact *fact = view->fact;

	if (fact->outcome == OUTCOME_SKIPPED) {
		write_paragraph(writer, "Skipped: %s.", fact->reason);
		return;
	}
	if (fact->outcome != OUTCOME_DONE) {
		write_paragraph(writer, "%s: %s.",
				fact->outcome == OUTCOME_FAILED ? "FAILED"
								: "Declined",
				fact->reason);
		return;
	}
	corpus_identity(writer, fact);
	floor_words(writer, &view->floor);
	bracket_words(writer, &view->bracket);
	known_rate_words(writer, fact, &view->bracket);
	trust_words(writer, view);
}
