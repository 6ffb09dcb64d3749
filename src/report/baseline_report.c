#include "report/baseline_report.h"

#include "report/json_value.h"
#include "report/stream.h"

#include <stdio.h>
#include <stdlib.h>

/* Significant digits: more would change every night and say nothing. */
#define FIGURE_DIGITS 7
#define ERROR_DIGITS 4
#define RATIO_DIGITS 3

static void put_rounded(struct json_maker *made, const char *key, bool known,
			double value, int digits)
{
	char text[40];

	if (!known)
		return;
	(void)snprintf(text, sizeof(text), "%.*g", digits, value);
	json_put_real(made, key, true, strtod(text, NULL));
}

static json_t *library_object(const struct library_fact *library)
{
	struct json_maker made;

	json_begin(&made);
	json_put_text(&made, "library", library->name);
	json_put_text(&made, "version", library->version);
	return json_done(&made);
}

static json_t *corpus_object(const struct baseline_corpus *corpus)
{
	struct json_maker made;

	json_begin(&made);
	json_put_text(&made, "corpus", corpus->name);
	json_put_text(&made, "symbols", symbol_kind_name(corpus->kind));
	json_put_text(&made, "feed", corpus->rolling ? "rolling" : "fixed");
	json_put_count(&made, "n", corpus->n);
	json_put_text(&made, "sha256", corpus->sha256);
	put_rounded(&made, "floor", corpus->floor_known,
		    corpus->floor_bits_per_symbol, FIGURE_DIGITS);
	if (corpus->floor_known)
		json_put_text(&made, "held_by", corpus->floor_held_by);
	json_put_bool(&made, "floor_by_codec", corpus->floor_by_codec);
	return json_done(&made);
}

static json_t *cell_object(const struct baseline_cell *cell)
{
	static const char *const ratios[RATIO_COUNT] = {
		"encode_time", "decode_time", "encode_memory", "decode_memory"};
	struct json_maker made;

	json_begin(&made);
	json_put_text(&made, "corpus", cell->corpus);
	json_put_text(&made, "codec", cell->key.codec);
	json_put_text(&made, "level", cell->key.level);
	json_put_text(&made, "layout", cell->key.layout);
	json_put_count(&made, "bytes", cell->bytes);
	put_rounded(&made, "gap", cell->has_gap, cell->gap, ERROR_DIGITS);
	put_rounded(&made, "mean", cell->pair.known, cell->pair.mean,
		    FIGURE_DIGITS);
	put_rounded(&made, "standard_error", cell->pair.known,
		    cell->pair.standard_error, ERROR_DIGITS);
	put_rounded(&made, "blocks", cell->pair.known,
		    cell->pair.effective_blocks, ERROR_DIGITS);
	if (cell->pair.known)
		json_put_text(&made, "against", cell->pair.against);
	for (size_t i = 0; i < RATIO_COUNT; i++)
		put_rounded(&made, ratios[i], cell->ratios[i].known,
			    cell->ratios[i].value, RATIO_DIGITS);
	return json_done(&made);
}

static json_t *pinned_object(const struct baseline *baseline)
{
	struct json_maker made;

	json_begin(&made);
	json_put_count(&made, "survey", (uint64_t)baseline->survey);
	json_put_text(&made, "started", baseline->started);
	return json_done(&made);
}

static json_t *options_object(const struct baseline *baseline)
{
	struct json_maker made;

	json_begin(&made);
	json_put_count(&made, "orders", baseline->orders);
	json_put_count(&made, "seed", baseline->seed);
	return json_done(&made);
}

static json_t *rules_object(const struct baseline *baseline)
{
	struct json_maker made;

	json_begin(&made);
	json_put_text(&made, "yardstick", baseline->yardstick);
	json_put_real(&made, "gap_limit", baseline->gap_limit >= 0,
		      baseline->gap_limit);
	json_put_real(&made, "tolerance", true, baseline->tolerance);
	json_put_real(&made, "speed_tolerance", true,
		      baseline->speed_tolerance);
	return json_done(&made);
}

/* Writes and releases; false: out of memory. */
static bool write_value(FILE *out, const char *before, json_t *value)
{
	if (!value)
		return false;
	(void)fputs(before, out);
	/* Refused bytes leave their mark on the stream. */
	(void)json_dumpf(value, out, JSON_ENCODE_ANY | JSON_REAL_PRECISION(12));
	json_decref(value);
	return true;
}

static bool write_lists(FILE *out, const struct baseline *baseline)
{
	bool good = true;

	for (size_t i = 0; i < baseline->library_count; i++)
		good &= write_value(out, i ? ",\n" : ",\n\"libraries\": [\n",
				    library_object(&baseline->libraries[i]));
	(void)fputs(baseline->library_count ? "\n]" : ",\n\"libraries\": []",
		    out);
	for (size_t i = 0; i < baseline->corpus_count; i++)
		good &= write_value(out, i ? ",\n" : ",\n\"corpora\": [\n",
				    corpus_object(&baseline->corpora[i]));
	(void)fputs(baseline->corpus_count ? "\n]" : ",\n\"corpora\": []", out);
	for (size_t i = 0; i < baseline->cell_count; i++)
		good &= write_value(out, i ? ",\n" : ",\n\"cells\": [\n",
				    cell_object(&baseline->cells[i]));
	(void)fputs(baseline->cell_count ? "\n]\n}\n" : ",\n\"cells\": []\n}\n",
		    out);
	return good;
}

static json_t *clean_text(const char *text)
{
	struct json_maker made;
	json_t *object, *value;

	json_begin(&made);
	json_put_text(&made, "text", text);
	object = json_done(&made);
	value = json_incref(json_object_get(object, "text"));
	json_decref(object);
	return value;
}

enum status baseline_write(FILE *out, const struct baseline *baseline,
			   struct reason *why)
{
	bool good;

	(void)fprintf(out, "{\n\"baseline\": %d", BASELINE_SCHEMA);
	good = write_value(out, ",\n\"set\": ", clean_text(baseline->set_name));
	good &= write_value(out,
			    ",\n\"program\": ", clean_text(baseline->program));
	good &= write_value(out, ",\n\"pinned\": ", pinned_object(baseline));
	good &= write_value(out, ",\n\"options\": ", options_object(baseline));
	good &= write_value(out, ",\n\"rules\": ", rules_object(baseline));
	good &= write_lists(out, baseline);
	return report_finish(out, good ? STATUS_OK : STATUS_NO_MEMORY, why);
}
