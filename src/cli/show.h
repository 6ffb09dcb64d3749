/* From a ledger to a report: what survey and report share. */
#ifndef CLI_SHOW_H
#define CLI_SHOW_H

#include "cli/command.h"
#include "ledger/ledger.h"
#include "report/report.h"

/*
 * Reads a survey (0: the newest), analyses it and writes the report to path
 * (NULL: standard output). A file is written beside its name first and then
 * moved, so that nothing is half-written. *failed says whether the survey holds
 * a failure. Statuses: those of ledger_read and analysis_init; STATUS_IO.
 */
MUST_USE enum status show_survey(struct ledger *ledger, int64_t id,
				 const struct report_format *format,
				 const char *path, int *failed,
				 struct reason *why);

/* --as: the format named, or usual; STATUS_BAD_USAGE lists them. */
MUST_USE enum status show_format(const struct words *words, const char *usual,
				 const struct report_format **format,
				 struct reason *why);

#endif
