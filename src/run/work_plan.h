/* The work of a survey: every row and cell to measure, in a fixed order. */
#ifndef RUN_WORK_PLAN_H
#define RUN_WORK_PLAN_H

#include "base/status.h"
#include "codec/house.h"
#include "corpus/set_file.h"
#include "estimate/estimator.h"
#include "ledger/survey.h"

#define PLAN_ROWS_MAX 8
#define PLAN_NAMES_MAX 64

/* Names the user gave; none of a kind means all. All borrowed. */
struct names {
	const char *name[PLAN_NAMES_MAX];
	size_t count;
};

struct selection {
	struct names corpora, estimators, codecs, levels;
	bool deep;            /* the deep rows of table 1 too */
	unsigned part, parts; /* this part, from 1, of so many; 1 of 1: all */
	/* Path of codec-host: the set's own codecs may run; NULL: not. */
	const char *codec_host;
};

/* One cell of table 2 to run. place orders it in the ledger. */
struct plan_cell {
	const struct codec *codec;
	struct codec_setting setting;
	size_t page_bytes;
	size_t place;
};

/* Rows of table 1 that share a suffix order, or one row; one layout. */
struct plan_rows {
	const struct estimator *row[PLAN_ROWS_MAX];
	size_t place[PLAN_ROWS_MAX];
	size_t count;
	size_t page_bytes;
};

/* One piece of work, done by one thread. */
struct plan_item {
	size_t corpus;                /* index in set->corpora */
	const struct plan_cell *cell; /* borrowed from the plan, or NULL */
	const struct plan_rows *rows; /* likewise; exactly one is set */
	double work;                  /* relative CPU: for order and progress */
};

struct plan {
	const struct set *set;   /* borrowed */
	struct plan_cell *cells; /* owned; the same for every corpus */
	size_t cell_count;
	struct house **houses; /* owned; the set's own codecs */
	size_t house_count;
	struct plan_rows *rows; /* owned */
	size_t rows_count;
	size_t *corpora; /* owned; indices chosen */
	size_t corpus_count;
	struct plan_item *items; /* owned; longest corpora first */
	size_t item_count;
};

/*
 * Lays out the work. STATUS_BAD_USAGE: a name that the set or the tables do
 * not have, a level out of range, a layout that cannot be read; why says
 * which, where, and what would be right.
 */
MUST_USE enum status plan_init(struct plan *plan, const struct set *set,
			       const struct selection *selection,
			       struct reason *why);
void plan_release(struct plan *plan);

/* What a survey holds of a planned cell; NULL where it is not there yet. */
const struct cell_fact *plan_cell_held(const struct corpus_fact *corpus,
				       const struct plan_cell *cell);

#endif
