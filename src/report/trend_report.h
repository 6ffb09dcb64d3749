/* Writes what changed over the nights of a ledger. */
#ifndef REPORT_TREND_REPORT_H
#define REPORT_TREND_REPORT_H

#include "base/status.h"
#include "verdict/trend.h"

#include <stdio.h>

struct trend_format {
	const char *name; /* "text", "markdown", "csv", "json" */
	/* STATUS_IO, STATUS_NO_MEMORY. */
	enum status (*write)(FILE *out, const struct trend *trend,
			     struct reason *why);
};

/* All formats, ended by NULL. */
extern const struct trend_format *const trend_formats[];
const struct trend_format *trend_format_find(const char *name);

/* What one event says, in words. */
struct trend_words {
	char text[480];
};
struct trend_words trend_words(const struct trend *trend,
			       const struct trend_event *event);
const char *trend_kind_name(enum trend_kind kind); /* "worse", "shift" */

#endif
