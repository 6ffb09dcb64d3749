#include "report/formats.h"

#include <string.h>

const struct report_format *const report_formats[] = {
	&report_table, &report_text, &report_markdown,
	&report_csv,   &report_json, NULL,
};

const struct report_format *report_find(const char *name)
{
	for (size_t i = 0; report_formats[i]; i++) {
		if (strcmp(report_formats[i]->name, name) == 0)
			return report_formats[i];
	}
	return NULL;
}
