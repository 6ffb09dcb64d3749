#include "report/trend_report.h"

#include <string.h>

#include "report/clean.h"
#include "report/json_value.h"
#include "report/stream.h"

const char *trend_kind_name(enum trend_kind kind)
{
	switch (kind) {
	case TREND_WORSE:
		return "worse";
	case TREND_BETTER:
		return "better";
	case TREND_SHIFT:
		return "shift";
	default:
		return "corpus";
	}
}

/* "; zlib 1.2.13 before, 1.3.1 after" */
struct version_words {
	char text[200];
};

static struct version_words versions(const struct trend *trend,
				     const struct trend_event *event)
{
	const char *codec = trend->series[event->series].key.codec;
	const char *now = trend_version(&trend->nights[event->night], codec);
	const char *before =
		event->night
			? trend_version(&trend->nights[event->night - 1], codec)
			: now;
	struct version_words words = {""};

	if (!*now && !*before)
		return words;
	if (strcmp(now, before) == 0)
		(void)snprintf(words.text, sizeof(words.text),
			       "; %.40s %.40s before and after", codec, now);
	else
		(void)snprintf(words.text, sizeof(words.text),
			       "; %.40s %.40s before, %.40s after", codec,
			       before, now);
	return words;
}

struct trend_words trend_words(const struct trend *trend,
			       const struct trend_event *event)
{
	struct trend_words words;
	const struct version_words version = versions(trend, event);

	if (event->kind == TREND_CORPUS)
		(void)snprintf(words.text, sizeof(words.text),
			       "other bytes or symbols; compared anew from "
			       "here");
	else if (event->kind == TREND_SHIFT)
		(void)snprintf(words.text, sizeof(words.text),
			       "%+.5f bits per symbol against its yardstick "
			       "(from %.5f to %.5f), seen in survey %lld; data "
			       "of this kind%s",
			       event->after - event->before, event->before,
			       event->after,
			       (long long)trend->nights[event->seen].survey,
			       version.text);
	else
		(void)snprintf(
			words.text, sizeof(words.text),
			"%+.3f%% (from %.0f to %.0f bytes); this file: exact%s",
			event->before > 0
				? 100 * (event->after / event->before - 1)
				: 0,
			event->before, event->after, version.text);
	return words;
}

/* "survey 5 (2031-05-02T01:00:00Z)" */
static void write_night(FILE *out, const struct trend_night *night)
{
	char clean[4 * LEDGER_NAME_BYTES];

	(void)clean_ascii(night->started, clean, sizeof(clean));
	(void)fprintf(out, "survey %lld%s%s%s", (long long)night->survey,
		      *clean ? " (" : "", clean, *clean ? ")" : "");
}

static void write_clean(FILE *out, const char *text, bool markdown)
{
	char clean[4096];

	if (markdown)
		(void)clean_markdown(text, clean, sizeof(clean));
	else
		(void)clean_ascii(text, clean, sizeof(clean));
	(void)fputs(clean, out);
}

static void write_event(FILE *out, const struct trend *trend,
			const struct trend_event *event, bool markdown)
{
	const struct trend_series *series = &trend->series[event->series];

	(void)fputs("- ", out);
	write_night(out, &trend->nights[event->night]);
	(void)fprintf(out, ": %s: ", trend_kind_name(event->kind));
	write_clean(out, series->corpus, markdown);
	(void)fputs(", ", out);
	write_clean(out, cell_words(&series->key).text, markdown);
	(void)fputs(": ", out);
	write_clean(out, trend_words(trend, event).text, markdown);
	(void)fputc('\n', out);
}

/* How the sums stand tonight: the nearest to an alarm comes first to mind. */
static void write_sums(FILE *out, const struct trend *trend, bool markdown)
{
	if (!trend->rolling_count)
		return;
	(void)fprintf(out,
		      "\nSums of rolling corpora tonight (alarm above %.2f: "
		      "one false alarm in %d nights over %zu cells; k = %.1f)"
		      "\n\n",
		      trend->limit, TREND_NIGHTS, trend->rolling_count,
		      TREND_K);
	for (size_t i = 0; i < trend->series_count; i++) {
		const struct trend_series *series = &trend->series[i];

		if (!series->judged)
			continue;
		(void)fputs("- ", out);
		write_clean(out, series->corpus, markdown);
		(void)fputs(", ", out);
		write_clean(out, cell_words(&series->key).text, markdown);
		(void)fprintf(out, ": %.2f over %zu nights", series->sum,
			      series->judged);
		if (series->spread > 1)
			(void)fprintf(out,
				      "; nights vary %.2f times as much as "
				      "their intervals say, which is allowed "
				      "for",
				      series->spread);
		(void)fputc('\n', out);
	}
}

static enum status write_words(FILE *out, const struct trend *trend,
			       bool markdown, struct reason *why)
{
	(void)fputs(markdown ? "## Trend of " : "Trend of ", out);
	write_clean(out, trend->set_name, markdown);
	(void)fprintf(out, ", %zu nights", trend->night_count);
	if (trend->night_count) {
		(void)fputs(": ", out);
		write_night(out, &trend->nights[0]);
		(void)fputs(" to ", out);
		write_night(out, &trend->nights[trend->night_count - 1]);
	}
	(void)fprintf(out, "\n\n%s\n",
		      trend->event_count ? "Changes, by the night they began:\n"
					 : "No change.");
	for (size_t i = 0; i < trend->event_count; i++)
		write_event(out, trend, &trend->events[i], markdown);
	write_sums(out, trend, markdown);
	return report_finish(out, STATUS_OK, why);
}

static enum status text_write(FILE *out, const struct trend *trend,
			      struct reason *why)
{
	return write_words(out, trend, false, why);
}

static enum status markdown_write(FILE *out, const struct trend *trend,
				  struct reason *why)
{
	return write_words(out, trend, true, why);
}

static enum status csv_write(FILE *out, const struct trend *trend,
			     struct reason *why)
{
	(void)fputs("kind,survey,started,seen,corpus,codec,level,layout,"
		    "before,after\r\n",
		    out);
	for (size_t i = 0; i < trend->event_count; i++) {
		const struct trend_event *event = &trend->events[i];
		const struct trend_series *series =
			&trend->series[event->series];
		const struct trend_night *night = &trend->nights[event->night];
		const char *texts[] = {night->started, series->corpus,
				       series->key.codec, series->key.level,
				       series->key.layout};
		char clean[5][8 * LEDGER_NAME_BYTES];

		for (size_t j = 0; j < 5; j++)
			(void)clean_csv(texts[j], clean[j], sizeof(clean[j]));
		(void)fprintf(out, "%s,%lld,%s,%lld,%s,%s,%s,%s,%.9g,%.9g\r\n",
			      trend_kind_name(event->kind),
			      (long long)night->survey, clean[0],
			      (long long)trend->nights[event->seen].survey,
			      clean[1], clean[2], clean[3], clean[4],
			      event->before, event->after);
	}
	return report_finish(out, STATUS_OK, why);
}

static json_t *event_object(const struct trend *trend,
			    const struct trend_event *event)
{
	const struct trend_series *series = &trend->series[event->series];
	const struct trend_night *night = &trend->nights[event->night];
	struct json_maker made;

	json_begin(&made);
	json_put_text(&made, "kind", trend_kind_name(event->kind));
	json_put_count(&made, "survey", (uint64_t)night->survey);
	json_put_text(&made, "started", night->started);
	json_put_count(&made, "seen",
		       (uint64_t)trend->nights[event->seen].survey);
	json_put_text(&made, "corpus", series->corpus);
	json_put_text(&made, "codec", series->key.codec);
	json_put_text(&made, "level", series->key.level);
	json_put_text(&made, "layout", series->key.layout);
	json_put_real(&made, "before", true, event->before);
	json_put_real(&made, "after", true, event->after);
	json_put_text(&made, "words", trend_words(trend, event).text);
	return json_done(&made);
}

static json_t *sum_object(const struct trend_series *series)
{
	struct json_maker made;

	json_begin(&made);
	json_put_text(&made, "corpus", series->corpus);
	json_put_text(&made, "codec", series->key.codec);
	json_put_text(&made, "level", series->key.level);
	json_put_text(&made, "layout", series->key.layout);
	json_put_count(&made, "nights", series->judged);
	json_put_real(&made, "sum", true, series->sum);
	json_put_real(&made, "spread", true, series->spread);
	return json_done(&made);
}

static enum status json_write(FILE *out, const struct trend *trend,
			      struct reason *why)
{
	json_t *events = json_array(), *sums = json_array(), *root;
	struct json_maker made;

	json_begin(&made);
	json_put_text(&made, "set", trend->set_name);
	json_put_count(&made, "nights", trend->night_count);
	json_put_count(&made, "rolling_cells", trend->rolling_count);
	json_put_real(&made, "limit", trend->rolling_count > 0, trend->limit);
	for (size_t i = 0; i < trend->event_count; i++)
		made.failed |=
			json_array_append_new(
				events,
				event_object(trend, &trend->events[i])) != 0;
	for (size_t i = 0; i < trend->series_count; i++) {
		if (trend->series[i].judged)
			made.failed |=
				json_array_append_new(
					sums, sum_object(&trend->series[i])) !=
				0;
	}
	json_put(&made, "events", events);
	json_put(&made, "sums", sums);
	root = json_done(&made);
	if (!root)
		return report_finish(out, STATUS_NO_MEMORY, why);
	(void)json_dumpf(root, out, JSON_INDENT(2) | JSON_REAL_PRECISION(15));
	(void)fputc('\n', out);
	json_decref(root);
	return report_finish(out, STATUS_OK, why);
}

static const struct trend_format text = {"text", text_write};
static const struct trend_format markdown = {"markdown", markdown_write};
static const struct trend_format csv = {"csv", csv_write};
static const struct trend_format json = {"json", json_write};

const struct trend_format *const trend_formats[] = {&text, &markdown, &csv,
						    &json, NULL};

const struct trend_format *trend_format_find(const char *name)
{
	for (size_t i = 0; trend_formats[i]; i++) {
		if (strcmp(trend_formats[i]->name, name) == 0)
			return trend_formats[i];
	}
	return NULL;
}
