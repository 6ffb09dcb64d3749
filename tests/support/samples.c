#include "support/samples.h"

#include "base/random.h"

#include <stdio.h>
#include <string.h>

const char *const sample_names[SAMPLE_KINDS] = {
	"prose", "cyrillic", "table",  "code",  "records", "image",
	"sound", "bases",    "random", "zeros", "repeats",
};

static const char *const words[] = {
	"the",  "gauge", "at",     "ebb",    "bridge", "reads",  "low",
	"tide", "over",  "Marrow", "Bay",    "and",    "a",      "silt",
	"flow", "of",    "water",  "rises",  "in",     "spring", "while",
	"duty", "crew",  "logs",   "salt",   "at",     "noon",   "with",
	"no",   "wind",  "from",   "estuary"};

/* Small numbers more often than large ones. */
static unsigned skewed(struct random_stream *random, unsigned limit)
{
	unsigned a = random_below(random, limit);

	return random_below(random, a + 1);
}

static void fill_prose(struct random_stream *random, uint8_t *bytes,
		       size_t count)
{
	size_t at = 0;

	while (at < count) {
		const char *word = words[skewed(random, 32)];
		char text[32];
		int length = snprintf(text, sizeof(text), "%s%s", word,
				      random_below(random, 12) ? " " : ".\n");

		for (int i = 0; i < length && at < count; i++)
			bytes[at++] = (uint8_t)text[i];
	}
}

static void fill_cyrillic(struct random_stream *random, uint8_t *bytes,
			  size_t count)
{
	size_t at = 0;

	while (at < count) {
		const char *word = words[skewed(random, 32)];

		for (; *word && at + 1 < count; word++) {
			bytes[at++] = 0xd0;
			bytes[at++] = (uint8_t)(0xb0 + (*word & 15));
		}
		if (at < count)
			bytes[at++] = ' ';
	}
}

static void fill_table(struct random_stream *random, uint8_t *bytes,
		       size_t count)
{
	unsigned minute = 0, level = 312;
	size_t at = 0;

	while (at < count) {
		char text[64];
		int length;

		minute += 1 + skewed(random, 3);
		level += random_below(random, 5) - 2;
		length = snprintf(text, sizeof(text), "%u,%s,%u.%02u,%s\n",
				  minute, words[skewed(random, 8)],
				  level / 100 % 100, level % 100,
				  random_below(random, 9) ? "ok" : "late");
		for (int i = 0; i < length && at < count; i++)
			bytes[at++] = (uint8_t)text[i];
	}
}

static void fill_code(struct random_stream *random, uint8_t *bytes,
		      size_t count)
{
	for (size_t at = 0; at < count; at++) {
		static const uint8_t operation[] = {0x91, 0xf9, 0x54, 0x94};

		bytes[at] = at % 4 == 3 ? operation[skewed(random, 4)]
					: (uint8_t)(skewed(random, 16) * 17);
	}
}

static void fill_records(struct random_stream *random, uint8_t *bytes,
			 size_t count)
{
	uint8_t record[12];
	uint32_t counter = 40000, walk = 30000, flag = 0;

	for (size_t at = 0; at < count; at++) {
		if (at % sizeof(record) == 0) {
			counter++;
			walk += random_below(random, 33) - 16;
			flag ^= random_below(random, 20) == 0;
			for (unsigned i = 0; i < 4; i++) {
				record[i] = (uint8_t)(counter >> (8 * i));
				record[4 + i] = (uint8_t)(walk >> (8 * i));
			}
			record[8] = (uint8_t)flag;
			record[9] = (uint8_t)(record[0] ^ record[4]);
			record[10] = record[11] = 0;
		}
		bytes[at] = record[at % sizeof(record)];
	}
}

static void fill_image(struct random_stream *random, uint8_t *bytes,
		       size_t count)
{
	for (size_t at = 0; at < count; at++) {
		unsigned left = at ? bytes[at - 1] : 100;
		unsigned up = at >= 64 ? bytes[at - 64] : left;

		bytes[at] = (uint8_t)((left + up) / 2 +
				      random_below(random, 7) - 3);
	}
}

static void fill_sound(struct random_stream *random, uint8_t *bytes,
		       size_t count)
{
	int level = 0, slope = 0;

	for (size_t at = 0; at < count; at++) {
		if (at % 2 == 0) {
			slope += (int)random_below(random, 201) - 100 -
				 level / 32;
			level += slope / 4;
		}
		bytes[at] = (uint8_t)((unsigned)level >> (8 * (at % 2)));
	}
}

static uint8_t complement(uint8_t base)
{
	static const char from[] = "ACGT", to[] = "TGCA";

	return (uint8_t)to[strchr(from, base) - from];
}

/* Random bases, a third of them copied from before, half of those reversed. */
static void fill_bases(struct random_stream *random, uint8_t *bytes,
		       size_t count)
{
	size_t at = 0;

	while (at < count) {
		size_t length = 60, from;
		unsigned how = random_below(random, 6);

		from = at > 200 ? random_below(random, (uint32_t)(at - 100))
				: 0;
		for (size_t i = 0; i < length && at < count; i++, at++) {
			if (how == 0 && at > 300)
				bytes[at] = bytes[from + i];
			else if (how == 1 && at > 300)
				bytes[at] =
					complement(bytes[from + length - i]);
			else
				bytes[at] = (uint8_t) "ACGT"[random_below(
					random, 4)];
		}
	}
}

static void fill_random(struct random_stream *random, uint8_t *bytes,
			size_t count)
{
	for (size_t at = 0; at < count; at++)
		bytes[at] = (uint8_t)random_u32(random);
}

static void fill_repeats(struct random_stream *random, uint8_t *bytes,
			 size_t count)
{
	fill_prose(random, bytes, count);
	for (size_t at = 2000; at + 700 < count; at += 900)
		memmove(bytes + at,
			bytes + random_below(random, (uint32_t)(at - 700)),
			650);
}

void sample_fill(enum sample_kind kind, uint64_t seed, uint8_t *bytes,
		 size_t count)
{
	static void (*const fill[SAMPLE_KINDS])(struct random_stream *,
						uint8_t *, size_t) = {
		fill_prose,   fill_cyrillic, fill_table,  fill_code,
		fill_records, fill_image,    fill_sound,  fill_bases,
		fill_random,  NULL,          fill_repeats};
	struct random_stream random;

	random_init(&random, seed, (uint64_t)kind);
	memset(bytes, 0, count);
	if (fill[kind])
		fill[kind](&random, bytes, count);
}
