/* report --trend: from all surveys of a ledger to what changed. */
#ifndef CLI_SHOW_TREND_H
#define CLI_SHOW_TREND_H

#include "cli/command.h"
#include "ledger/ledger.h"

/*
 * Reads every finished survey of the newest one's set and writes the trend to
 * path (NULL: standard output). STATUS_BAD_USAGE: no such format for trends;
 * otherwise as show_survey.
 */
MUST_USE enum status show_trend(struct ledger *ledger, const char *format,
				const char *path, struct reason *why);

#endif
