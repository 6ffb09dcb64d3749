#include "gap/analysis.h"

#include "base/memory.h"
#include "gap/bracket.h"
#include "gap/cell_view.h"
#include "gap/extrapolation.h"
#include "gap/gram_orders.h"
#include "gap/headline.h"

static void view_release(struct corpus_view *view)
{
	memory_free(view->orders);
	memory_free(view->estimates);
	memory_free(view->cells);
}

static enum status derive(struct corpus_view *view, const struct ground *ground)
{
	struct lengths lengths;
	enum status status;

	TRY(gram_orders_init(view));
	TRY(headlines_init(view, ground));
	TRY(lengths_init(&lengths, view->fact));
	status = floor_find(&lengths, ground, &view->floor);
	if (status == STATUS_OK)
		status = cells_init(view, ground, &lengths);
	if (status == STATUS_OK)
		status = bracket_find(view, ground, &lengths, &view->bracket);
	if (status == STATUS_OK)
		extrapolation_find(ground, &lengths, &view->extrapolation);
	lengths_release(&lengths);
	return status;
}

static enum status view_init(struct corpus_view *view,
			     const struct survey *survey,
			     const struct corpus_fact *fact,
			     const struct analysis_rules *rules)
{
	struct ground ground;
	enum status status;

	view->fact = fact;
	if (!fact->n)
		return STATUS_OK;
	TRY(ground_init(&ground, survey, fact, rules));
	status = derive(view, &ground);
	ground_release(&ground);
	return status;
}

const struct analysis_rules analysis_usual = {.draws = 1999,
					      .confidence = 0.95};

enum status analysis_init(struct analysis *analysis,
			  const struct survey *survey,
			  const struct analysis_rules *rules,
			  struct reason *why)
{
	struct analysis made = {.survey = survey};
	enum status status;

	status = memory_new_zeroed(survey->corpus_count, sizeof(*made.corpora),
				   &made.corpora);
	if (status == STATUS_OK)
		made.corpus_count = survey->corpus_count;
	for (size_t i = 0; status == STATUS_OK && i < made.corpus_count; i++)
		status = view_init(&made.corpora[i], survey,
				   &survey->corpora[i], rules);
	if (status != STATUS_OK) {
		analysis_release(&made);
		return reason_give(why, status,
				   "out of memory while deriving intervals");
	}
	*analysis = made;
	return STATUS_OK;
}

void analysis_release(struct analysis *analysis)
{
	for (size_t i = 0; i < analysis->corpus_count; i++)
		view_release(&analysis->corpora[i]);
	memory_free(analysis->corpora);
	*analysis = (struct analysis){0};
}

static int corpus_failed(const struct corpus_fact *fact)
{
	if (fact->outcome == OUTCOME_FAILED)
		return 1;
	for (size_t i = 0; i < fact->method_count; i++) {
		if (fact->methods[i].outcome == OUTCOME_FAILED)
			return 1;
	}
	for (size_t i = 0; i < fact->cell_count; i++) {
		const struct cell_fact *cell = &fact->cells[i];

		if (cell->outcome == OUTCOME_FAILED ||
		    (cell->outcome == OUTCOME_DONE && !cell->facts.lossless))
			return 1;
	}
	return 0;
}

int analysis_failed(const struct analysis *analysis)
{
	for (size_t i = 0; i < analysis->corpus_count; i++) {
		if (corpus_failed(analysis->corpora[i].fact))
			return 1;
	}
	return 0;
}
