#include "run/measure.h"

#include "base/digest.h"
#include "corpus/file_read.h"
#include "suffix/suffix.h"

#include <stdio.h>
#include <string.h>

/* A copy of the words, or NULL (shown as none) where memory is out. */
static char *keep_words(const struct reason *why)
{
	size_t length = strlen(why->text) + 1;
	char *copy;

	if (memory_new(length, 1, &copy) != STATUS_OK)
		return NULL;
	memcpy(copy, why->text, length);
	return copy;
}

static enum outcome outcome_of(enum status status)
{
	if (status == STATUS_OK)
		return OUTCOME_DONE;
	return status == STATUS_TOO_SHORT ? OUTCOME_DECLINED : OUTCOME_FAILED;
}

static void name_method(const struct estimator *row, size_t page_bytes,
			struct method_fact *fact)
{
	*fact = (struct method_fact){.page_bytes = page_bytes};
	(void)snprintf(fact->method, sizeof(fact->method), "%s", row->name);
}

static MUST_USE enum status try_row(const struct estimator *row,
				    const struct estimate_input *input,
				    struct findings *findings,
				    struct reason *why)
{
	if (input->sequence->kind == SYMBOL_WORD && !row->reads_words)
		return reason_give(why, STATUS_TOO_SHORT,
				   "not defined for symbols = word; declare "
				   "another kind to run %s",
				   row->name);
	return row->measure(input, findings, why);
}

static void measure_row(const struct measure_rows *job, size_t i,
			const struct suffix *suffix)
{
	const struct plan_rows *rows = job->item->rows;
	const struct estimator *row = rows->row[i];
	const struct estimate_input input = {
		.sequence = job->sequence,
		.cuts = job->cuts,
		.suffix = suffix,
		.orders = job->orders,
		.page_bytes = rows->page_bytes,
		.threads = 1,
	};
	struct method_fact fact;
	struct reason why = {""};
	enum status status;

	name_method(row, rows->page_bytes, &fact);
	status = try_row(row, &input, &fact.findings, &why);
	if (status != STATUS_OK && !why.text[0])
		(void)reason_give(&why, status, "%s", status_words(status));
	fact.outcome = outcome_of(status);
	fact.reason = keep_words(&why);
	job->put(job->context, job->item, rows->place[i], &fact);
	method_fact_release(&fact);
}

static void decline_rows(const struct measure_rows *job, enum status status,
			 const struct reason *why)
{
	const struct plan_rows *rows = job->item->rows;

	for (size_t i = 0; i < rows->count; i++) {
		struct method_fact fact;

		name_method(rows->row[i], rows->page_bytes, &fact);
		fact.outcome = outcome_of(status);
		fact.reason = keep_words(why);
		job->put(job->context, job->item, rows->place[i], &fact);
		method_fact_release(&fact);
	}
}

void measure_rows(const struct measure_rows *job)
{
	const struct plan_rows *rows = job->item->rows;
	struct suffix suffix;
	struct reason why = {""};
	enum status status;

	if (!rows->row[0]->needs_suffix) {
		measure_row(job, 0, NULL);
		return;
	}
	status = suffix_init(&suffix, job->sequence, job->orders, &why);
	if (status != STATUS_OK) {
		decline_rows(job, status, &why);
		return;
	}
	for (size_t i = 0; i < rows->count; i++)
		measure_row(job, i, &suffix);
	suffix_release(&suffix);
}

void measure_cell(const struct plan_cell *cell, const struct sequence *sequence,
		  const struct cuts *cuts, struct cell_fact *fact)
{
	struct reason why = {""};
	enum status status;

	*fact = (struct cell_fact){.page_bytes = cell->page_bytes};
	(void)snprintf(fact->key.codec, sizeof(fact->key.codec), "%s",
		       cell->codec->name);
	(void)snprintf(fact->key.level, sizeof(fact->key.level), "%s",
		       cell->setting.text);
	layout_format(cell->page_bytes, fact->key.layout);
	status = cell_measure(cell->codec, &cell->setting, cell->page_bytes,
			      sequence, cuts, &fact->facts, &why);
	fact->outcome = outcome_of(status);
	if (status == STATUS_OK && !fact->facts.lossless)
		fact->outcome = OUTCOME_FAILED;
	if (status != STATUS_OK && !why.text[0])
		(void)reason_give(&why, status, "%s", status_words(status));
	fact->reason = keep_words(&why);
}

/* Programs and objects are small against what a machine has. */
#define OWN_BYTES_MOST ((uint64_t)1 << 30)

/* Digits of a digest that tell two builds apart. */
#define OWN_DIGITS 16

/* What nobody can read is told when it is to run. */
static void note_own(const struct house *house, struct library_fact *fact)
{
	const struct read_limit limit = {OWN_BYTES_MOST, 1};
	char path[HOUSE_PATH_BYTES], digest[DIGEST_TEXT_BYTES];
	uint8_t *bytes;
	size_t length;

	(void)snprintf(fact->name, sizeof(fact->name), "%s",
		       house_codec(house)->name);
	(void)snprintf(fact->version, sizeof(fact->version), "unreadable");
	if (!house_program(house, path) ||
	    file_read(path, &limit, &bytes, &length, NULL) != STATUS_OK)
		return;
	digest_sha256(bytes, length, digest);
	memory_free(bytes);
	(void)snprintf(fact->version, sizeof(fact->version), "sha256 %.*s",
		       OWN_DIGITS, digest);
}

enum status measure_libraries(const struct plan *plan, struct survey *survey)
{
	size_t count = 0;

	while (codecs[count])
		count++;
	TRY(memory_new_zeroed(count + 1 + plan->house_count,
			      sizeof(*survey->libraries), &survey->libraries));
	for (size_t i = 0; i < count; i++) {
		struct library_fact *fact =
			&survey->libraries[survey->library_count];

		if (!codecs[i]->version)
			continue;
		(void)snprintf(fact->name, sizeof(fact->name), "%s",
			       codecs[i]->name);
		(void)snprintf(fact->version, sizeof(fact->version), "%s",
			       codecs[i]->version());
		survey->library_count++;
	}
	for (size_t i = 0; i < plan->house_count; i++)
		note_own(plan->houses[i],
			 &survey->libraries[survey->library_count++]);
	survey->libraries[survey->library_count++] =
		(struct library_fact){REFERENCE_NAME, REFERENCE_VERSION};
	return STATUS_OK;
}
