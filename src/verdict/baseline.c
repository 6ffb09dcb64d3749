#include "verdict/baseline.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "base/memory.h"

struct cell_words cell_words(const struct cell_key *key)
{
	bool whole = strcmp(key->layout, "whole") == 0 || !key->layout[0];
	struct cell_words words;

	(void)snprintf(words.text, sizeof(words.text), "%s%s%s%s%s", key->codec,
		       key->level[0] ? " " : "", key->level, whole ? "" : " ",
		       whole ? "" : key->layout);
	return words;
}

static int by_name(const void *left, const void *right)
{
	const struct baseline_corpus *a = left, *b = right;

	return strcmp(a->name, b->name);
}

static int by_library(const void *left, const void *right)
{
	const struct library_fact *a = left, *b = right;

	return strcmp(a->name, b->name);
}

/* Numbers by their value, so that level 9 stands before 19. */
static int by_number(const char *a, const char *b)
{
	long left = strtol(a, NULL, 10), right = strtol(b, NULL, 10);

	if (left != right)
		return left < right ? -1 : 1;
	return strcmp(a, b);
}

static int by_key(const struct cell_key *a, const struct cell_key *b)
{
	int order = strcmp(a->codec, b->codec);

	if (!order)
		order = by_number(a->level, b->level);
	return order ? order : by_number(a->layout, b->layout);
}

static int by_cell(const void *left, const void *right)
{
	const struct baseline_cell *a = left, *b = right;
	int order = strcmp(a->corpus, b->corpus);

	return order ? order : by_key(&a->key, &b->key);
}

void baseline_sort(struct baseline *baseline)
{
	if (baseline->library_count)
		qsort(baseline->libraries, baseline->library_count,
		      sizeof(*baseline->libraries), by_library);
	if (baseline->corpus_count)
		qsort(baseline->corpora, baseline->corpus_count,
		      sizeof(*baseline->corpora), by_name);
	if (baseline->cell_count)
		qsort(baseline->cells, baseline->cell_count,
		      sizeof(*baseline->cells), by_cell);
}

const struct baseline_corpus *
baseline_corpus_find(const struct baseline *baseline, const char *name)
{
	for (size_t i = 0; i < baseline->corpus_count; i++) {
		if (strcmp(baseline->corpora[i].name, name) == 0)
			return &baseline->corpora[i];
	}
	return NULL;
}

struct baseline_cell *baseline_cell_find(const struct baseline *baseline,
					 const char *corpus,
					 const struct cell_key *key)
{
	struct baseline_cell wanted = {.key = *key};

	if (!baseline->cell_count)
		return NULL;
	(void)snprintf(wanted.corpus, sizeof(wanted.corpus), "%s", corpus);
	return bsearch(&wanted, baseline->cells, baseline->cell_count,
		       sizeof(wanted), by_cell);
}

const char *baseline_version(const struct baseline *baseline,
			     const char *library)
{
	for (size_t i = 0; i < baseline->library_count; i++) {
		if (strcmp(baseline->libraries[i].name, library) == 0)
			return baseline->libraries[i].version;
	}
	return "";
}

void baseline_release(struct baseline *baseline)
{
	memory_free(baseline->libraries);
	memory_free(baseline->corpora);
	memory_free(baseline->cells);
	*baseline = (struct baseline){.survey = 0};
}

static bool is_kept(const struct baseline *baseline, const char *corpus)
{
	const struct baseline_corpus *found =
		baseline_corpus_find(baseline, corpus);

	return found && found->outcome != OUTCOME_SKIPPED;
}

static enum status find_failure(const struct baseline *baseline,
				struct reason *why)
{
	for (size_t i = 0; i < baseline->corpus_count; i++) {
		const struct baseline_corpus *corpus = &baseline->corpora[i];

		if (corpus->outcome == OUTCOME_FAILED || corpus->broken[0])
			return reason_give(
				why, STATUS_CODEC,
				"%s failed: %s; a pin would hide it: mend it "
				"and survey again",
				corpus->name,
				corpus->broken[0] ? corpus->broken
						  : corpus->reason);
	}
	for (size_t i = 0; i < baseline->cell_count; i++) {
		const struct baseline_cell *cell = &baseline->cells[i];

		if (!cell->ran || !cell->lossless)
			return reason_give(
				why, STATUS_CODEC,
				"%s, %s failed: %s; a pin would hide it: mend "
				"it and survey again",
				cell->corpus, cell_words(&cell->key).text,
				cell->reason);
	}
	return STATUS_OK;
}

enum status baseline_settle(struct baseline *baseline, struct reason *why)
{
	size_t kept = 0;

	TRY(find_failure(baseline, why));
	for (size_t i = 0; i < baseline->cell_count; i++) {
		if (is_kept(baseline, baseline->cells[i].corpus))
			baseline->cells[kept++] = baseline->cells[i];
	}
	baseline->cell_count = kept;
	kept = 0;
	for (size_t i = 0; i < baseline->corpus_count; i++) {
		if (baseline->corpora[i].outcome != OUTCOME_SKIPPED)
			baseline->corpora[kept++] = baseline->corpora[i];
	}
	baseline->corpus_count = kept;
	return STATUS_OK;
}
