/* Does the JSON report keep its contract with other programs (RFC 8259)? */
#include "report/report.h"

#include "base/memory.h"
#include "support/near.h"
#include "support/sample_analysis.h"

#include <jansson.h>
#include <math.h>
#include <string.h>

/* The keys of the contract, in order; more may follow. */
static const char *const root_keys[] = {"schema",  "program",   "set",
					"survey",  "libraries", "seed",
					"corpora", NULL};
static const char *const corpus_keys[] = {
	"name",      "symbols",    "n",       "alphabet",
	"sha256",    "known_rate", "orders",  "trusted_order",
	"estimates", "floor",      "bracket", "cells",
	NULL};
static const char *const order_keys[] = {
	"order",    "H",        "h_plugin", "h_corrected", "h_crossfit",
	"coverage", "distinct", "trusted",  NULL};
static const char *const estimate_keys[] = {
	"method", "bits_per_symbol", "low", "high", "leans", "is_code", NULL};
static const char *const floor_keys[] = {"held_by", "bits_per_symbol", "low",
					 "high", NULL};
static const char *const bracket_keys[] = {"low", "high", "open_below",
					   "not_calibrated", NULL};
static const char *const stack_keys[] = {
	"floor",          "restart",        "family",        "effort",
	"framing",        "best_level",     "restart_low",   "restart_high",
	"restart_reason", "family_low",     "family_high",   "family_reason",
	"effort_low",     "effort_high",    "effort_reason", "framing_low",
	"framing_high",   "framing_reason", "storage",       NULL};
static const char *const cell_keys[] = {
	"codec",
	"level",
	"layout",
	"bytes",
	"lossless",
	"bits_per_symbol",
	"low",
	"high",
	"gap",
	"gap_low",
	"gap_high",
	"gap_percent",
	"stack",
	"encode_mb_per_s",
	"decode_mb_per_s",
	"encode_memory_bytes",
	"decode_memory_bytes",
	"bits_per_record",
	"efficiency",
	"effective_order",
	"effective_blocks",
	"interval_reason",
	"flush_cost",
	"status",
	NULL,
};

static void has_keys(json_t *object, const char *const *keys)
{
	const char *key;
	json_t *value;
	size_t i = 0;

	assert_true(json_is_object(object));
	json_object_foreach(object, key, value)
	{
		if (!keys[i])
			break;
		assert_string_equal(key, keys[i]);
		i++;
	}
	assert_null(keys[i]);
}

static void each_has_keys(json_t *array, const char *const *keys, size_t count)
{
	assert_true(json_is_array(array));
	assert_int_equal(json_array_size(array), count);
	for (size_t i = 0; i < count; i++)
		has_keys(json_array_get(array, i), keys);
}

static json_t *parsed(const struct analysis *analysis)
{
	char *text = sample_report(report_find("json"), analysis);
	json_error_t error;
	json_t *root = json_loads(text, JSON_REJECT_DUPLICATES, &error);

	if (!root)
		fail_msg("line %d: %s", error.line, error.text);
	memory_free(text);
	return root;
}

/* root.corpora[i].key */
static json_t *of_corpus(json_t *root, size_t i, const char *key)
{
	json_t *corpora = json_object_get(root, "corpora");

	return json_object_get(json_array_get(corpora, i), key);
}

static json_t *of_row(json_t *root, const char *rows, size_t i, const char *key)
{
	return json_object_get(json_array_get(of_corpus(root, 0, rows), i),
			       key);
}

static void keys_stand_in_their_order(void **state)
{
	struct sample_analysis sample;
	json_t *root;

	(void)state;
	sample_analysis_init(&sample);
	root = parsed(&sample.analysis);
	has_keys(root, root_keys);
	each_has_keys(json_object_get(root, "corpora"), corpus_keys, 2);
	each_has_keys(of_corpus(root, 0, "orders"), order_keys, 2);
	each_has_keys(of_corpus(root, 0, "estimates"), estimate_keys, 3);
	each_has_keys(of_corpus(root, 0, "cells"), cell_keys, 3);
	for (size_t i = 0; i < 2; i++) {
		has_keys(of_corpus(root, i, "floor"), floor_keys);
		has_keys(of_corpus(root, i, "bracket"), bracket_keys);
	}
	for (size_t i = 0; i < 3; i++)
		has_keys(of_row(root, "cells", i, "stack"), stack_keys);
	json_decref(root);
	sample_analysis_release(&sample);
}

static void is_real(json_t *value, double wanted)
{
	assert_true(json_is_real(value));
	assert_near(json_real_value(value), wanted, 1e-12);
}

static void is_text(json_t *value, const char *wanted)
{
	assert_true(json_is_string(value));
	assert_string_equal(json_string_value(value), wanted);
}

static void is_count(json_t *value, json_int_t wanted)
{
	assert_true(json_is_integer(value));
	assert_int_equal(json_integer_value(value), wanted);
}

static void values_are_those_of_the_analysis(void **state)
{
	struct sample_analysis sample;
	json_t *root, *floor;

	(void)state;
	sample_analysis_init(&sample);
	root = parsed(&sample.analysis);
	is_count(json_object_get(root, "schema"), 1);
	is_text(json_object_get(root, "set"), "marrow-bay");
	is_count(json_object_get(root, "survey"), 3);
	is_count(json_object_get(root, "seed"), 7);
	is_text(json_object_get(json_object_get(root, "libraries"), "liblzma"),
		"5.4.1");
	is_text(of_corpus(root, 0, "symbols"), "u16le");
	is_count(of_corpus(root, 0, "n"), 4194304);
	is_real(of_corpus(root, 0, "known_rate"), 1.5100372);
	assert_true(json_is_null(of_corpus(root, 1, "known_rate")));
	is_text(of_corpus(root, 1, "status"), "skipped");
	is_real(of_row(root, "orders", 0, "h_crossfit"), 2.2);
	assert_true(json_is_null(of_row(root, "orders", 1, "h_crossfit")));
	assert_true(json_is_true(of_row(root, "orders", 0, "trusted")));
	is_text(of_row(root, "estimates", 2, "method"), "mix");
	is_text(of_row(root, "estimates", 2, "leans"), "above");
	assert_true(json_is_true(of_row(root, "estimates", 2, "is_code")));
	floor = of_corpus(root, 0, "floor");
	is_text(json_object_get(floor, "held_by"), "mix");
	is_real(json_object_get(floor, "low"), 1.5011);
	is_real(json_object_get(of_corpus(root, 0, "bracket"), "low"), 1.4321);
	is_text(of_row(root, "cells", 0, "level"), "9e");
	is_text(of_row(root, "cells", 1, "layout"), "4096");
	is_count(of_row(root, "cells", 0, "bytes"), 5000000017);
	is_real(of_row(root, "cells", 0, "gap_low"), 0.3701);
	is_real(of_row(root, "cells", 0, "encode_mb_per_s"), 3.517);
	is_real(json_object_get(of_row(root, "cells", 0, "stack"), "effort"),
		-0.01);
	is_real(json_object_get(of_row(root, "cells", 0, "stack"),
				"family_high"),
		0.1469);
	assert_true(json_is_null(json_object_get(
		of_row(root, "cells", 0, "stack"), "effort_low")));
	is_text(json_object_get(of_row(root, "cells", 0, "stack"),
				"effort_reason"),
		"only 5.2 effective blocks where 8 are needed");
	is_count(of_row(root, "cells", 0, "effective_order"), 1);
	json_decref(root);
	sample_analysis_release(&sample);
}

static void unknown_is_null(void **state)
{
	static const char *const refused[] = {"low",
					      "high",
					      "gap_low",
					      "gap_high",
					      "gap_percent",
					      "encode_mb_per_s",
					      "decode_mb_per_s",
					      "bits_per_record",
					      "effective_order",
					      "flush_cost"};
	static const char *const failed[] = {
		"bytes", "bits_per_symbol",     "gap",
		"low",   "encode_memory_bytes", "efficiency"};
	struct sample_analysis sample;
	json_t *root;

	(void)state;
	sample_analysis_init(&sample);
	root = parsed(&sample.analysis);
	for (size_t i = 0; i < 10; i++)
		assert_true(json_is_null(of_row(root, "cells", 1, refused[i])));
	for (size_t i = 0; i < 6; i++)
		assert_true(json_is_null(of_row(root, "cells", 2, failed[i])));
	is_text(of_row(root, "cells", 1, "interval_reason"),
		"only 5.2 effective blocks where 8 are needed");
	is_real(of_row(root, "cells", 1, "effective_blocks"), 5.25);
	assert_true(
		json_is_true(of_row(root, "cells", 1, "above_trusted_order")));
	is_text(of_row(root, "cells", 2, "status"), "failed");
	assert_true(json_is_false(of_row(root, "cells", 2, "lossless")));
	is_text(of_row(root, "cells", 2, "reason"),
		"byte 7: got 0x41, wanted 0x42");
	is_text(of_row(root, "estimates", 1, "status"), "declined");
	assert_true(
		json_is_null(of_row(root, "estimates", 1, "bits_per_symbol")));
	assert_true(json_is_null(
		json_object_get(of_corpus(root, 1, "floor"), "held_by")));
	assert_true(json_is_null(
		json_object_get(of_corpus(root, 1, "bracket"), "high")));
	json_decref(root);
	sample_analysis_release(&sample);
}

static void an_open_bracket_has_no_low(void **state)
{
	struct sample_analysis sample;
	json_t *root, *bracket;

	(void)state;
	sample_analysis_init(&sample);
	sample.views[0].bracket.open_below = true;
	sample.views[0].bracket.not_calibrated = true;
	root = parsed(&sample.analysis);
	bracket = of_corpus(root, 0, "bracket");
	assert_true(json_is_null(json_object_get(bracket, "low")));
	is_real(json_object_get(bracket, "high"), 1.5432);
	assert_true(json_is_true(json_object_get(bracket, "open_below")));
	assert_true(json_is_true(json_object_get(bracket, "not_calibrated")));
	json_decref(root);
	sample_analysis_release(&sample);
}

static void a_cell_that_lost_data_has_failed(void **state)
{
	struct sample_analysis sample;
	json_t *root;

	(void)state;
	sample_analysis_init(&sample);
	sample.survey.corpora[0].cells[0].facts.lossless = 0;
	root = parsed(&sample.analysis);
	is_text(of_row(root, "cells", 0, "status"), "failed");
	json_decref(root);
	sample_analysis_release(&sample);
}

static void hostile_content_stays_json(void **state)
{
	struct sample_analysis sample;
	json_t *root;

	(void)state;
	sample_analysis_init(&sample);
	strcpy(sample.survey.corpora[0].name, "a\"},\xff\x01{\n");
	strcpy(sample.survey.libraries[0].name, "z\xc0lib");
	sample.survey.seed = UINT64_MAX;
	sample.cells[0].gap = (double)NAN;
	sample.cells[0].gap_percent = (double)INFINITY;
	sample.views[0].floor.interval.low = -(double)INFINITY;
	root = parsed(&sample.analysis);
	is_text(of_corpus(root, 0, "name"), "a\"},\xef\xbf\xbd\x01{\n");
	is_text(json_object_get(root, "seed"), "18446744073709551615");
	assert_true(json_is_null(of_row(root, "cells", 0, "gap")));
	assert_true(json_is_null(of_row(root, "cells", 0, "gap_percent")));
	assert_true(json_is_null(
		json_object_get(of_corpus(root, 0, "floor"), "low")));
	json_decref(root);
	sample_analysis_release(&sample);
}

static void an_empty_survey_is_reported(void **state)
{
	struct sample_analysis sample;
	json_t *root;

	(void)state;
	sample_analysis_init(&sample);
	sample.analysis.corpus_count = 0;
	root = parsed(&sample.analysis);
	assert_int_equal(json_array_size(json_object_get(root, "corpora")), 0);
	json_decref(root);
	sample_analysis_release(&sample);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(keys_stand_in_their_order),
		cmocka_unit_test(values_are_those_of_the_analysis),
		cmocka_unit_test(unknown_is_null),
		cmocka_unit_test(an_open_bracket_has_no_low),
		cmocka_unit_test(a_cell_that_lost_data_has_failed),
		cmocka_unit_test(hostile_content_stays_json),
		cmocka_unit_test(an_empty_survey_is_reported),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
