/* The spelling of outcomes in ledgers and reports. */
#ifndef LEDGER_OUTCOME_H
#define LEDGER_OUTCOME_H

#include "ledger/survey.h"

/* "done", "failed", "declined" or "skipped". */
const char *outcome_name(enum outcome outcome);
/* false: no such word. */
bool outcome_parse(const char *name, enum outcome *outcome);

#endif
