/*
 * Numbers in lines of text: where a field held numbers in the two lines before,
 * what it holds if they go on by equal steps.
 */
#include "predict/contexts.h"

#include <string.h>

#define DIGITS_MAX 18

/* A field's text: digits as one number, and how they stand. */
struct number {
	const uint8_t *text;
	unsigned length, digits;
	int64_t value;
};

/* The field of a line before; false where it holds no number. */
static bool number_read(const struct past *past, unsigned line, unsigned field,
			struct number *number)
{
	size_t from, to;

	if (field > past->fields[line] || past->field_start[line - 1][0] == 0)
		return false;
	from = past->field_start[line][field];
	to = field < past->fields[line] ? past->field_start[line][field + 1]
					: past->field_start[line - 1][0];
	/* The last byte is the mark at the end. */
	if (to <= from + 1 || to - from > FORECAST_MAX)
		return false;
	*number = (struct number){.text = past->bytes + from,
				  .length = (unsigned)(to - from)};
	for (unsigned i = 0; i < number->length; i++) {
		unsigned c = number->text[i];

		if (c < '0' || c > '9')
			continue;
		if (++number->digits > DIGITS_MAX)
			return false;
		number->value = number->value * 10 + (c - '0');
	}
	return number->digits != 0;
}

/* Writes value in the way that the number above stands. */
static void forecast_write(struct forecast *forecast, struct number number,
			   int64_t value)
{
	if (value < 0)
		return;
	forecast->length = number.length;
	memcpy(forecast->text, number.text, number.length);
	for (unsigned i = number.length; i-- > 0 && (value || number.digits);) {
		unsigned c = number.text[i];
		bool digit = c >= '0' && c <= '9';

		/* A digit more goes where the line had a blank. */
		if (!digit && (c != ' ' || number.digits))
			continue;
		forecast->text[i] = (uint8_t)('0' + value % 10);
		value /= 10;
		number.digits -= digit;
	}
}

void forecast_begin(struct past *past)
{
	struct forecast *forecast = past->forecast;
	unsigned field = past->fields[0];
	struct number one, two;

	for (unsigned i = 0; i < FORECASTS; i++) {
		forecast[i].length = 0;
		forecast[i].holds = true;
	}
	if (!number_read(past, 1, field, &one))
		return;
	if (number_read(past, 2, field, &two) && one.length == two.length)
		forecast_write(&forecast[0], one, 2 * one.value - two.value);
	if (number_read(past, 1, field + 1, &two))
		forecast_write(&forecast[1], one, one.value + two.value);
}

void forecast_push(struct past *past, unsigned c)
{
	size_t offset = past->at - 1 - past->field_start[0][past->fields[0]];

	for (unsigned i = 0; i < FORECASTS; i++) {
		struct forecast *forecast = &past->forecast[i];

		if (offset < forecast->length && forecast->text[offset] != c)
			forecast->holds = false;
	}
}

unsigned forecast_byte(const struct past *past, unsigned i)
{
	const struct forecast *forecast = &past->forecast[i];
	size_t offset = past->at - past->field_start[0][past->fields[0]];

	if (offset >= forecast->length)
		return 512;
	return forecast->text[offset] * 2U + forecast->holds;
}
