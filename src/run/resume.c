#include "run/resume.h"

#include "base/digest.h"
#include "base/memory.h"

#include <stdio.h>
#include <string.h>

/* Same set, rules and program: the same plan; the part is told apart. */
enum status resume_digest(const struct plan *plan,
			  const struct run_rules *rules,
			  char text[RESUME_DIGEST_BYTES])
{
	struct buffer all;
	char line[256], digest[DIGEST_TEXT_BYTES];
	enum status status = STATUS_OK;

	buffer_init(&all, SIZE_MAX / 2);
	(void)snprintf(line, sizeof(line), "%s\n%s\n%llu\n%u\n", rules->program,
		       plan->set->digest, (unsigned long long)rules->seed,
		       rules->orders);
	status = buffer_add(&all, line, strlen(line));
	for (size_t i = 0; status == STATUS_OK && i < plan->corpus_count; i++) {
		const char *name = plan->set->corpora[plan->corpora[i]].name;

		status = buffer_add(&all, name, strlen(name) + 1);
	}
	for (size_t i = 0; status == STATUS_OK && i < plan->cell_count; i++)
		status = buffer_add(&all, &plan->cells[i].place,
				    sizeof(plan->cells[i].place));
	for (size_t i = 0; status == STATUS_OK && i < plan->rows_count; i++)
		status = buffer_add(&all, plan->rows[i].place,
				    sizeof(plan->rows[i].place));
	if (status == STATUS_OK) {
		digest_sha256(all.bytes, all.length, digest);
		(void)snprintf(text, RESUME_DIGEST_BYTES, "%s", digest);
	}
	buffer_release(&all);
	return status;
}

static bool holds_rows(const struct corpus_fact *corpus,
		       const struct plan_rows *rows)
{
	size_t found = 0;

	for (size_t i = 0; i < rows->count; i++) {
		for (size_t j = 0; j < corpus->method_count; j++)
			found += strcmp(corpus->methods[j].method,
					rows->row[i]->name) == 0 &&
				 corpus->methods[j].page_bytes ==
					 rows->page_bytes;
	}
	return found == rows->count;
}

bool resume_holds(const struct survey *held, const struct plan *plan,
		  const struct plan_item *item)
{
	const struct corpus_fact *corpus =
		survey_corpus(held, plan->set->corpora[item->corpus].name);

	if (!corpus || corpus->outcome != OUTCOME_DONE)
		return false;
	return item->cell ? plan_cell_held(corpus, item->cell) != NULL
			  : holds_rows(corpus, item->rows);
}

size_t resume_failed(const struct survey *held)
{
	size_t failed = 0;

	for (size_t i = 0; i < held->corpus_count; i++) {
		const struct corpus_fact *corpus = &held->corpora[i];

		for (size_t j = 0; j < corpus->cell_count; j++)
			failed += corpus->cells[j].outcome == OUTCOME_FAILED;
		for (size_t j = 0; j < corpus->method_count; j++)
			failed += corpus->methods[j].outcome == OUTCOME_FAILED;
	}
	return failed;
}
