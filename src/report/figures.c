#include "report/figures.h"

#include <stdio.h>
#include <string.h>

static struct figure none(void)
{
	return (struct figure){"-"};
}

/* What is not finite is not shown: no row is allowed to hand one out. */
static bool is_finite(double value)
{
	return value - value == 0;
}

struct figure figure_bits(bool known, double bits)
{
	struct figure figure;

	if (!known || !is_finite(bits))
		return none();
	/* A header alone is hundreds of bits a symbol on a tiny file. */
	(void)snprintf(figure.text, sizeof(figure.text), "%.*f",
		       bits < 99.99995 ? 4
		       : bits < 9999.5 ? 1
				       : 0,
		       bits);
	return figure;
}

struct figure figure_signed(bool known, double bits)
{
	struct figure figure;

	if (!known || !is_finite(bits))
		return none();
	(void)snprintf(figure.text, sizeof(figure.text), "%+.4f", bits);
	return figure;
}

struct figure figure_interval(double low, double high)
{
	struct figure figure;

	if (!is_finite(low) || !is_finite(high))
		return none();
	(void)snprintf(figure.text, sizeof(figure.text), "[%.4f,%.4f]", low,
		       high);
	return figure;
}

struct figure figure_percent(bool known, double percent)
{
	struct figure figure;

	if (!known || !is_finite(percent))
		return none();
	if (percent >= 99999.95)
		return (struct figure){">99999"};
	(void)snprintf(figure.text, sizeof(figure.text), "%.1f", percent);
	return figure;
}

struct figure figure_count(uint64_t count)
{
	struct figure figure = {""};
	char digits[24];
	size_t length;
	size_t used = 0;

	(void)snprintf(digits, sizeof(digits), "%llu",
		       (unsigned long long)count);
	length = strlen(digits);
	for (size_t i = 0; i < length; i++) {
		if (i && (length - i) % 3 == 0)
			figure.text[used++] = ',';
		figure.text[used++] = digits[i];
	}
	return figure;
}

struct figure figure_memory(uint64_t bytes)
{
	static const char units[] = "KMGTPE";
	struct figure figure;
	double value = (double)bytes;
	size_t unit = 0;

	if (bytes == CELL_MEMORY_UNKNOWN)
		return none();
	if (bytes < 1024) {
		(void)snprintf(figure.text, sizeof(figure.text), "%u",
			       (unsigned)bytes);
		return figure;
	}
	value /= 1024;
	/* From 1023.5 on three digits would round to 1024 of the unit. */
	while (value >= 1023.5 && unit < sizeof(units) - 2) {
		value /= 1024;
		unit++;
	}
	(void)snprintf(figure.text, sizeof(figure.text),
		       value < 9.95 ? "%.1f%c" : "%.0f%c", value, units[unit]);
	return figure;
}

struct figure figure_layout(size_t page_bytes)
{
	static const size_t mega = 1024 * 1024;
	struct figure figure;

	if (page_bytes == 0)
		return (struct figure){"whole"};
	if (page_bytes % mega == 0)
		(void)snprintf(figure.text, sizeof(figure.text), "%zuM",
			       page_bytes / mega);
	else if (page_bytes % 1024 == 0)
		(void)snprintf(figure.text, sizeof(figure.text), "%zuK",
			       page_bytes / 1024);
	else
		(void)snprintf(figure.text, sizeof(figure.text), "%zu",
			       page_bytes);
	return figure;
}

struct figure figure_speed(double mb_per_s)
{
	struct figure figure;
	int decimals = mb_per_s < 9.995 ? 2 : mb_per_s < 99.95 ? 1 : 0;

	if (!is_finite(mb_per_s) || mb_per_s <= 0)
		return none();
	(void)snprintf(figure.text, sizeof(figure.text), "%.*f", decimals,
		       mb_per_s);
	return figure;
}
