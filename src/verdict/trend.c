#include "verdict/trend.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

#include "base/memory.h"

/* Makes room for one more of a list that grows by doubling. */
static enum status grow(void *list, size_t count, size_t *room, size_t each)
{
	size_t wanted = *room ? 2 * *room : 16;

	if (count < *room)
		return STATUS_OK;
	TRY(memory_resize(list, wanted, each));
	*room = wanted;
	return STATUS_OK;
}

static enum status find_series(struct trend *trend,
			       const struct baseline_cell *cell, bool rolling,
			       struct trend_series **found)
{
	struct trend_series *series;

	for (size_t i = 0; i < trend->series_count; i++) {
		series = &trend->series[i];
		if (strcmp(series->corpus, cell->corpus) == 0 &&
		    strcmp(series->key.codec, cell->key.codec) == 0 &&
		    strcmp(series->key.level, cell->key.level) == 0 &&
		    strcmp(series->key.layout, cell->key.layout) == 0 &&
		    series->rolling == rolling) {
			*found = series;
			return STATUS_OK;
		}
	}
	TRY(grow(&trend->series, trend->series_count, &trend->series_room,
		 sizeof(*trend->series)));
	series = &trend->series[trend->series_count++];
	*series = (struct trend_series){
		.key = cell->key, .rolling = rolling, .spread = 1};
	(void)snprintf(series->corpus, sizeof(series->corpus), "%s",
		       cell->corpus);
	*found = series;
	return STATUS_OK;
}

static enum status add_point(struct trend *trend, const struct baseline *night,
			     const struct baseline_cell *cell)
{
	const struct baseline_corpus *corpus =
		baseline_corpus_find(night, cell->corpus);
	struct trend_series *series;
	struct trend_point *point;

	if (!corpus || !corpus->n || !cell->lossless)
		return STATUS_OK;
	TRY(find_series(trend, cell, corpus->rolling, &series));
	TRY(grow(&series->points, series->count, &series->room,
		 sizeof(*series->points)));
	point = &series->points[series->count++];
	*point = (struct trend_point){
		.night = trend->night_count - 1,
		.bytes = cell->bytes,
		.bits_per_symbol = 8 * (double)cell->bytes / (double)corpus->n,
		.pair = cell->pair,
	};
	/* Rolling bytes differ every night; what they are must not. */
	(void)snprintf(point->identity, sizeof(point->identity), "%s %s",
		       symbol_kind_name(corpus->kind),
		       corpus->rolling ? cell->pair.against : corpus->sha256);
	return STATUS_OK;
}

enum status trend_add(struct trend *trend, const struct baseline *night)
{
	struct trend_night *added;

	TRY(grow(&trend->nights, trend->night_count, &trend->night_room,
		 sizeof(*trend->nights)));
	added = &trend->nights[trend->night_count];
	*added = (struct trend_night){.survey = night->survey};
	TRY(memory_new(night->library_count, sizeof(*added->libraries),
		       &added->libraries));
	trend->night_count++;
	added->library_count = night->library_count;
	if (night->library_count)
		memcpy(added->libraries, night->libraries,
		       night->library_count * sizeof(*added->libraries));
	(void)snprintf(added->started, sizeof(added->started), "%s",
		       night->started);
	(void)snprintf(trend->set_name, sizeof(trend->set_name), "%s",
		       night->set_name);
	for (size_t i = 0; i < night->cell_count; i++)
		TRY(add_point(trend, night, &night->cells[i]));
	return STATUS_OK;
}

const char *trend_version(const struct trend_night *night, const char *library)
{
	for (size_t i = 0; i < night->library_count; i++) {
		if (strcmp(night->libraries[i].name, library) == 0)
			return night->libraries[i].version;
	}
	return "";
}

void trend_release(struct trend *trend)
{
	for (size_t i = 0; i < trend->night_count; i++)
		memory_free(trend->nights[i].libraries);
	for (size_t i = 0; i < trend->series_count; i++)
		memory_free(trend->series[i].points);
	memory_free(trend->nights);
	memory_free(trend->series);
	memory_free(trend->events);
	*trend = (struct trend){.nights = NULL};
}

static enum status add_event(struct trend *trend,
			     const struct trend_event *event)
{
	TRY(grow(&trend->events, trend->event_count, &trend->event_room,
		 sizeof(*trend->events)));
	trend->events[trend->event_count++] = *event;
	return STATUS_OK;
}

static enum status compare_exactly(struct trend *trend, size_t place)
{
	const struct trend_series *series = &trend->series[place];

	for (size_t i = 1; i < series->count; i++) {
		const struct trend_point *before = &series->points[i - 1];
		const struct trend_point *after = &series->points[i];
		struct trend_event event = {
			.series = place,
			.night = after->night,
			.seen = after->night,
			.before = (double)before->bytes,
			.after = (double)after->bytes,
		};

		if (strcmp(before->identity, after->identity) != 0)
			event.kind = TREND_CORPUS;
		else if (after->bytes == before->bytes)
			continue;
		else
			event.kind = after->bytes > before->bytes
					     ? TREND_WORSE
					     : TREND_BETTER;
		TRY(add_event(trend, &event));
	}
	return STATUS_OK;
}

/* Mean difference over points from first up to, but not with, end. */
static double mean_of(const struct trend_series *series, size_t first,
		      size_t end)
{
	struct trend_cusum level = {.spread = 1};

	for (size_t i = first; i < end; i++) {
		if (series->points[i].pair.known)
			trend_learn(&level, &series->points[i].pair);
	}
	return level.mean;
}

/* What is known of the series while its sum is followed. */
struct following {
	struct trend_cusum cusum;
	size_t level; /* first point of the level now in force */
	size_t start; /* first point since the sum was zero */
	const struct trend_point *last; /* judged; NULL: none yet */
};

static enum status alarm(struct trend *trend, size_t place, size_t seen,
			 struct following *following)
{
	const struct trend_series *series = &trend->series[place];
	size_t start = following->start;
	const struct trend_event event = {
		.kind = TREND_SHIFT,
		.series = place,
		.night = series->points[start].night,
		.seen = series->points[seen].night,
		.before = mean_of(series, following->level, start),
		.after = mean_of(series, start, seen + 1),
	};

	trend_restart(&following->cusum);
	for (size_t i = start; i <= seen; i++) {
		if (series->points[i].pair.known)
			trend_learn(&following->cusum, &series->points[i].pair);
	}
	following->level = start;
	return add_event(trend, &event);
}

static enum status follow(struct trend *trend, size_t place)
{
	struct trend_series *series = &trend->series[place];
	struct following now = {.cusum = {.spread = 1}};

	for (size_t i = 0; i < series->count; i++) {
		const struct trend_point *point = &series->points[i];

		if (!point->pair.known)
			continue;
		if (now.last &&
		    strcmp(point->identity, now.last->identity) != 0) {
			trend_restart(&now.cusum);
			now.level = i;
		}
		if (!now.cusum.rising)
			now.start = i;
		series->judged++;
		now.last = point;
		if (trend_step(&now.cusum, &point->pair, trend->limit))
			TRY(alarm(trend, place, i, &now));
	}
	series->sum = now.cusum.sum;
	series->spread = now.cusum.spread;
	return STATUS_OK;
}

/* Series for which there is a chance to be wrong: two nights or more. */
static bool is_followed(const struct trend_series *series)
{
	size_t known = 0;

	for (size_t i = 0; series->rolling && i < series->count; i++)
		known += series->points[i].pair.known;
	return known >= 2;
}

static int by_night(const void *left, const void *right)
{
	const struct trend_event *a = left, *b = right;

	if (a->night != b->night)
		return a->night < b->night ? -1 : 1;
	return (a->series > b->series) - (a->series < b->series);
}

enum status trend_find(struct trend *trend)
{
	for (size_t i = 0; i < trend->series_count; i++)
		trend->rolling_count += is_followed(&trend->series[i]);
	trend->limit = trend_limit(trend->rolling_count);
	for (size_t i = 0; i < trend->series_count; i++) {
		if (!trend->series[i].rolling)
			TRY(compare_exactly(trend, i));
		else if (is_followed(&trend->series[i]))
			TRY(follow(trend, i));
	}
	if (trend->event_count)
		qsort(trend->events, trend->event_count, sizeof(*trend->events),
		      by_night);
	return STATUS_OK;
}
