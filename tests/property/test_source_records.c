/* Can every record be read back, and are its parts worth what is stated? */
#include "source/source.h"

#include "support/near.h"
#include "support/plugin.h"

#include <jansson.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* Fills text (bytes + 1 long) and ends it after its last whole line. */
static char *whole_lines(const char *name, size_t bytes)
{
	char *text = malloc(bytes + 1);

	assert_non_null(text);
	source_fill(source_find(name), bytes, 7, (uint8_t *)text);
	while (bytes && text[bytes - 1] != '\n')
		bytes--;
	text[bytes] = 0;
	return text;
}

/* Cuts the next line off: a terminated string, or NULL at the end. */
static char *next_line(char **rest)
{
	char *line = *rest, *end = strchr(line, '\n');

	if (!end)
		return NULL;
	*end = 0;
	*rest = end + 1;
	return line;
}

struct event {
	long long id;
	const char *time, *station, *type, *quality;
	double value;
};

static json_t *event_read(const char *line, struct event *event)
{
	json_error_t error;
	json_t *object = json_loads(line, JSON_REJECT_DUPLICATES, &error);
	json_int_t id;

	assert_non_null(object);
	assert_int_equal(json_unpack_ex(object, &error, JSON_STRICT,
					"{s:I,s:s,s:s,s:s,s:f,s:s}", "id", &id,
					"time", &event->time, "station",
					&event->station, "event", &event->type,
					"value", &event->value, "quality",
					&event->quality),
			 0);
	event->id = id;
	return object;
}

/* The line is a function of the fields, so the fields hold all its bits. */
static void event_write_matches(const struct event *event, const char *line)
{
	char again[256];

	snprintf(again, sizeof(again),
		 "{\"id\":%lld,\"time\":\"%s\",\"station\":\"%s\","
		 "\"event\":\"%s\",\"value\":%.1f,\"quality\":\"%s\"}",
		 event->id, event->time, event->station, event->type,
		 event->value, event->quality);
	assert_string_equal(again, line);
}

static unsigned seconds_of(const char *time)
{
	unsigned hour, minute, second;

	assert_int_equal(
		sscanf(time + 11, "%2u:%2u:%2uZ", &hour, &minute, &second), 3);
	return hour * 3600 + minute * 60 + second;
}

/* What is counted of the feed. */
struct feed_codes {
	struct codes wait, station, type, pair, value, quality;
};

static double feed_bits(struct feed_codes *codes)
{
	double type = codes_entropy(&codes->type);
	double bits = codes_entropy(&codes->wait) +
		      codes_entropy(&codes->station) +
		      codes_entropy(&codes->pair) - type +
		      codes_entropy(&codes->value) - type +
		      codes_entropy(&codes->quality);

	codes_release(&codes->wait);
	codes_release(&codes->station);
	codes_release(&codes->type);
	codes_release(&codes->pair);
	codes_release(&codes->value);
	codes_release(&codes->quality);
	return bits;
}

static void feed_count(struct feed_codes *codes, const struct event *event,
		       uint64_t last_type, unsigned wait)
{
	uint64_t type = codes_text(event->type);

	codes_add(&codes->wait, wait);
	codes_add(&codes->station, codes_text(event->station));
	codes_add(&codes->type, type);
	codes_add(&codes->pair, last_type * 31 + type);
	codes_add(&codes->value,
		  type * 31 + (uint64_t)llround(event->value * 10));
	codes_add(&codes->quality, codes_text(event->quality));
}

static void events_are_json_and_hold_their_bits(void **state)
{
	char *text = whole_lines("event-feed", 8000000), *rest = text, *line;
	struct feed_codes codes = {0};
	unsigned last_time = 0;
	uint64_t last_type = 0;
	long long last_id = 0;
	double rate;

	(void)state;
	while ((line = next_line(&rest))) {
		struct event event;
		json_t *object = event_read(line, &event);
		unsigned now = seconds_of(event.time);

		event_write_matches(&event, line);
		if (last_id) {
			assert_int_equal(event.id, last_id + 1);
			feed_count(&codes, &event, last_type,
				   (now + 86400 - last_time) % 86400);
		}
		last_id = event.id;
		last_time = now;
		last_type = codes_text(event.type);
		json_decref(object);
	}
	rate = feed_bits(&codes) * (double)(last_id - 10000000) /
	       (double)(rest - text);
	/* 67000 events of 15.4 bits, sd about 3.5: .09% standard error; and
	 * the lengths, .1%. Three of both. */
	assert_near(rate / source_find("event-feed")->bits_per_symbol(), 1,
		    .004);
	free(text);
}

enum { COLUMNS = 5 };

/* Reads a row into whole units of the last digit and writes it again. */
static void row_read(const char *line, long reading[COLUMNS], char wind[3])
{
	int whole[5], part[4];
	char when[24], again[80];

	assert_int_equal(sscanf(line,
				"%20[^,],%3d.%1d,%2d.%2d,%2d.%2d,%2d.%1d,%6d,"
				"%2[NESW.]",
				when, &whole[0], &part[0], &whole[1], &part[1],
				&whole[2], &part[2], &whole[3], &part[3],
				&whole[4], wind),
			 11);
	snprintf(again, sizeof(again),
		 "%s,%03d.%d,%02d.%02d,%02d.%02d,%02d.%d,%06d,%s", when,
		 whole[0], part[0], whole[1], part[1], whole[2], part[2],
		 whole[3], part[3], whole[4], wind);
	assert_string_equal(again, line);
	reading[0] = whole[0] * 10 + part[0];
	reading[1] = whole[1] * 100 + part[1];
	reading[2] = whole[2] * 100 + part[2];
	reading[3] = whole[3] * 10 + part[3];
	reading[4] = whole[4];
}

static size_t columns_of(const char *line)
{
	size_t columns = 1;

	for (; *line; line++)
		columns += *line == ',';
	return columns;
}

static void table_rows_hold_their_bits(void **state)
{
	/* The centres that the readings are pulled to, in last digits. */
	static const long centres[COLUMNS] = {2816, 1452, 2431, 312, 101325};
	char *text = whole_lines("station-table", 6000000), *rest = text, *line;
	struct codes steps[COLUMNS] = {{0}}, wind_pair = {0}, wind = {0};
	long before[COLUMNS], now[COLUMNS];
	char last_wind[3] = "", turned[3];
	double bits = 0;
	size_t rows = 0;

	(void)state;
	line = next_line(&rest);
	assert_int_equal(columns_of(line), 7);
	while ((line = next_line(&rest))) {
		assert_int_equal(strlen(line) + 1, 54);
		assert_int_equal(columns_of(line), 7);
		row_read(line, now, turned);
		for (size_t i = 0; i < COLUMNS && rows; i++) {
			long step = now[i] - before[i];

			codes_add(&steps[i],
				  (uint64_t)(1000 + (before[i] < centres[i]
							     ? step
							     : -step)));
		}
		if (rows) {
			codes_add(&wind, codes_text(last_wind));
			codes_add(&wind_pair, codes_text(last_wind) * 31 +
						      codes_text(turned));
		}
		memcpy(before, now, sizeof(before));
		memcpy(last_wind, turned, sizeof(last_wind));
		rows++;
	}
	for (size_t i = 0; i < COLUMNS; i++) {
		bits += codes_entropy(&steps[i]);
		codes_release(&steps[i]);
	}
	bits += codes_entropy(&wind_pair) - codes_entropy(&wind);
	codes_release(&wind);
	codes_release(&wind_pair);
	/* 111000 rows of 18 bits, sd below 2.5. */
	assert_near(bits / 54 / source_find("station-table")->bits_per_symbol(),
		    1, .002);
	free(text);
}

static uint64_t little(const uint8_t *bytes, size_t count)
{
	uint64_t value = 0;

	while (count--)
		value = value << 8 | bytes[count];
	return value;
}

/* A field of the frame: where it lies and how its step is read. */
static const struct {
	size_t at, bytes;
	uint64_t centre; /* 0: the step as it is */
} frame_steps[] = {
	{2, 2, 0},      {4, 4, 0},        {8, 4, 0},
	{24, 4, 0},     {12, 4, 1013250}, {16, 2, 2816},
	{18, 2, 11520}, {20, 2, 24320},   {22, 2, 1280},
};

static void frames_hold_their_bits(void **state)
{
	enum { FRAMES = 100000, LENGTH = 32 };
	uint8_t *bytes = malloc((size_t)FRAMES * LENGTH);
	struct codes codes = {0}, pair = {0};
	double bits = 0, flag;

	(void)state;
	assert_non_null(bytes);
	source_fill(source_find("gauge-frames"), (size_t)FRAMES * LENGTH, 7,
		    bytes);
	for (size_t f = 0; f < sizeof(frame_steps) / sizeof(*frame_steps);
	     f++) {
		for (size_t i = 1; i < FRAMES; i++) {
			const uint8_t *at =
				bytes + i * LENGTH + frame_steps[f].at;
			uint64_t now = little(at, frame_steps[f].bytes);
			uint64_t old =
				little(at - LENGTH, frame_steps[f].bytes);
			uint64_t mask =
				(UINT64_C(1) << 8 * frame_steps[f].bytes) - 1;
			bool mirror = frame_steps[f].centre &&
				      old >= frame_steps[f].centre;

			codes_add(&codes,
				  (mirror ? old - now : now - old) & mask);
		}
		bits += codes_entropy(&codes);
		codes_release(&codes);
	}
	for (size_t i = 1; i < FRAMES; i++) {
		const uint8_t *frame = bytes + i * LENGTH;

		assert_int_equal(frame[0], 0xb7);
		assert_int_equal(frame[1], 0x14);
		codes_add(&codes, frame[28 - LENGTH]);
		codes_add(&pair, frame[28 - LENGTH] * 2U + frame[28]);
	}
	flag = codes_entropy(&pair) - codes_entropy(&codes);
	/* Rate of the chain (.01, .1): .116084, Cover and Thomas 4.2. */
	assert_near(flag, .116084, .006);
	bits += flag;
	codes_release(&pair);
	codes_release(&codes);
	for (size_t i = 0; i < FRAMES; i++) {
		codes_add(&codes, bytes[i * LENGTH + 29]);
		codes_add(&pair, little(bytes + i * LENGTH + 30, 2));
	}
	bits += codes_entropy(&codes) + codes_entropy(&pair);
	codes_release(&codes);
	codes_release(&pair);
	/* 34 bits a frame, sd 3: .03% standard error. */
	assert_near(bits / LENGTH /
			    source_find("gauge-frames")->bits_per_symbol(),
		    1, .001);
	free(bytes);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(events_are_json_and_hold_their_bits),
		cmocka_unit_test(table_rows_hold_their_bits),
		cmocka_unit_test(frames_hold_their_bits),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
