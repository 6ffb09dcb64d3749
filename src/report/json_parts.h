/* The objects of the JSON report; NULL from any of them is "no memory". */
#ifndef REPORT_JSON_PARTS_H
#define REPORT_JSON_PARTS_H

#include "gap/analysis.h"

#include <jansson.h>

json_t *json_corpus(const struct corpus_view *view);
json_t *json_cell(const struct corpus_view *view, const struct cell_row *row);

#endif
