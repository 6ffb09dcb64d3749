/* Event feed of Marrow Bay: a JSON object a line. */
#include "source/bytestream.h"
#include "source/clockface.h"
#include "source/source_rows.h"
#include "source/weights.h"

#include <stdio.h>
#include <string.h>

/*
 * {"id":10000001,"time":"2031-03-02T04:05:06Z","station":"heron-slip",
 *  "event":"gate-open","value":12.4,"quality":"good"}
 *
 * An event, given the ones before it, is drawn in independent parts:
 *   time     1 + two dice of 12 seconds after the last event   H(dice)
 *   station  Zipf-like over 24 names                           H(station)
 *   event    from the type before: below                       see there
 *   value    base + two dice of the type's sides               sum pi H(dice)
 *   quality  good, doubtful, bad                               H(quality)
 * and the id counts up. Each part can be read back from the line, so the bits
 * per event are their sum; events end in a newline, so by the renewal-reward
 * theorem bits per byte = bits per event / expected bytes per event, with the
 * stationary law pi of the types. All but station, type, value and quality
 * have a fixed width: id 8 digits, wrapping from 99999999 to 10000000.
 */
enum {
	STATIONS = 24,
	TYPES = 12,
	FIRST_ID = 10000000,
	IDS = 90000000,
	START_SECONDS = 983505906
};

static const char *const stations[STATIONS] = {
	"heron-slip",    "north-mole",   "saltern-gate",  "eel-ladder",
	"cold-harbour",  "mussel-bank",  "ferry-stage",   "withy-pool",
	"kiln-reach",    "outer-buoy",   "tern-island",   "grey-spit",
	"brine-well",    "osier-bend",   "pilot-steps",   "sluice-house",
	"marrow-bridge", "cockle-flats", "lantern-point", "mill-race",
	"weir-top",      "dunlin-creek", "chapel-quay",   "sandglass-bar",
};

/*
 * Types come in cycles: in FOLLOW of FOLLOW_OUT_OF cases an event is followed
 * by its successor, else by a draw from the weights. Weights are equal within
 * a cycle, so the successor map leaves their law pi in place, and so does the
 * draw: pi is stationary. Row i has probability a [j = next(i)] + (1 - a) pi_j.
 */
enum { FOLLOW = 3, FOLLOW_OUT_OF = 5 };

struct event_type {
	const char *name;
	uint32_t weight, next;
	uint32_t base, sides; /* of the value, in tenths */
};

static const struct event_type types[TYPES] = {
	{"gate-open", 12, 1, 40, 30},      {"gate-closed", 12, 0, 0, 3},
	{"pump-start", 18, 3, 120, 40},    {"pump-steady", 18, 4, 380, 12},
	{"pump-stop", 18, 2, 0, 6},        {"level-high", 9, 6, 310, 25},
	{"level-normal", 9, 5, 200, 50},   {"sensor-wake", 24, 8, 36, 4},
	{"sensor-reading", 24, 9, 0, 120}, {"sensor-sleep", 24, 7, 33, 4},
	{"boat-passing", 5, 10, 20, 60},   {"seal-sighted", 2, 11, 10, 8},
};

static const char *const qualities[3] = {"good", "doubtful", "bad"};
static const uint32_t quality_weights[3] = {57, 6, 1};

struct feed_model {
	struct weights wait, station, quality;
	struct weights type;        /* pi */
	struct weights rows[TYPES]; /* the type after type i */
	struct weights values[TYPES];
};

static void row_init(struct weights *row, const struct weights *pi,
		     uint32_t next)
{
	uint32_t values[TYPES];

	for (uint32_t j = 0; j < TYPES; j++) {
		values[j] = (FOLLOW_OUT_OF - FOLLOW) * weights_of(pi, j);
		if (j == next)
			values[j] += FOLLOW * pi->total;
	}
	weights_init(row, values, TYPES);
}

static void model_init(struct feed_model *model)
{
	uint32_t values[TYPES];

	weights_init_dice(&model->wait, 12);
	weights_init_zipf(&model->station, STATIONS, 5040, 2);
	weights_init(&model->quality, quality_weights, 3);
	for (uint32_t i = 0; i < TYPES; i++) {
		values[i] = types[i].weight;
		weights_init_dice(&model->values[i], types[i].sides);
	}
	weights_init(&model->type, values, TYPES);
	for (uint32_t i = 0; i < TYPES; i++)
		row_init(&model->rows[i], &model->type, types[i].next);
}

static size_t value_write(uint32_t type, uint32_t drawn, char text[16])
{
	uint32_t tenths = types[type].base + drawn;

	return (size_t)snprintf(text, 16, "%u.%u", tenths / 10, tenths % 10);
}

static double value_bytes(const struct feed_model *model, uint32_t type)
{
	const struct weights *values = &model->values[type];
	double bytes = 0;

	for (uint32_t i = 0; i < values->count; i++) {
		char text[16];

		bytes += weights_probability(values, i) *
			 (double)value_write(type, i, text);
	}
	return bytes;
}

static double name_bytes(const struct weights *weights,
			 const char *const *names)
{
	double bytes = 0;

	for (uint32_t i = 0; i < weights->count; i++)
		bytes += weights_probability(weights, i) *
			 (double)strlen(names[i]);
	return bytes;
}

static const char frame_text[] =
	"{\"id\":........,\"time\":\"....................\",\"station\":\"\","
	"\"event\":\"\",\"value\":,\"quality\":\"\"}\n";

static double feed_rate(void)
{
	struct feed_model model;
	double bits, bytes;

	model_init(&model);
	bits = weights_entropy(&model.wait) + weights_entropy(&model.station) +
	       weights_entropy(&model.quality);
	bytes = (double)strlen(frame_text) +
		name_bytes(&model.station, stations) +
		name_bytes(&model.quality, qualities);
	for (uint32_t i = 0; i < TYPES; i++) {
		double pi = weights_probability(&model.type, i);

		bits += pi * (weights_entropy(&model.rows[i]) +
			      weights_entropy(&model.values[i]));
		bytes += pi * ((double)strlen(types[i].name) +
			       value_bytes(&model, i));
	}
	return bits / bytes;
}

static void event_put(struct source_stream *stream,
		      const struct feed_model *model, uint64_t head[2],
		      uint32_t type, struct random_stream *random)
{
	char id[8], when[CLOCKFACE_BYTES], value[16];

	digits_write(FIRST_ID + head[0] % IDS, sizeof(id), id);
	clockface_write(head[1], when);
	stream_text(stream, "{\"id\":");
	stream_put(stream, id, sizeof(id));
	stream_text(stream, ",\"time\":\"");
	stream_put(stream, when, sizeof(when));
	stream_text(stream, "\",\"station\":\"");
	stream_text(stream, stations[weights_draw(&model->station, random)]);
	stream_text(stream, "\",\"event\":\"");
	stream_text(stream, types[type].name);
	stream_text(stream, "\",\"value\":");
	value_write(type, weights_draw(&model->values[type], random), value);
	stream_text(stream, value);
	stream_text(stream, ",\"quality\":\"");
	stream_text(stream, qualities[weights_draw(&model->quality, random)]);
	stream_text(stream, "\"}\n");
}

static void feed_generate(struct source_stream *stream, uint64_t seed)
{
	struct random_stream random;
	struct feed_model model;
	uint64_t head[2] = {0, START_SECONDS}; /* events so far, seconds */
	uint32_t type;

	model_init(&model);
	random_init(&random, seed, random_name("event-feed"));
	type = weights_draw(&model.type, &random);
	while (!stream_full(stream)) {
		event_put(stream, &model, head, type, &random);
		head[0]++;
		head[1] += 1 + weights_draw(&model.wait, &random);
		type = weights_draw(&model.rows[type], &random);
	}
}

const struct source source_feed = {
	.name = "event-feed",
	.summary = "JSON lines: events of stations, types that follow a chain",
	.publication = "Cover and Thomas 2006, 4.2; renewal-reward theorem",
	.symbols = "byte",
	.records = "lines",
	.default_symbols = 1 << 21,
	.rate_exact = true,
	.bits_per_symbol = feed_rate,
	.generate = feed_generate,
};
