/* The rows of table 3, each defined at the end of its own file. */
#ifndef REPORT_FORMATS_H
#define REPORT_FORMATS_H

#include "report/report.h"

extern const struct report_format report_table;
extern const struct report_format report_text;
extern const struct report_format report_markdown;
extern const struct report_format report_csv;
extern const struct report_format report_json;

#endif
