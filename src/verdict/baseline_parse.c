#include "verdict/baseline.h"

#include <jansson.h>
#include <stdio.h>
#include <string.h>

#include "base/memory.h"

/* A file is small: a megabyte has some five thousand cells. */
#define TEXT_BYTES_MOST (64 << 20)

/* One object being read; the first thing that is wrong sticks. */
struct reading {
	json_t *object; /* borrowed; NULL where it is missing */
	const char *path;
	char what[64]; /* "cells[3]" */
	enum status status;
	struct reason *why;
};

static void wrong(struct reading *reading, const char *key, const char *wanted)
{
	if (reading->status != STATUS_OK)
		return;
	reading->status = reason_give(
		reading->why, STATUS_BAD_INPUT,
		"%s: %s%s%s: %s is wanted; pin a new baseline if this file was "
		"edited",
		reading->path, reading->what, reading->what[0] ? "." : "", key,
		wanted);
}

static void get_text(struct reading *reading, const char *key, char *text,
		     size_t room)
{
	json_t *value = json_object_get(reading->object, key);
	const char *found = json_string_value(value);

	if (!found || strlen(found) >= room) {
		wrong(reading, key, "a text, not too long,");
		return;
	}
	memcpy(text, found, strlen(found) + 1);
}

/* Numbers past 2^63 are written as text: see report/json_value.h. */
static uint64_t get_count(struct reading *reading, const char *key)
{
	json_t *value = json_object_get(reading->object, key);
	unsigned long long count = 0;
	char rest;

	if (json_is_integer(value) && json_integer_value(value) >= 0)
		return (uint64_t)json_integer_value(value);
	if (json_is_string(value) &&
	    sscanf(json_string_value(value), "%llu%c", &count, &rest) == 1)
		return count;
	wrong(reading, key, "a whole number");
	return 0;
}

static bool get_flag(struct reading *reading, const char *key)
{
	json_t *value = json_object_get(reading->object, key);

	if (!json_is_boolean(value))
		wrong(reading, key, "true or false");
	return json_is_true(value);
}

/* *known may be NULL: then a number is a must. */
static double get_real(struct reading *reading, const char *key, bool *known)
{
	json_t *value = json_object_get(reading->object, key);
	bool is_number = json_is_number(value);

	if (!is_number && (!known || (value && !json_is_null(value))))
		wrong(reading, key, "a number");
	if (known)
		*known = is_number;
	return is_number ? json_number_value(value) : 0;
}

static struct reading inner(const struct reading *outer, const char *key)
{
	struct reading reading = *outer;

	reading.object = json_object_get(outer->object, key);
	(void)snprintf(reading.what, sizeof(reading.what), "%s", key);
	if (!json_is_object(reading.object))
		wrong(&reading, "", "an object");
	return reading;
}

static struct reading item(const struct reading *outer, const char *key,
			   size_t i)
{
	struct reading reading = *outer;

	reading.object = json_array_get(json_object_get(outer->object, key), i);
	(void)snprintf(reading.what, sizeof(reading.what), "%s[%zu]", key, i);
	if (!json_is_object(reading.object))
		wrong(&reading, "", "an object");
	return reading;
}

static void read_corpus(struct reading *reading, struct baseline_corpus *corpus)
{
	char word[32] = "";

	get_text(reading, "corpus", corpus->name, sizeof(corpus->name));
	get_text(reading, "symbols", word, sizeof(word));
	if (reading->status == STATUS_OK &&
	    symbol_kind_parse(word, &corpus->kind, NULL) != STATUS_OK)
		wrong(reading, "symbols", "a kind of symbol");
	get_text(reading, "feed", word, sizeof(word));
	corpus->rolling = strcmp(word, "rolling") == 0;
	if (!corpus->rolling && strcmp(word, "fixed") != 0)
		wrong(reading, "feed", "fixed or rolling");
	corpus->n = get_count(reading, "n");
	get_text(reading, "sha256", corpus->sha256, sizeof(corpus->sha256));
	corpus->floor_bits_per_symbol =
		get_real(reading, "floor", &corpus->floor_known);
	if (corpus->floor_known)
		get_text(reading, "held_by", corpus->floor_held_by,
			 sizeof(corpus->floor_held_by));
	corpus->floor_by_codec = get_flag(reading, "floor_by_codec");
}

static void read_pair(struct reading *reading, struct baseline_pair *pair)
{
	pair->mean = get_real(reading, "mean", &pair->known);
	if (!pair->known)
		return;
	pair->standard_error = get_real(reading, "standard_error", NULL);
	pair->effective_blocks = get_real(reading, "blocks", NULL);
	get_text(reading, "against", pair->against, sizeof(pair->against));
}

static void read_cell(struct reading *reading, struct baseline_cell *cell)
{
	static const char *const ratios[RATIO_COUNT] = {
		"encode_time", "decode_time", "encode_memory", "decode_memory"};

	get_text(reading, "corpus", cell->corpus, sizeof(cell->corpus));
	get_text(reading, "codec", cell->key.codec, sizeof(cell->key.codec));
	get_text(reading, "level", cell->key.level, sizeof(cell->key.level));
	get_text(reading, "layout", cell->key.layout, sizeof(cell->key.layout));
	cell->ran = cell->lossless = true;
	cell->bytes = get_count(reading, "bytes");
	cell->gap = get_real(reading, "gap", &cell->has_gap);
	cell->gap_least = cell->gap;
	read_pair(reading, &cell->pair);
	for (size_t i = 0; i < RATIO_COUNT; i++)
		cell->ratios[i].value =
			get_real(reading, ratios[i], &cell->ratios[i].known);
}

static enum status read_head(struct reading *root, struct baseline *baseline)
{
	struct reading part;
	bool known = false;

	get_text(root, "set", baseline->set_name, sizeof(baseline->set_name));
	get_text(root, "program", baseline->program, sizeof(baseline->program));
	TRY(root->status);
	part = inner(root, "pinned");
	baseline->survey = (int64_t)get_count(&part, "survey");
	get_text(&part, "started", baseline->started,
		 sizeof(baseline->started));
	TRY(part.status);
	part = inner(root, "options");
	baseline->orders = (unsigned)get_count(&part, "orders");
	baseline->seed = get_count(&part, "seed");
	TRY(part.status);
	part = inner(root, "rules");
	get_text(&part, "yardstick", baseline->yardstick,
		 sizeof(baseline->yardstick));
	baseline->gap_limit = get_real(&part, "gap_limit", &known);
	if (!known)
		baseline->gap_limit = -1;
	baseline->tolerance = get_real(&part, "tolerance", NULL);
	baseline->speed_tolerance = get_real(&part, "speed_tolerance", NULL);
	return part.status;
}

static enum status make_list(struct reading *root, const char *key, size_t each,
			     void *list, size_t *count)
{
	json_t *array = json_object_get(root->object, key);

	if (!json_is_array(array)) {
		wrong(root, key, "a list");
		return root->status;
	}
	if (memory_new_zeroed(json_array_size(array), each, list) != STATUS_OK)
		return reason_give(root->why, STATUS_NO_MEMORY,
				   "%s: out of memory", root->path);
	*count = json_array_size(array);
	return STATUS_OK;
}

static enum status read_lists(struct reading *root, struct baseline *baseline)
{
	struct reading each = *root;

	TRY(make_list(root, "libraries", sizeof(*baseline->libraries),
		      &baseline->libraries, &baseline->library_count));
	TRY(make_list(root, "corpora", sizeof(*baseline->corpora),
		      &baseline->corpora, &baseline->corpus_count));
	TRY(make_list(root, "cells", sizeof(*baseline->cells), &baseline->cells,
		      &baseline->cell_count));
	for (size_t i = 0; i < baseline->library_count; i++) {
		struct library_fact *library = &baseline->libraries[i];

		each = item(root, "libraries", i);
		get_text(&each, "library", library->name,
			 sizeof(library->name));
		get_text(&each, "version", library->version,
			 sizeof(library->version));
		TRY(each.status);
	}
	for (size_t i = 0; i < baseline->corpus_count; i++) {
		each = item(root, "corpora", i);
		read_corpus(&each, &baseline->corpora[i]);
		TRY(each.status);
	}
	for (size_t i = 0; i < baseline->cell_count; i++) {
		each = item(root, "cells", i);
		read_cell(&each, &baseline->cells[i]);
		TRY(each.status);
	}
	return STATUS_OK;
}

static enum status read_root(struct reading *root, struct baseline *baseline)
{
	uint64_t schema = get_count(root, "baseline");

	TRY(root->status);
	if (schema != BASELINE_SCHEMA)
		return reason_give(root->why, STATUS_MISMATCH,
				   "%s: a baseline of schema %llu, this "
				   "ratefloor compares %d: pin a new one",
				   root->path, (unsigned long long)schema,
				   BASELINE_SCHEMA);
	TRY(read_head(root, baseline));
	TRY(read_lists(root, baseline));
	baseline_sort(baseline);
	return STATUS_OK;
}

enum status baseline_parse(struct baseline *baseline, const char *text,
			   size_t length, const char *path, struct reason *why)
{
	json_error_t error;
	json_t *root;
	struct baseline made = {.survey = 0};
	struct reading reading = {.path = path, .why = why};
	enum status status;

	if (length > TEXT_BYTES_MOST)
		return reason_give(why, STATUS_BAD_INPUT,
				   "%s: too long for a baseline", path);
	root = json_loadb(text, length, JSON_REJECT_DUPLICATES, &error);
	if (!root)
		return reason_give(why, STATUS_BAD_INPUT,
				   "%s:%d: not a baseline: %s", path,
				   error.line, error.text);
	reading.object = root;
	status = read_root(&reading, &made);
	json_decref(root);
	if (status != STATUS_OK) {
		baseline_release(&made);
		return status;
	}
	*baseline = made;
	return STATUS_OK;
}
