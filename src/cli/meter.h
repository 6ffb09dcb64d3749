/* Progress on a terminal: one line, rewritten; nothing elsewhere. */
#ifndef CLI_METER_H
#define CLI_METER_H

#include "run/survey_run.h"

#include <stdbool.h>

struct meter {
	bool on;      /* standard error is a terminal and talk is wanted */
	double shown; /* seconds at which the line was last written */
};

void meter_init(struct meter *meter, bool wanted);
/* A run_rules watcher; context is the meter. */
void meter_watch(void *meter, const struct run_progress *progress);
/* Wipes the line. */
void meter_clear(const struct meter *meter);

#endif
