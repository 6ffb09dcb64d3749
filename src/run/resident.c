#include "run/resident.h"

#include <stdio.h>
#include <string.h>

enum status resident_init(struct resident *resident,
			  const struct set_corpus *declared, size_t users)
{
	*resident = (struct resident){.declared = declared, .users = users};
	if (pthread_mutex_init(&resident->lock, NULL) != 0)
		return STATUS_NO_MEMORY;
	return STATUS_OK;
}

static MUST_USE enum status open_bytes(struct resident *resident,
				       uint64_t bytes_allowed)
{
	struct reason *why = &resident->why;
	enum status status;

	TRY(corpus_open(resident->declared, bytes_allowed, &resident->corpus,
			why));
	status = sequence_init(&resident->sequence,
			       corpus_bytes(&resident->corpus),
			       &resident->declared->rules, why);
	if (status != STATUS_OK) {
		reason_prefix(why, "%s: ", resident->declared->file);
		corpus_close(&resident->corpus);
		return status;
	}
	status = cuts_init(&resident->cuts, &resident->sequence);
	if (status != STATUS_OK) {
		sequence_release(&resident->sequence);
		corpus_close(&resident->corpus);
	}
	return status;
}

enum status resident_take(struct resident *resident, uint64_t bytes_allowed)
{
	enum status status;

	(void)pthread_mutex_lock(&resident->lock);
	if (!resident->tried) {
		resident->tried = true;
		resident->status = open_bytes(resident, bytes_allowed);
		if (resident->status != STATUS_OK && !resident->why.text[0])
			(void)reason_give(&resident->why, resident->status,
					  "%s", status_words(resident->status));
	}
	status = resident->status;
	(void)pthread_mutex_unlock(&resident->lock);
	return status;
}

static void close_bytes(struct resident *resident)
{
	if (!resident->tried || resident->status != STATUS_OK)
		return;
	cuts_release(&resident->cuts);
	sequence_release(&resident->sequence);
	corpus_close(&resident->corpus);
	resident->tried = false;
}

void resident_drop(struct resident *resident)
{
	(void)pthread_mutex_lock(&resident->lock);
	if (resident->users && --resident->users == 0)
		close_bytes(resident);
	(void)pthread_mutex_unlock(&resident->lock);
}

void resident_release(struct resident *resident)
{
	if (!resident->declared)
		return;
	close_bytes(resident);
	(void)pthread_mutex_destroy(&resident->lock);
	*resident = (struct resident){0};
}

static MUST_USE enum status copy_text(const char *text, char **copy)
{
	size_t length = strlen(text) + 1;

	TRY(memory_new(length, 1, copy));
	memcpy(*copy, text, length);
	return STATUS_OK;
}

static enum outcome outcome_of(const struct resident *resident)
{
	if (resident->status == STATUS_OK)
		return OUTCOME_DONE;
	if (resident->status == STATUS_NOT_FOUND &&
	    resident->declared->origin[0])
		return OUTCOME_SKIPPED;
	return OUTCOME_FAILED;
}

static MUST_USE enum status fill_blocks(const struct cuts *cuts,
					struct corpus_fact *fact)
{
	fact->blocks = cuts->blocks;
	if (!cuts->blocks)
		return STATUS_OK;
	TRY(memory_new(cuts->blocks, sizeof(*fact->block_symbols),
		       &fact->block_symbols));
	TRY(memory_new(cuts->blocks, sizeof(*fact->block_bytes),
		       &fact->block_bytes));
	for (size_t i = 0; i < cuts->blocks; i++) {
		fact->block_symbols[i] = cuts->symbol[i + 1] - cuts->symbol[i];
		fact->block_bytes[i] = cuts->byte[i + 1] - cuts->byte[i];
	}
	return STATUS_OK;
}

static MUST_USE enum status fill(const struct resident *resident,
				 struct corpus_fact *fact)
{
	const struct sequence *sequence = &resident->sequence;

	TRY(copy_text(resident->why.text, &fact->reason));
	TRY(copy_text(resident->declared->origin, &fact->origin));
	if (fact->outcome != OUTCOME_DONE)
		return STATUS_OK;
	fact->file_bytes = resident->corpus.length;
	fact->canonical_bytes = sequence->canonical_bytes;
	fact->n = sequence->n;
	fact->distinct = sequence->distinct;
	fact->alphabet = sequence->alphabet;
	fact->records = sequence->records;
	memcpy(fact->sha256, resident->corpus.sha256, sizeof(fact->sha256));
	return fill_blocks(&resident->cuts, fact);
}

enum status resident_fact(const struct resident *resident,
			  struct corpus_fact *fact)
{
	const struct set_corpus *declared = resident->declared;
	struct corpus_fact made = {
		.outcome = outcome_of(resident),
		.kind = declared->rules.kind,
		.rate_known = declared->rate_known,
		.known_rate = declared->known_rate,
		.rolling = declared->rolling,
	};
	enum status status;

	(void)snprintf(made.name, sizeof(made.name), "%s", declared->name);
	(void)snprintf(made.licence, sizeof(made.licence), "%s",
		       declared->licence);
	status = fill(resident, &made);
	if (status != STATUS_OK) {
		corpus_fact_release(&made);
		return status;
	}
	*fact = made;
	return STATUS_OK;
}
