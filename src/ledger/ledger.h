/*
 * The ledger: a SQLite file of measured facts, one transaction a row.
 *
 * While it is open for writing, rows go to a log beside the file (PATH-wal and
 * PATH-shm): a kill loses at most the rows in hand, and whoever opens the file
 * next finds the log; until then the three belong together. Closing leaves one
 * file, on the disk.
 * Beyond the statuses named at a function, each call may return STATUS_LEDGER
 * (damaged: the row and column are named; or in use by another process for
 * more than two seconds), STATUS_IO (disk full, folder gone) or
 * STATUS_NO_MEMORY. Rows that are in the file already are never lost by one.
 */
#ifndef LEDGER_LEDGER_H
#define LEDGER_LEDGER_H

#include "base/status.h"
#include "ledger/survey.h"

struct ledger; /* one open file; used by one thread at a time */

enum ledger_mode { LEDGER_READ, LEDGER_WRITE };

/*
 * Opens, and with LEDGER_WRITE creates, the file. STATUS_NOT_FOUND: nothing
 * there to read; STATUS_IO: folder read-only, disk full; STATUS_LEDGER: not a
 * ledger, another schema (both numbers named), or in use by another process.
 * A file that is refused stays as it was. LEDGER_READ works in a folder that
 * cannot be written to.
 */
MUST_USE enum status ledger_open(const char *path, enum ledger_mode mode,
				 struct ledger **ledger, struct reason *why);
void ledger_close(struct ledger *ledger); /* NULL is allowed */

/*
 * Begins a survey from the plan in survey (set name, program, seed, orders,
 * libraries; its corpora are ignored) and sets survey->id. plan_digest names
 * what was asked for: a resumed survey must have the same.
 */
MUST_USE enum status ledger_begin(struct ledger *ledger, struct survey *survey,
				  const char *plan_digest, struct reason *why);
/* Newest unfinished survey with that plan: its id. STATUS_NOT_FOUND. */
MUST_USE enum status ledger_resume(struct ledger *ledger,
				   const char *plan_digest, int64_t *id,
				   struct reason *why);
/* Marks it done. */
MUST_USE enum status ledger_finish(struct ledger *ledger, int64_t survey,
				   struct reason *why);

/*
 * One transaction each. place is the index in the set, which orders the rows.
 * Writing a row that is there replaces it. The survey comes first, then the
 * corpus, then its methods and cells, a cell before its timing:
 * STATUS_BAD_USAGE otherwise. Replacing a corpus keeps the rows under it;
 * replacing a cell drops its timing unless the new one is timed.
 */
MUST_USE enum status ledger_put_corpus(struct ledger *ledger, int64_t survey,
				       size_t place,
				       const struct corpus_fact *corpus,
				       struct reason *why);
MUST_USE enum status ledger_put_method(struct ledger *ledger, int64_t survey,
				       const char *corpus, size_t place,
				       const struct method_fact *method,
				       struct reason *why);
MUST_USE enum status ledger_put_cell(struct ledger *ledger, int64_t survey,
				     const char *corpus, size_t place,
				     const struct cell_fact *cell,
				     struct reason *why);
MUST_USE enum status ledger_put_timing(struct ledger *ledger, int64_t survey,
				       const char *corpus,
				       const struct cell_key *key,
				       const struct cell_timing *timing,
				       struct reason *why);

/*
 * Reads a survey whole, finished or not; id 0 is the newest. The caller
 * releases it. STATUS_NOT_FOUND names the ids that are there.
 */
MUST_USE enum status ledger_read(struct ledger *ledger, int64_t id,
				 struct survey *survey, struct reason *why);
/* Ids of all surveys, oldest first; *ids is owned by the caller. */
MUST_USE enum status ledger_list(struct ledger *ledger, int64_t **ids,
				 size_t *count, struct reason *why);
/*
 * Copies the newest survey of each part into one survey of the ledger. The
 * parts must have the same plan but for --part; a cell that two parts hold
 * must be equal. STATUS_MISMATCH says which is not.
 */
MUST_USE enum status ledger_merge(struct ledger *ledger,
				  const char *const *parts, size_t part_count,
				  int64_t *id, struct reason *why);

#endif
