/* What is needed to take a predictor back to where it was. */
#ifndef PREDICT_JOURNAL_H
#define PREDICT_JOURNAL_H

#include "predict/passes.h"

/*
 * The large tables are not copied: what a line or an entry held is kept when it
 * is touched for the first time after the place to go back to, so going back
 * costs no more than the bytes that came after it.
 */
struct journal;

/*
 * Remembers the predictor as it is; owned by the caller, until journal_free.
 * bytes: the most that come between here and journal_rewind.
 */
MUST_USE enum status journal_new(struct predictor *p, size_t bytes,
				 struct journal **journal);
void journal_free(struct journal *journal);

/* Before the byte at past.at is pushed: the matches' entries it will set. */
void journal_matches(struct journal *journal, const struct predictor *p);
/* Before the contexts of these views are run. */
void journal_lines(struct journal *journal, const struct predictor *p,
		   const struct chunk *chunk);

/* Takes the predictor back; may be called again after other bytes. */
void journal_rewind(struct journal *journal, struct predictor *p);

#endif
