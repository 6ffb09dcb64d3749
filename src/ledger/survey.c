#include "ledger/survey.h"

#include "base/memory.h"

#include <string.h>

void method_fact_release(struct method_fact *method)
{
	memory_free(method->reason);
	findings_release(&method->findings);
	*method = (struct method_fact){.reason = NULL};
}

static uint64_t memory_of(const struct cell_fact *cell, uint64_t fact,
			  uint64_t peak)
{
	return fact == CELL_MEMORY_UNKNOWN && cell->timed && peak ? peak : fact;
}

uint64_t cell_encode_memory(const struct cell_fact *cell)
{
	return memory_of(cell, cell->facts.encode_memory_bytes,
			 cell->timing.encode_peak_bytes);
}

uint64_t cell_decode_memory(const struct cell_fact *cell)
{
	return memory_of(cell, cell->facts.decode_memory_bytes,
			 cell->timing.decode_peak_bytes);
}

void cell_fact_release(struct cell_fact *cell)
{
	memory_free(cell->reason);
	cell_facts_release(&cell->facts);
	*cell = (struct cell_fact){.reason = NULL};
}

void corpus_fact_release(struct corpus_fact *corpus)
{
	for (size_t i = 0; i < corpus->method_count; i++)
		method_fact_release(&corpus->methods[i]);
	for (size_t i = 0; i < corpus->cell_count; i++)
		cell_fact_release(&corpus->cells[i]);
	memory_free(corpus->methods);
	memory_free(corpus->cells);
	memory_free(corpus->block_symbols);
	memory_free(corpus->block_bytes);
	memory_free(corpus->reason);
	memory_free(corpus->origin);
	*corpus = (struct corpus_fact){.reason = NULL};
}

const struct corpus_fact *survey_corpus(const struct survey *survey,
					const char *name)
{
	for (size_t i = 0; i < survey->corpus_count; i++) {
		if (strcmp(survey->corpora[i].name, name) == 0)
			return &survey->corpora[i];
	}
	return NULL;
}

void survey_release(struct survey *survey)
{
	for (size_t i = 0; i < survey->corpus_count; i++)
		corpus_fact_release(&survey->corpora[i]);
	memory_free(survey->corpora);
	memory_free(survey->libraries);
	*survey = (struct survey){0};
}
