/* Marrow Bay's event feed and station table: text that machines write. */
#include "source/source_rows.h"

#include "base/random.h"
#include "source/weights.h"

#include <stdio.h>
#include <string.h>

#define COUNT(array) (sizeof(array) / sizeof(*(array)))
#define LINE_BYTES 256

/*
 * event-feed: a JSON object a line. The stations follow a chain: stay with
 * 4/8, go on to the next with 3/8, to the one after with 1/8; it is doubly
 * stochastic, so its stationary distribution is uniform. The kind of event is a
 * draw of its own, and so are its value (three digits, uniform below 1000, or
 * the levels' weights) and the pause before it. Number and time have a fixed
 * width, the number is one more each time, modulo 10^8, and the time tells the
 * pause: a line and the one before tell every draw. So the rate is the entropy
 * of a line over its mean length (renewal reward: Cover and Thomas, chapter 4,
 * for the chain; the law of large numbers for the length).
 */
static const char *const stations[] = {"north-sill", "eel-ground", "far-spit",
				       "mill-race",  "old-quay",   "withy-bed",
				       "salt-house", "outer-bar"};
static const uint32_t move_weights[] = {4, 3, 1};
static const char *const kinds[] = {"level", "wave",  "drift", "silt",
				    "door",  "power", "alarm"};
static const uint32_t kind_weights[] = {40, 24, 14, 10, 6, 5, 1};
static const uint32_t pause_weights[] = {20, 10, 5, 3, 1, 1};
static const uint32_t value_weights[] = {1, 2, 4, 8, 12, 16, 12, 8, 4, 2, 1};
static const char *const states[] = {"ok", "late", "held"};
static const uint32_t state_weights[] = {60, 3, 1};

#define FEED_START 1764547200U
#define FEED_NUMBER 100000000U

static const struct weights move = {move_weights, COUNT(move_weights)};
static const struct weights kind = {kind_weights, COUNT(kind_weights)};
static const struct weights pause_before = {pause_weights,
					    COUNT(pause_weights)};
static const struct weights value = {value_weights, COUNT(value_weights)};
static const struct weights state = {state_weights, COUNT(state_weights)};

struct feed {
	struct random_stream random;
	size_t station;
	uint32_t number, time;
};

static size_t feed_line(struct feed *feed, char line[LINE_BYTES])
{
	size_t of_kind, steps;

	feed->station = (feed->station + weights_draw(&move, &feed->random)) %
			COUNT(stations);
	of_kind = weights_draw(&kind, &feed->random);
	steps = weights_draw(&pause_before, &feed->random);
	feed->time += 1 + (uint32_t)steps;
	feed->number = (feed->number + 1) % FEED_NUMBER;
	return (size_t)snprintf(
		line, LINE_BYTES,
		"{\"event\":\"%08u\",\"at\":%010u,\"station\":\"%s\","
		"\"kind\":\"%s\",\"value\":4.%02u,\"state\":\"%s\"}\n",
		feed->number, feed->time, stations[feed->station],
		kinds[of_kind],
		40 + (unsigned)weights_draw(&value, &feed->random),
		states[weights_draw(&state, &feed->random)]);
}

/* Mean length of the names under their weights; NULL: all alike. */
static double mean_length(const char *const *names, size_t count,
			  const struct weights *weights)
{
	double length[COUNT(stations)], sum = 0;

	for (size_t i = 0; i < count; i++) {
		length[i] = (double)strlen(names[i]);
		sum += length[i];
	}
	return weights ? weights_mean(weights, length) : sum / (double)count;
}

static enum status feed_rate(double *bits_per_symbol)
{
	static const char fixed[] =
		"{\"event\":\"00000000\",\"at\":0000000000,\"station\":\"\","
		"\"kind\":\"\",\"value\":4.00,\"state\":\"\"}\n";
	double bits = weights_entropy(&move) + weights_entropy(&kind) +
		      weights_entropy(&pause_before) + weights_entropy(&value) +
		      weights_entropy(&state);
	double length = (double)(sizeof(fixed) - 1) +
			mean_length(stations, COUNT(stations), NULL) +
			mean_length(kinds, COUNT(kinds), &kind) +
			mean_length(states, COUNT(states), &state);

	*bits_per_symbol = bits / length;
	return STATUS_OK;
}

static enum status feed_make(uint64_t symbols, uint64_t seed,
			     struct buffer *out, struct reason *why)
{
	struct feed feed = {.time = FEED_START};
	char line[LINE_BYTES];

	(void)why;
	random_init(&feed.random, seed, random_name("event-feed"));
	while (symbols) {
		size_t length = feed_line(&feed, line);

		TRY(emit(out, line, length, &symbols));
	}
	return STATUS_OK;
}

const struct source source_event_feed = {
	.name = "event-feed",
	.summary = "JSON lines of an observatory's events",
	.symbols = 2000000,
	.rate = feed_rate,
	.make = feed_make,
};

/*
 * station-table: CSV; the stations in turn, each with a level in millimetres, a
 * temperature and a salinity that walk by small steps, modulo 10^4, 10^3 and
 * 10^5, and a count of fish uniform below 10. All widths are fixed, so a row
 * costs the entropy of its steps over its length; the mean over the stations'
 * names, which come in turn. The head is gone in the limit.
 */
static const uint32_t level_steps[] = {1, 3, 8, 14, 20, 14, 8, 3, 1};
static const uint32_t warm_steps[] = {1, 6, 1};
static const uint32_t salt_steps[] = {1, 2, 4, 6, 4, 2, 1};

static const struct weights level_step = {level_steps, COUNT(level_steps)};
static const struct weights warm_step = {warm_steps, COUNT(warm_steps)};
static const struct weights salt_step = {salt_steps, COUNT(salt_steps)};

#define FISH 10
#define LOG2_FISH 3.3219280948873623

struct table {
	struct random_stream random;
	uint32_t row;
	uint32_t level[COUNT(stations)], warm[COUNT(stations)],
		salt[COUNT(stations)];
};

static const char table_head[] =
	"row,station,level_mm,temperature_dc,salinity_mg,fish\n";

static uint32_t walk(uint32_t at, const struct weights *steps, uint32_t modulo,
		     struct random_stream *random)
{
	uint32_t middle = (uint32_t)(steps->count / 2);

	return (at + modulo - middle + (uint32_t)weights_draw(steps, random)) %
	       modulo;
}

static size_t table_line(struct table *table, char line[LINE_BYTES])
{
	size_t i = table->row % COUNT(stations);
	struct random_stream *random = &table->random;

	table->level[i] = walk(table->level[i], &level_step, 10000, random);
	table->warm[i] = walk(table->warm[i], &warm_step, 1000, random);
	table->salt[i] = walk(table->salt[i], &salt_step, 100000, random);
	table->row = (table->row + 1) % FEED_NUMBER;
	return (size_t)snprintf(line, LINE_BYTES, "%08u,%s,%04u,%03u,%05u,%u\n",
				table->row, stations[i], table->level[i],
				table->warm[i], table->salt[i],
				random_below(random, FISH));
}

static enum status table_rate(double *bits_per_symbol)
{
	static const char fixed[] = "00000000,,0000,000,00000,0\n";
	double bits = weights_entropy(&level_step) +
		      weights_entropy(&warm_step) +
		      weights_entropy(&salt_step) + LOG2_FISH;

	*bits_per_symbol =
		bits / ((double)(sizeof(fixed) - 1) +
			mean_length(stations, COUNT(stations), NULL));
	return STATUS_OK;
}

static enum status table_make(uint64_t symbols, uint64_t seed,
			      struct buffer *out, struct reason *why)
{
	struct table table = {.row = 0};
	char line[LINE_BYTES];

	(void)why;
	random_init(&table.random, seed, random_name("station-table"));
	for (uint32_t i = 0; i < COUNT(stations); i++) {
		table.level[i] = 2000 + 170 * i;
		table.warm[i] = 110 + 3 * i;
		table.salt[i] = 31000 + 251 * i;
	}
	TRY(emit(out, table_head, sizeof(table_head) - 1, &symbols));
	while (symbols) {
		size_t length = table_line(&table, line);

		TRY(emit(out, line, length, &symbols));
	}
	return STATUS_OK;
}

const struct source source_station_table = {
	.name = "station-table",
	.summary = "a CSV table of stations in turn with walking columns",
	.symbols = 1500000,
	.rate = table_rate,
	.make = table_make,
};
