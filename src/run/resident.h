/* Corpora in memory while work on them is left. */
#ifndef RUN_RESIDENT_H
#define RUN_RESIDENT_H

#include "corpus/corpus.h"
#include "ledger/survey.h"
#include "symbols/sequence.h"

#include <pthread.h>

/* One corpus, opened by the first thread that needs it. */
struct resident {
	pthread_mutex_t lock;
	const struct set_corpus *declared; /* borrowed */
	size_t users;                      /* pieces of work still to come */
	bool tried; /* opening was tried; status and why say how it went */
	enum status status;
	struct reason why;
	struct corpus corpus;
	struct sequence sequence;
	struct cuts cuts;
};

MUST_USE enum status resident_init(struct resident *resident,
				   const struct set_corpus *declared,
				   size_t users);
/*
 * Opens the corpus unless that was done, and returns how it went: the statuses
 * of corpus_open and sequence_init. The caller calls resident_drop once for
 * every call, whatever it returned.
 */
MUST_USE enum status resident_take(struct resident *resident,
				   uint64_t bytes_allowed);
/* After the last user the bytes are given back. */
void resident_drop(struct resident *resident);
void resident_release(struct resident *resident);

/*
 * What the ledger keeps of it, failed or not; released by the caller with
 * resident_fact_release. STATUS_NO_MEMORY.
 */
MUST_USE enum status resident_fact(const struct resident *resident,
				   struct corpus_fact *fact);

#endif
