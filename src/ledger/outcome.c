#include "ledger/outcome.h"

#include <string.h>

static const char *const names[] = {
	[OUTCOME_DONE] = "done",
	[OUTCOME_FAILED] = "failed",
	[OUTCOME_DECLINED] = "declined",
	[OUTCOME_SKIPPED] = "skipped",
};

const char *outcome_name(enum outcome outcome)
{
	return names[outcome];
}

bool outcome_parse(const char *name, enum outcome *outcome)
{
	for (unsigned i = 0; i < sizeof(names) / sizeof(names[0]); i++) {
		if (strcmp(name, names[i]) == 0) {
			*outcome = (enum outcome)i;
			return true;
		}
	}
	return false;
}
