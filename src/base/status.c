#include "base/status.h"

#include <stdio.h>
#include <string.h>

static const char *const words[STATUS_COUNT] = {
	[STATUS_OK] = "done",
	[STATUS_NO_MEMORY] = "out of memory",
	[STATUS_TOO_SHORT] = "too few symbols",
	[STATUS_BAD_INPUT] = "bad input",
	[STATUS_BAD_USAGE] = "wrong usage",
	[STATUS_NOT_FOUND] = "not found",
	[STATUS_IO] = "input or output error",
	[STATUS_MISMATCH] = "mismatch",
	[STATUS_CODEC] = "codec error",
	[STATUS_LEDGER] = "ledger error",
	[STATUS_CANCELLED] = "stopped",
};

const char *status_words(enum status status)
{
	if ((unsigned)status >= STATUS_COUNT)
		return "unknown status";
	return words[status];
}

enum status reason_give(struct reason *why, enum status status,
			const char *format, ...)
{
	va_list arguments;

	if (!why)
		return status;
	va_start(arguments, format);
	(void)vsnprintf(why->text, sizeof(why->text), format, arguments);
	va_end(arguments);
	return status;
}

void reason_prefix(struct reason *why, const char *format, ...)
{
	char joined[REASON_BYTES];
	va_list arguments;
	int length;

	if (!why)
		return;
	va_start(arguments, format);
	length = vsnprintf(joined, sizeof(joined), format, arguments);
	va_end(arguments);
	if (length < 0 || (size_t)length >= sizeof(joined))
		return;
	(void)snprintf(joined + length, sizeof(joined) - (size_t)length, "%s",
		       why->text);
	memcpy(why->text, joined, sizeof(joined));
}
