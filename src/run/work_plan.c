#include "run/work_plan.h"

#include "corpus/corpus.h"
#include "run/plan_cells.h"

#include <stdlib.h>
#include <string.h>

/* Rows of table 1 come in steps, to leave room for their page layouts. */
#define PLACES_A_ROW 16

bool names_hold(const struct names *names, const char *name)
{
	if (!names->count)
		return true;
	for (size_t i = 0; i < names->count; i++) {
		if (strcmp(names->name[i], name) == 0)
			return true;
	}
	return false;
}

static MUST_USE enum status check_names(const struct set *set,
					const struct selection *selection,
					struct reason *why)
{
	for (size_t i = 0; i < selection->corpora.count; i++) {
		const char *name = selection->corpora.name[i];
		size_t j = 0;

		while (j < set->corpus_count &&
		       strcmp(set->corpora[j].name, name) != 0)
			j++;
		if (j == set->corpus_count)
			return reason_give(why, STATUS_BAD_USAGE,
					   "--corpus %s: the set has no such "
					   "corpus; ratefloor corpora list "
					   "shows them",
					   name);
	}
	for (size_t i = 0; i < selection->estimators.count; i++) {
		if (!estimator_find(selection->estimators.name[i]))
			return reason_give(why, STATUS_BAD_USAGE,
					   "--estimator %s: there is no such "
					   "estimator; ratefloor methods "
					   "shows them",
					   selection->estimators.name[i]);
	}
	for (size_t i = 0; i < selection->codecs.count; i++) {
		const char *name = selection->codecs.name[i];
		size_t j = 0;

		while (j < set->codec_count &&
		       strcmp(set->codecs[j].name, name) != 0)
			j++;
		if (j == set->codec_count)
			return reason_give(why, STATUS_BAD_USAGE,
					   "--codec %s: the set has no section "
					   "[codec %s]",
					   name, name);
	}
	return STATUS_OK;
}

static MUST_USE enum status choose_corpora(struct plan *plan,
					   const struct selection *selection)
{
	const struct set *set = plan->set;

	TRY(memory_new(set->corpus_count, sizeof(*plan->corpora),
		       &plan->corpora));
	for (size_t i = 0; i < set->corpus_count; i++) {
		if (names_hold(&selection->corpora, set->corpora[i].name))
			plan->corpora[plan->corpus_count++] = i;
	}
	return STATUS_OK;
}

static bool row_wanted(const struct estimator *row,
		       const struct selection *selection)
{
	if (selection->estimators.count &&
	    names_hold(&selection->estimators, row->name))
		return true;
	return row->deep ? selection->deep : !selection->estimators.count;
}

/* Page sizes of the cells, or of those with dictionaries; each once, in order.
 */
static size_t page_sizes(const struct plan *plan, bool taught,
			 size_t pages[PLACES_A_ROW - 1])
{
	size_t count = 0, last = 0;

	while (count < PLACES_A_ROW - 1) {
		size_t next = SIZE_MAX;

		for (size_t i = 0; i < plan->cell_count; i++) {
			size_t page = plan->cells[i].page_bytes;

			if (taught && !plan->cells[i].setting.dictionary_bytes)
				continue;
			if (page > last && page < next)
				next = page;
		}
		if (next == SIZE_MAX)
			break;
		pages[count++] = last = next;
	}
	return count;
}

static void add_row(struct plan *plan, size_t group, size_t row,
		    size_t page_index, size_t page_bytes)
{
	struct plan_rows *rows = &plan->rows[group];

	rows->row[rows->count] = estimators[row];
	rows->place[rows->count++] = row * PLACES_A_ROW + page_index;
	rows->page_bytes = page_bytes;
}

static MUST_USE enum status choose_rows(struct plan *plan,
					const struct selection *selection)
{
	size_t pages[PLACES_A_ROW - 1], taught[PLACES_A_ROW - 1];
	size_t page_count = page_sizes(plan, false, pages), rows = 0;
	size_t taught_count = page_sizes(plan, true, taught);

	while (estimators[rows])
		rows++;
	/* Group 0: all that need the suffix order, so that it is made once. */
	TRY(memory_new_zeroed(1 + rows * PLACES_A_ROW, sizeof(*plan->rows),
			      &plan->rows));
	plan->rows_count = 1;
	for (size_t i = 0; i < rows; i++) {
		const struct estimator *row = estimators[i];

		if (!row_wanted(row, selection))
			continue;
		for (size_t j = 0; row->warm && j < taught_count; j++)
			add_row(plan, plan->rows_count++, i, j + 1, taught[j]);
		if (row->warm)
			continue;
		if (row->needs_suffix) {
			add_row(plan, 0, i, 0, 0);
			continue;
		}
		add_row(plan, plan->rows_count++, i, 0, 0);
		for (size_t j = 0; row->is_code && j < page_count; j++)
			add_row(plan, plan->rows_count++, i, j + 1, pages[j]);
	}
	return STATUS_OK;
}

/* Relative CPU a byte of the suffix order itself. */
#define SUFFIX_WORK 0.2

static double item_work(const struct plan_item *item, double bytes)
{
	double work = 0;

	if (item->cell)
		return bytes * item->cell->codec->work;
	for (size_t i = 0; i < item->rows->count; i++)
		work += item->rows->row[i]->work;
	if (item->rows->count && item->rows->row[0]->needs_suffix)
		work += SUFFIX_WORK;
	return bytes * work;
}

static int longest_first(const void *left, const void *right)
{
	const struct plan_item *a = left, *b = right;

	return (a->work < b->work) - (a->work > b->work);
}

static void add_items(struct plan *plan, size_t corpus, double bytes)
{
	size_t first = plan->item_count;

	for (size_t i = 0; i < plan->rows_count; i++) {
		if (plan->rows[i].count)
			plan->items[plan->item_count++] = (struct plan_item){
				.corpus = corpus, .rows = &plan->rows[i]};
	}
	for (size_t i = 0; i < plan->cell_count; i++)
		plan->items[plan->item_count++] = (struct plan_item){
			.corpus = corpus, .cell = &plan->cells[i]};
	for (size_t i = first; i < plan->item_count; i++)
		plan->items[i].work = item_work(&plan->items[i], bytes);
	qsort(plan->items + first, plan->item_count - first,
	      sizeof(*plan->items), longest_first);
}

struct sized {
	size_t corpus;
	uint64_t bytes;
};

static int largest_first(const void *left, const void *right)
{
	const struct sized *a = left, *b = right;

	if (a->bytes != b->bytes)
		return (a->bytes < b->bytes) - (a->bytes > b->bytes);
	return (a->corpus > b->corpus) - (a->corpus < b->corpus);
}

/*
 * Corpora from the largest to the smallest, so that few are in memory at once
 * and the last pieces of work are short ones.
 */
static MUST_USE enum status lay_items(struct plan *plan)
{
	size_t most =
		plan->corpus_count * (plan->cell_count + plan->rows_count);
	struct sized *sized;

	TRY(memory_new(plan->corpus_count, sizeof(*sized), &sized));
	if (memory_new_zeroed(most, sizeof(*plan->items), &plan->items) !=
	    STATUS_OK) {
		memory_free(sized);
		return STATUS_NO_MEMORY;
	}
	for (size_t i = 0; i < plan->corpus_count; i++)
		sized[i] = (struct sized){
			plan->corpora[i],
			corpus_file_bytes(
				&plan->set->corpora[plan->corpora[i]])};
	qsort(sized, plan->corpus_count, sizeof(*sized), largest_first);
	for (size_t i = 0; i < plan->corpus_count; i++)
		add_items(plan, sized[i].corpus, (double)sized[i].bytes + 1);
	memory_free(sized);
	return STATUS_OK;
}

/* Every parts-th item, dealt out in order, so that parts are alike. */
static void keep_part(struct plan *plan, const struct selection *selection)
{
	size_t kept = 0;

	for (size_t i = 0; i < plan->item_count; i++) {
		if (i % selection->parts == selection->part - 1)
			plan->items[kept++] = plan->items[i];
	}
	plan->item_count = kept;
}

static MUST_USE enum status plan_lay(struct plan *plan,
				     const struct selection *selection,
				     struct reason *why)
{
	TRY(check_names(plan->set, selection, why));
	TRY(choose_corpora(plan, selection));
	TRY(plan_choose_cells(plan, selection, why));
	TRY(choose_rows(plan, selection));
	TRY(lay_items(plan));
	keep_part(plan, selection);
	return STATUS_OK;
}

enum status plan_init(struct plan *plan, const struct set *set,
		      const struct selection *selection, struct reason *why)
{
	struct plan made = {.set = set};
	enum status status = plan_lay(&made, selection, why);

	if (status == STATUS_OK) {
		*plan = made;
		return STATUS_OK;
	}
	if (status == STATUS_NO_MEMORY)
		(void)reason_give(why, status, "out of memory");
	plan_release(&made);
	return status;
}

void plan_release(struct plan *plan)
{
	for (size_t i = 0; i < plan->house_count; i++)
		house_free(plan->houses[i]);
	memory_free(plan->houses);
	memory_free(plan->cells);
	memory_free(plan->rows);
	memory_free(plan->corpora);
	memory_free(plan->items);
	*plan = (struct plan){0};
}

const struct cell_fact *plan_cell_held(const struct corpus_fact *corpus,
				       const struct plan_cell *cell)
{
	for (size_t i = 0; i < corpus->cell_count; i++) {
		const struct cell_fact *fact = &corpus->cells[i];

		if (strcmp(fact->key.codec, cell->codec->name) == 0 &&
		    strcmp(fact->key.level, cell->setting.text) == 0 &&
		    fact->page_bytes == cell->page_bytes)
			return fact;
	}
	return NULL;
}
