/* Do changes show with their night, and does chance alarm as rarely as said? */
#include "verdict/trend.h"

#include "base/memory.h"
#include "base/random.h"
#include "support/gate_nights.h"
#include "support/near.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

static double standard_normal(struct random_stream *random)
{
	/* Box and Muller 1958. */
	double radius = sqrt(-2 * log(1 - random_unit(random)));

	return radius * cos(2 * acos(-1.0) * random_unit(random));
}

/* Chi-square over its degrees, by the cube root of Wilson and Hilferty 1931. */
static double chi_share(struct random_stream *random, double freedom)
{
	double part = 2 / (9 * freedom);
	double root = 1 - part + standard_normal(random) * sqrt(part);

	return root * root * root;
}

#define BLOCKS 60

/* A night as a bootstrap sees it: its own error is estimated, too. */
static struct baseline_pair night_of(struct random_stream *random, double shift,
				     double unrest)
{
	return (struct baseline_pair){
		.known = true,
		.mean = 0.004 * (shift + unrest * standard_normal(random)) -
			0.3,
		.standard_error = 0.004 * sqrt(chi_share(random, BLOCKS - 1)),
		.effective_blocks = BLOCKS,
	};
}

#define CELLS 20
#define NIGHTS_MOST 20000

/* Nights until the first alarm in any cell, all from a fresh ledger. */
static size_t run_length(uint64_t run, double unrest)
{
	struct random_stream random;
	struct trend_cusum cusums[CELLS];
	double limit = trend_limit(CELLS);

	random_init(&random, 385, run);
	for (size_t i = 0; i < CELLS; i++)
		cusums[i] = (struct trend_cusum){.spread = 1};
	for (size_t night = 1; night <= NIGHTS_MOST; night++) {
		for (size_t i = 0; i < CELLS; i++) {
			const struct baseline_pair pair =
				night_of(&random, 0, unrest);

			if (trend_step(&cusums[i], &pair, limit))
				return night;
		}
	}
	return NIGHTS_MOST;
}

/*
 * One false alarm in 1000 nights over all cells: what h is for (Siegmund 1985).
 * Run lengths are about exponential, so a mean of 150 has an error of 8%;
 * nights whose error is itself estimated add a little.
 */
static void chance_alarms_once_in_a_thousand_nights(void **state)
{
	const unsigned runs = 150;
	double total = 0;

	(void)state;
	for (unsigned i = 0; i < runs; i++)
		total += (double)run_length(i, 1);
	print_message("%u runs of %d cells: a false alarm every %.0f nights\n",
		      runs, CELLS, total / runs);
	assert_true(total / runs > 750);
	assert_true(total / runs < 1350);
}

/* Nights that differ by more than their intervals say must not alarm more. */
static void unruly_nights_are_allowed_for(void **state)
{
	const unsigned runs = 40;
	double total = 0;

	(void)state;
	for (unsigned i = 0; i < runs; i++)
		total += (double)run_length(1000 + i, 1.5);
	print_message("nights 1.5 times as unruly: every %.0f nights\n",
		      total / runs);
	/* Without allowing for it, it would be every 30 nights or so. */
	assert_true(total / runs > 250);
}

/*
 * h in closed form, and the run length it stands for: 335.4 at h = 4 and 930.9
 * at h = 5 (Page 1954; Montgomery's tables), so that one cell lies between.
 */
static void limits(void **state)
{
	(void)state;
	assert_near(trend_limit(1), log(500) - 1.17, 1e-12);
	assert_near(trend_limit(40), log(20000) - 1.17, 1e-12);
	assert_near(trend_limit(0), 0, 0);
	assert_true(trend_limit(1) > 5 && trend_limit(1) < 5.1);
}

/*
 * A shift of one standard error after a long quiet time: Siegmund's
 * approximation of the delay, (exp(-b) + b - 1) / (2 / 4) at b = h + 1.166.
 */
static void shifts_are_seen_in_time(void **state)
{
	const unsigned runs = 200;
	double limit = trend_limit(CELLS), b = limit + 1.166, total = 0;
	double wanted = (exp(-b) + b - 1) / 0.5;

	(void)state;
	for (unsigned i = 0; i < runs; i++) {
		struct random_stream random;
		struct trend_cusum cusum = {.spread = 1};
		size_t delay = 0;
		bool seen = false;

		random_init(&random, 77, i);
		for (size_t night = 0; night < 400; night++) {
			const struct baseline_pair pair =
				night_of(&random, 0, 1);

			(void)trend_step(&cusum, &pair, HUGE_VAL);
		}
		cusum.sum = 0;
		while (!seen && delay < 500) {
			const struct baseline_pair pair =
				night_of(&random, 1, 1);

			seen = trend_step(&cusum, &pair, limit);
			delay++;
		}
		total += (double)delay;
	}
	print_message("delay %.1f nights, %.1f by the formula\n", total / runs,
		      wanted);
	assert_near(total / runs, wanted, 0.15 * wanted);
}

/* Adds nights from first to last; change alters the night before it goes in. */
static void add_nights(struct trend *trend, int64_t first, int64_t last,
		       void (*change)(struct baseline *night, void *context),
		       void *context)
{
	for (int64_t survey = first; survey <= last; survey++) {
		struct baseline night;

		gate_night_init(&night);
		night.survey = survey;
		if (change)
			change(&night, context);
		assert_int_equal(trend_add(trend, &night), STATUS_OK);
		baseline_release(&night);
	}
}

static void grow_zlib(struct baseline *night, void *context)
{
	(void)context;
	gate_night_cell(night, "frames", "zlib", "9")->bytes += 1;
	night->libraries[1] = (struct library_fact){"zlib", "1.3.1"};
}

static void exact_changes_have_their_night(void **state)
{
	struct trend trend = {.nights = NULL};
	const struct trend_event *event;

	(void)state;
	add_nights(&trend, 1, 4, NULL, NULL);
	add_nights(&trend, 5, 7, grow_zlib, NULL);
	add_nights(&trend, 8, 8, NULL, NULL);
	assert_int_equal(trend_find(&trend), STATUS_OK);
	assert_int_equal(trend.event_count, 2);
	event = &trend.events[0];
	assert_int_equal(event->kind, TREND_WORSE);
	assert_int_equal(trend.nights[event->night].survey, 5);
	assert_string_equal(trend.series[event->series].key.level, "9");
	assert_string_equal(trend_version(&trend.nights[event->night], "zlib"),
			    "1.3.1");
	assert_int_equal(trend.events[1].kind, TREND_BETTER);
	assert_int_equal(trend.nights[trend.events[1].night].survey, 8);
	trend_release(&trend);
}

static void other_bytes(struct baseline *night, void *context)
{
	(void)context;
	(void)snprintf(gate_night_corpus(night, "frames")->sha256, 65, "dead");
	gate_night_cell(night, "frames", "zlib", "9")->bytes = 5;
}

static void other_bytes_are_no_change_of_codec(void **state)
{
	struct trend trend = {.nights = NULL};

	(void)state;
	add_nights(&trend, 1, 2, NULL, NULL);
	add_nights(&trend, 3, 4, other_bytes, NULL);
	assert_int_equal(trend_find(&trend), STATUS_OK);
	assert_int_equal(trend.event_count, 3); /* each of its cells */
	for (size_t i = 0; i < 3; i++)
		assert_int_equal(trend.events[i].kind, TREND_CORPUS);
	trend_release(&trend);
}

struct drift {
	struct random_stream random;
	double shift;
};

static void draw_feed(struct baseline *night, void *context)
{
	struct drift *drift = context;
	struct baseline_cell *cells[] = {
		gate_night_cell(night, "feed", "zlib", "6"),
		gate_night_cell(night, "feed", "zlib", "9"),
		gate_night_cell(night, "feed", "zstd", "3")};

	for (size_t i = 0; i < 3; i++) {
		char against[BASELINE_NAME_BYTES];

		memcpy(against, cells[i]->pair.against, sizeof(against));
		cells[i]->pair =
			night_of(&drift->random, i == 1 ? drift->shift : 0, 1);
		memcpy(cells[i]->pair.against, against, sizeof(against));
	}
}

static void shifts_have_their_night(void **state)
{
	struct trend trend = {.nights = NULL};
	struct drift drift = {.shift = 0};
	const struct trend_event *event;

	(void)state;
	random_init(&drift.random, 9, 9);
	add_nights(&trend, 1, 30, draw_feed, &drift);
	drift.shift = 4;
	add_nights(&trend, 31, 45, draw_feed, &drift);
	assert_int_equal(trend_find(&trend), STATUS_OK);
	assert_int_equal(trend.rolling_count, 3);
	assert_int_equal(trend.event_count, 1);
	event = &trend.events[0];
	assert_int_equal(event->kind, TREND_SHIFT);
	assert_string_equal(trend.series[event->series].key.level, "9");
	/* Within a night or two: the sum may have been above zero by chance. */
	assert_true(trend.nights[event->night].survey >= 29);
	assert_true(trend.nights[event->night].survey <= 31);
	assert_true(trend.nights[event->seen].survey <= 35);
	assert_near(event->after - event->before, 4 * 0.004, 0.006);
	trend_release(&trend);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(chance_alarms_once_in_a_thousand_nights),
		cmocka_unit_test(unruly_nights_are_allowed_for),
		cmocka_unit_test(limits),
		cmocka_unit_test(shifts_are_seen_in_time),
		cmocka_unit_test(exact_changes_have_their_night),
		cmocka_unit_test(other_bytes_are_no_change_of_codec),
		cmocka_unit_test(shifts_have_their_night),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
