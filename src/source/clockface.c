#include "source/clockface.h"

#include <stdbool.h>
#include <string.h>

void digits_write(uint64_t value, unsigned digits, char *text)
{
	while (digits--) {
		text[digits] = (char)('0' + value % 10);
		value /= 10;
	}
}

static bool leap(unsigned year)
{
	return year % 4 == 0 && (year % 100 != 0 || year % 400 == 0);
}

static unsigned month_days(unsigned month, unsigned year)
{
	static const unsigned days[12] = {31, 28, 31, 30, 31, 30,
					  31, 31, 30, 31, 30, 31};

	return days[month] + (month == 1 && leap(year));
}

void clockface_write(uint64_t seconds, char text[CLOCKFACE_BYTES])
{
	uint64_t day = seconds / 86400;
	unsigned second = (unsigned)(seconds % 86400);
	/* 400 years are 146097 days. */
	unsigned year = 2000 + 400 * (unsigned)(day / 146097);
	unsigned month = 0;

	day %= 146097;
	for (; day >= (leap(year) ? 366U : 365U); year++)
		day -= leap(year) ? 366 : 365;
	for (; day >= month_days(month, year); month++)
		day -= month_days(month, year);
	memcpy(text, "....-..-..T..:..:..Z", CLOCKFACE_BYTES);
	digits_write(year, 4, text);
	digits_write(month + 1, 2, text + 5);
	digits_write(day + 1, 2, text + 8);
	digits_write(second / 3600, 2, text + 11);
	digits_write(second / 60 % 60, 2, text + 14);
	digits_write(second % 60, 2, text + 17);
}
