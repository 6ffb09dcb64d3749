/* Station table of Marrow Bay: readings as comma-separated decimals. */
#include "source/bytestream.h"
#include "source/clockface.h"
#include "source/source_rows.h"
#include "source/walk.h"

#include <string.h>

/*
 * A header, then one row every ten minutes:
 * 2031-03-02T04:10:00Z,281.6,11.52,24.32,12.8,101325,N
 * Every column has a fixed width, so a row has ROW_BYTES bytes, and the columns
 * step independently: bits per byte = (sum of the walks' H(step) + the wind
 * chain's rate) / ROW_BYTES. The header is written once and adds nothing.
 * Walks are pulled to their centre: with the pulls below, the stationary
 * law falls off as exp(-2 |x| pull / variance), which puts leaving a column's
 * digits below 1e-20 a row; the generator wraps there, so that even then each
 * row can be read back.
 */
static const char header[] =
	"time,level_cm,temperature_c,salinity_g_kg,turbidity_ntu,pressure_pa,"
	"wind\n";

enum { COLUMNS = 5, ROW_BYTES = 54, START_SECONDS = 983577600 };

struct column {
	int64_t centre; /* in units of the last digit */
	uint32_t sides, pull;
	unsigned whole, decimals; /* digits before and after the point */
};

static const struct column columns[COLUMNS] = {
	{2816, 9, 64, 3, 1},     /* level */
	{1452, 4, 32, 2, 2},     /* temperature */
	{2431, 3, 24, 2, 2},     /* salinity */
	{312, 4, 64, 2, 1},      /* turbidity */
	{101325, 24, 192, 6, 0}, /* pressure */
};

/*
 * The wind keeps its direction in 6 of 8 cases, and turns one point of eight
 * to either side in 1 of 8 each: a doubly stochastic chain, so every row counts
 * the same and the rate is H(6/8, 1/8, 1/8).
 */
static const char wind_names[8][3] = {"N.", "NE", "E.", "SE",
				      "S.", "SW", "W.", "NW"};
static const uint32_t wind_turns[3] = {1, 6, 1};

static double table_rate(void)
{
	struct weights turn;
	double bits;

	weights_init(&turn, wind_turns, 3);
	bits = weights_entropy(&turn);
	for (unsigned i = 0; i < COLUMNS; i++) {
		struct walk walk;

		walk_init(&walk, columns[i].centre, columns[i].sides,
			  columns[i].pull);
		bits += weights_entropy(&walk.step);
	}
	return bits / ROW_BYTES;
}

static char *column_write(const struct column *column, int64_t reading,
			  char *text)
{
	unsigned digits = column->whole + column->decimals;
	char figures[16];

	digits_write((uint64_t)reading, digits, figures);
	*text++ = ',';
	memcpy(text, figures, column->whole);
	text += column->whole;
	if (column->decimals)
		*text++ = '.';
	memcpy(text, figures + column->whole, column->decimals);
	return text + column->decimals;
}

static void table_row(struct source_stream *stream, uint64_t seconds,
		      const int64_t readings[COLUMNS], uint32_t wind)
{
	char row[ROW_BYTES];
	char *next = row + CLOCKFACE_BYTES;

	clockface_write(seconds, row);
	for (unsigned i = 0; i < COLUMNS; i++)
		next = column_write(&columns[i], readings[i], next);
	*next++ = ',';
	memcpy(next, wind_names[wind], 2);
	next[2] = '\n';
	stream_put(stream, row, ROW_BYTES);
}

static int64_t wrapped(const struct column *column, int64_t reading)
{
	int64_t limit = 1;

	for (unsigned i = 0; i < column->whole + column->decimals; i++)
		limit *= 10;
	return (reading % limit + limit) % limit;
}

static void table_generate(struct source_stream *stream, uint64_t seed)
{
	struct random_stream random;
	struct weights turn;
	struct walk walks[COLUMNS];
	int64_t readings[COLUMNS];
	uint32_t wind;

	random_init(&random, seed, random_name("station-table"));
	weights_init(&turn, wind_turns, 3);
	for (unsigned i = 0; i < COLUMNS; i++) {
		walk_init(&walks[i], columns[i].centre, columns[i].sides,
			  columns[i].pull);
		readings[i] = columns[i].centre;
	}
	wind = random_below(&random, 8);
	stream_text(stream, header);
	for (uint64_t row = 0; !stream_full(stream); row++) {
		table_row(stream, START_SECONDS + 600 * row, readings, wind);
		for (unsigned i = 0; i < COLUMNS; i++)
			readings[i] = wrapped(
				&columns[i],
				walk_next(&walks[i], readings[i], &random));
		wind = (wind + 7 + weights_draw(&turn, &random)) % 8;
	}
}

const struct source source_station_table = {
	.name = "station-table",
	.summary = "table of station readings: decimals in fixed columns",
	.publication = "sum of the columns' rates, Cover and Thomas 2006, 4.2",
	.symbols = "byte",
	.records = "lines",
	.default_symbols = 1 << 20,
	.rate_exact = true,
	.bits_per_symbol = table_rate,
	.generate = table_generate,
};
