/* Reports of a calibration: what the statistics are worth. */
#ifndef REPORT_CALIBRATION_REPORT_H
#define REPORT_CALIBRATION_REPORT_H

#include "verdict/calibration.h"

#include <stdio.h>

/* What is reported; all borrowed. */
struct calibration_report {
	const char *program; /* "ratefloor 0.1.0" */
	uint64_t seed;
	unsigned orders;
	const struct calibration_case *cases; /* cases of one length adjoin */
	size_t case_count;
};

struct calibration_format {
	const char *name; /* "text", "markdown", "json" */
	/* STATUS_IO: the stream refused bytes; STATUS_NO_MEMORY. */
	enum status (*write)(FILE *out, const struct calibration_report *report,
			     struct reason *why);
};

/* All formats, ended by NULL. */
extern const struct calibration_format *const calibration_formats[];
const struct calibration_format *calibration_format_find(const char *name);

/* Cases from the first that share its length: their number. */
size_t calibration_run_of(const struct calibration_case *cases, size_t count);

extern const struct calibration_format calibration_text;
extern const struct calibration_format calibration_markdown;
extern const struct calibration_format calibration_json;

#endif
