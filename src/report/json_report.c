#include "report/formats.h"

#include "report/clean.h"
#include "report/json_parts.h"
#include "report/json_value.h"
#include "report/stream.h"

/* Counts up only if a key is renamed or changes its meaning: never so far. */
#define JSON_SCHEMA 1
/* The most decimal digits that any double keeps both ways (C11 DBL_DIG). */
#define JSON_DIGITS 15

static json_t *libraries_object(const struct survey *survey)
{
	struct json_maker made;

	json_begin(&made);
	for (size_t i = 0; i < survey->library_count; i++) {
		char name[3 * LEDGER_NAME_BYTES];

		(void)clean_utf8(survey->libraries[i].name, name, sizeof(name));
		json_put_text(&made, name, survey->libraries[i].version);
	}
	return json_done(&made);
}

static json_t *root_object(const struct analysis *analysis)
{
	const struct survey *survey = analysis->survey;
	json_t *corpora = json_array();
	struct json_maker made;

	json_begin(&made);
	json_put_count(&made, "schema", JSON_SCHEMA);
	json_put_text(&made, "program", survey->program);
	json_put_text(&made, "set", survey->set_name);
	json_put_count(&made, "survey", (uint64_t)survey->id);
	json_put(&made, "libraries", libraries_object(survey));
	json_put_count(&made, "seed", survey->seed);
	for (size_t i = 0; i < analysis->corpus_count; i++)
		made.failed |= json_array_append_new(
				       corpora,
				       json_corpus(&analysis->corpora[i])) != 0;
	json_put(&made, "corpora", corpora);
	json_put_bool(&made, "finished", survey->finished);
	json_put_count(&made, "orders", survey->orders);
	json_put_real(&made, "gap_limit", survey->gap_limit >= 0,
		      survey->gap_limit);
	json_put_reason(&made, "yardstick", survey->yardstick);
	return json_done(&made);
}

static enum status json_write(FILE *out, const struct analysis *analysis,
			      struct reason *why)
{
	json_t *root = root_object(analysis);

	if (!root)
		return report_finish(out, STATUS_NO_MEMORY, why);
	/* Refused bytes leave their mark on the stream, which is asked below.
	 */
	(void)json_dumpf(root, out,
			 JSON_INDENT(2) | JSON_REAL_PRECISION(JSON_DIGITS));
	(void)fputc('\n', out);
	json_decref(root);
	return report_finish(out, STATUS_OK, why);
}

const struct report_format report_json = {
	.name = "json",
	.summary = "for other programs; keys are added but never renamed",
	.write = json_write,
};
