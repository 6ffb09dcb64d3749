/* Writes baselines: JSON with one line a cell, so that it diffs well. */
#ifndef REPORT_BASELINE_REPORT_H
#define REPORT_BASELINE_REPORT_H

#include "verdict/baseline.h"

#include <stdio.h>

/* As verdict/baseline.h reads it. STATUS_IO, STATUS_NO_MEMORY. */
MUST_USE enum status baseline_write(FILE *out, const struct baseline *baseline,
				    struct reason *why);

#endif
