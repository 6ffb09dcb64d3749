/* Marrow Bay's duty log: lines as people write them. */
#include "source/source_rows.h"

#include "base/random.h"
#include "source/duty_words.h"
#include "source/weights.h"

#include <stdio.h>
#include <string.h>

#define COUNT(array) (sizeof(array) / sizeof(*(array)))
#define LINE_BYTES 320
#define WORDS_MAX 48
#define LISTS 6
#define ZIPF_SCALE 5040

/*
 * A line is the time of day and a sentence. The minutes since the line before
 * are drawn from 1 to 60 by weight and told by the two times. A sentence is one
 * of the forms below with a word of its list, Zipf-like in the order of the
 * list, for every letter after a %. No list's word holds a space but the
 * remarks, which end the line; each form has its own fixed words in places that
 * lists never fill, so a line is read in one way only. Lines are independent,
 * so the rate is the entropy of a line over its mean length.
 */
static const char *const forms[] = {
	"%p %a the %g at %l; %r.",
	"%p %a the %g, %r.",
	"The %g at %l was %a by %p: %r.",
	"Found the %g at %l fouled, %p %a it; %r.",
	"%w at %l since the last entry, %r.",
	"%p and %p %a the %g together; %r.",
	"%w over %l. %p kept the watch, %r.",
	"No change at %l, %r.",
	"%p relieved %p, %r.",
	"Boat to %l with %p, %g aboard; %r.",
};
static const uint32_t form_weights[] = {30, 18, 14, 9, 8, 7, 5, 4, 3, 2};
static const uint32_t minute_weights[] = {6, 12, 10, 8, 6, 5, 4, 3, 3, 2,
					  2, 2,  1,  1, 1, 1, 1, 1, 1, 1};

static const struct list {
	char letter;
	const char *const *word;
	size_t count;
} lists[LISTS] = {
	{'p', duty_people, COUNT(duty_people)},
	{'a', duty_acts, COUNT(duty_acts)},
	{'g', duty_gear, COUNT(duty_gear)},
	{'l', duty_places, COUNT(duty_places)},
	{'w', duty_weather, COUNT(duty_weather)},
	{'r', duty_remarks, COUNT(duty_remarks)},
};

static const struct weights form_draw = {form_weights, COUNT(form_weights)};
static const struct weights minute_draw = {minute_weights,
					   COUNT(minute_weights)};

static const struct list *list_of(char letter)
{
	size_t i = 0;

	while (lists[i].letter != letter)
		i++;
	return &lists[i];
}

struct duty {
	struct random_stream random;
	uint32_t zipf[WORDS_MAX];
	unsigned minute;
};

static const char *draw_word(struct duty *duty, const struct list *list)
{
	const struct weights weights = {duty->zipf, list->count};

	return list->word[weights_draw(&weights, &duty->random)];
}

static size_t duty_line(struct duty *duty, char line[LINE_BYTES])
{
	const char *form;
	size_t length;

	duty->minute += 1 + (unsigned)weights_draw(&minute_draw, &duty->random);
	duty->minute %= 24 * 60;
	length = (size_t)snprintf(line, LINE_BYTES, "%02u:%02u ",
				  duty->minute / 60, duty->minute % 60);
	form = forms[weights_draw(&form_draw, &duty->random)];
	for (; *form; form++) {
		const char *text = form;
		size_t bytes = 1;

		if (*form == '%') {
			text = draw_word(duty, list_of(*++form));
			bytes = strlen(text);
		}
		memcpy(line + length, text, bytes);
		length += bytes;
	}
	line[length++] = '\n';
	return length;
}

/* Entropy and mean length of one word of a list. */
static void word_figures(const uint32_t *zipf, const struct list *list,
			 double *bits, double *bytes)
{
	const struct weights weights = {zipf, list->count};
	double length[WORDS_MAX];

	for (size_t i = 0; i < list->count; i++)
		length[i] = (double)strlen(list->word[i]);
	*bits += weights_entropy(&weights);
	*bytes += weights_mean(&weights, length);
}

static enum status duty_rate(double *bits_per_symbol)
{
	uint32_t zipf[WORDS_MAX];
	double bits[COUNT(forms)], bytes[COUNT(forms)];

	weights_zipf(zipf, WORDS_MAX, ZIPF_SCALE);
	for (size_t i = 0; i < COUNT(forms); i++) {
		bits[i] = 0;
		bytes[i] = 7; /* "00:00 " and the line's end */
		for (const char *c = forms[i]; *c; c++) {
			if (*c != '%')
				bytes[i]++;
			else
				word_figures(zipf, list_of(*++c), &bits[i],
					     &bytes[i]);
		}
	}
	*bits_per_symbol =
		(weights_entropy(&form_draw) + weights_entropy(&minute_draw) +
		 weights_mean(&form_draw, bits)) /
		weights_mean(&form_draw, bytes);
	return STATUS_OK;
}

static enum status duty_make(uint64_t symbols, uint64_t seed,
			     struct buffer *out, struct reason *why)
{
	struct duty duty = {.minute = 0};
	char line[LINE_BYTES];

	(void)why;
	random_init(&duty.random, seed, random_name("duty-log"));
	weights_zipf(duty.zipf, WORDS_MAX, ZIPF_SCALE);
	while (symbols) {
		size_t length = duty_line(&duty, line);

		TRY(emit(out, line, length, &symbols));
	}
	return STATUS_OK;
}

const struct source source_duty_log = {
	.name = "duty-log",
	.summary = "sentences of an invented duty log",
	.symbols = 1000000,
	.rate = duty_rate,
	.make = duty_make,
};
