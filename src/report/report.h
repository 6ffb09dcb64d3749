/* Table 3: report formats, one row each. */
#ifndef REPORT_REPORT_H
#define REPORT_REPORT_H

#include "base/status.h"
#include "gap/analysis.h"

#include <stdio.h>

struct report_format {
	const char *name;    /* "text", "markdown", "csv", "json" */
	const char *summary; /* one line for people */
	/*
	 * Writes the whole report. STATUS_IO: the stream refused bytes (checked
	 * with ferror after a flush); STATUS_NO_MEMORY.
	 */
	enum status (*write)(FILE *out, const struct analysis *analysis,
			     struct reason *why);
};

/* All formats, ended by NULL. */
extern const struct report_format *const report_formats[];
const struct report_format *report_find(const char *name);

#endif
