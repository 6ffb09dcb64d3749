#include "report/calibration_report.h"

#include <string.h>

const struct calibration_format *const calibration_formats[] = {
	&calibration_text,
	&calibration_markdown,
	&calibration_json,
	NULL,
};

const struct calibration_format *calibration_format_find(const char *name)
{
	for (size_t i = 0; calibration_formats[i]; i++) {
		if (strcmp(calibration_formats[i]->name, name) == 0)
			return calibration_formats[i];
	}
	return NULL;
}

size_t calibration_run_of(const struct calibration_case *cases, size_t count)
{
	size_t same = 1;

	while (same < count &&
	       cases[same].subject.symbols == cases[0].subject.symbols)
		same++;
	return count ? same : 0;
}
