#include "ledger/survey.h"

#include "base/memory.h"

static void corpus_fact_release(struct corpus_fact *corpus)
{
	for (size_t i = 0; i < corpus->method_count; i++) {
		memory_free(corpus->methods[i].reason);
		findings_release(&corpus->methods[i].findings);
	}
	for (size_t i = 0; i < corpus->cell_count; i++) {
		memory_free(corpus->cells[i].reason);
		cell_facts_release(&corpus->cells[i].facts);
	}
	memory_free(corpus->methods);
	memory_free(corpus->cells);
	memory_free(corpus->block_symbols);
	memory_free(corpus->block_bytes);
	memory_free(corpus->reason);
	memory_free(corpus->origin);
}

void survey_release(struct survey *survey)
{
	for (size_t i = 0; i < survey->corpus_count; i++)
		corpus_fact_release(&survey->corpora[i]);
	memory_free(survey->corpora);
	memory_free(survey->libraries);
	*survey = (struct survey){0};
}
