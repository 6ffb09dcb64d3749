/* Reading the rows under a survey; for the files of this room only. */
#ifndef LEDGER_READ_H
#define LEDGER_READ_H

#include "ledger/statement.h"

/* More rows of a kind than any survey has: the file is damaged. */
#define READ_ROWS_MAX 1000000

/* What rows are read for. All borrowed. */
struct owner {
	struct ledger *ledger;
	int64_t survey;
	struct corpus_fact *corpus; /* NULL: rows of the survey itself */
	struct method_fact *method; /* NULL: rows of the corpus itself */
	struct reason *why;
};

/* Binds survey, then the corpus' name, then the method's key, as far as set. */
void bind_owner(struct query *query, const struct owner *owner);
/* Runs a "SELECT count(*)" for the owner. */
MUST_USE enum status read_row_count(const struct owner *owner, const char *sql,
				    const char *what, size_t *count);
/* The outcome in the next column. */
enum outcome query_outcome(struct query *query);

/* Both fill owner->corpus, which is released by the caller in any case. */
MUST_USE enum status read_methods(struct owner owner);
MUST_USE enum status read_cells(struct owner owner);

#endif
