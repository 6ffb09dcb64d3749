/* Packed records: what a gauge on a mooring sends. */
#include "source/source_rows.h"

#include "base/random.h"
#include "source/weights.h"

#define FRAME_BYTES 32
#define RECORD_BYTES 8
#define COUNT(array) (sizeof(array) / sizeof(*(array)))

/*
 * gauge-frames. Every field of a frame is the one before plus a step, modulo
 * its width, or a draw of its own; all are independent. Steps are smaller than
 * the width, so that the frame and the one before tell every step. The rate is
 * the sum of the steps' entropies over the bytes of a frame; for the flag, the
 * rate of its two-state chain.
 */
struct field {
	unsigned offset, bytes; /* little-endian in the frame */
	int32_t least;          /* step of outcome 0 */
	const uint32_t *weight; /* NULL: always the step least */
	size_t count;
	uint32_t start;
};

static const uint32_t clock_steps[] = {63, 1};
static const uint32_t battery_steps[] = {1, 7};
static const uint32_t level_steps[] = {1, 4, 12, 30, 12, 4, 1};
static const uint32_t temperature_steps[] = {8, 48, 8};
static const uint32_t salinity_steps[] = {1,  2, 3, 4, 5, 6, 7, 8, 9, 10, 11,
					  10, 9, 8, 7, 6, 5, 4, 3, 2, 1};
static const uint32_t flow_steps[] = {2, 5, 9, 12, 12, 9, 6, 4, 2, 1, 1, 1};
static const uint32_t pressure_steps[] = {3, 8, 10, 8, 3};

static const struct field fields[] = {
	{4, 4, 60, clock_steps, COUNT(clock_steps), 1764547200},
	{8, 2, -1, battery_steps, COUNT(battery_steps), 41300},
	{10, 2, -3, level_steps, COUNT(level_steps), 2150},
	{12, 2, -1, temperature_steps, COUNT(temperature_steps), 1180},
	{14, 4, -10, salinity_steps, COUNT(salinity_steps), 3410000},
	{18, 4, 0, flow_steps, COUNT(flow_steps), 77},
	{22, 2, -2, pressure_steps, COUNT(pressure_steps), 10132},
	{28, 2, 1, NULL, 0, 0}, /* number of the frame */
};

#define FLAG_OFFSET 24  /* 0 to 1 with 1/100, 1 to 0 with 10/100 */
#define NOISE_OFFSET 25 /* P(g) = 2^-(g + 1), g below 31; 31 takes the rest */
#define SILT_OFFSET 26  /* 16 bits, uniform below 64 */
#define SILT_VALUES 64
#define FLAG_SET 1
#define FLAG_CLEAR 10
#define FLAG_OF 100
#define NOISE_LAST 31

/* Sum of (g + 1) 2^-(g + 1) for g < 31, and 31 bits at 2^-31 for the rest. */
static double noise_entropy(void)
{
	double bits = 0, p = 0.5;

	for (unsigned g = 0; g < NOISE_LAST; g++, p /= 2)
		bits += p * (g + 1);
	return bits + 2 * p * NOISE_LAST;
}

static unsigned draw_noise(struct random_stream *random)
{
	uint32_t bits = random_u32(random) >> (32 - NOISE_LAST);

	return bits ? (unsigned)__builtin_ctz(bits) : NOISE_LAST;
}

static double flag_rate(void)
{
	double set = (double)FLAG_SET / FLAG_OF;
	double clear = (double)FLAG_CLEAR / FLAG_OF;

	return (clear * binary_entropy(set) + set * binary_entropy(clear)) /
	       (set + clear);
}

static void step_flag(uint8_t *flag, struct random_stream *random)
{
	if (random_below(random, FLAG_OF) <
	    (*flag ? (uint32_t)FLAG_CLEAR : (uint32_t)FLAG_SET))
		*flag ^= 1;
}

static void put_little(uint8_t *at, uint32_t value, unsigned bytes)
{
	for (unsigned i = 0; i < bytes; i++)
		at[i] = (uint8_t)(value >> (8 * i));
}

static enum status frames_rate(double *bits_per_symbol)
{
	/* log2 of 64 silt values is 6. */
	double bits = flag_rate() + noise_entropy() + 6;

	for (size_t i = 0; i < COUNT(fields); i++) {
		const struct weights steps = {fields[i].weight,
					      fields[i].count};

		if (fields[i].weight)
			bits += weights_entropy(&steps);
	}
	*bits_per_symbol = bits / FRAME_BYTES;
	return STATUS_OK;
}

static void next_frame(uint8_t frame[FRAME_BYTES], uint32_t *value,
		       struct random_stream *random)
{
	for (size_t i = 0; i < COUNT(fields); i++) {
		const struct field *field = &fields[i];
		const struct weights steps = {field->weight, field->count};
		uint32_t step = (uint32_t)field->least;

		if (field->weight)
			step += (uint32_t)weights_draw(&steps, random);
		value[i] += step;
		put_little(frame + field->offset, value[i], field->bytes);
	}
	step_flag(&frame[FLAG_OFFSET], random);
	frame[NOISE_OFFSET] = (uint8_t)draw_noise(random);
	put_little(frame + SILT_OFFSET, random_below(random, SILT_VALUES), 2);
}

static enum status frames_make(uint64_t symbols, uint64_t seed,
			       struct buffer *out, struct reason *why)
{
	/* Two sync bytes and the number of the station never change. */
	uint8_t frame[FRAME_BYTES] = {0x4d, 0x42, 0x17, 0x00};
	uint32_t value[COUNT(fields)];
	struct random_stream random;

	(void)why;
	random_init(&random, seed, random_name("gauge-frames"));
	for (size_t i = 0; i < COUNT(fields); i++)
		value[i] = fields[i].start;
	while (symbols) {
		next_frame(frame, value, &random);
		TRY(emit(out, frame, FRAME_BYTES, &symbols));
	}
	return STATUS_OK;
}

const struct source source_gauge_frames = {
	.name = "gauge-frames",
	.summary = "packed 32-byte frames of counters and drifting sensors",
	.symbols = 4194304,
	.rate = frames_rate,
	.make = frames_make,
};

/*
 * records: 8 bytes; u32 counter up by one, u16 uniform below 1024, the flag,
 * the noise. Rate (0 + 10 + flag + noise) / 8 = 1.514511 bits a byte.
 */

static enum status records_rate(double *bits_per_symbol)
{
	*bits_per_symbol = (10 + flag_rate() + noise_entropy()) / RECORD_BYTES;
	return STATUS_OK;
}

static enum status records_make(uint64_t symbols, uint64_t seed,
				struct buffer *out, struct reason *why)
{
	uint8_t record[RECORD_BYTES] = {0};
	struct random_stream random;
	uint32_t counter = 0;

	(void)why;
	random_init(&random, seed, random_name("records"));
	while (symbols) {
		put_little(record, counter++, 4);
		put_little(record + 4, random_below(&random, 1024), 2);
		step_flag(&record[6], &random);
		record[7] = (uint8_t)draw_noise(&random);
		TRY(emit(out, record, RECORD_BYTES, &symbols));
	}
	return STATUS_OK;
}

const struct source source_records = {
	.name = "records",
	.summary = "packed 8-byte records: counter, uniform, flag, geometric",
	.symbols = 4000000,
	.rate = records_rate,
	.make = records_make,
};
