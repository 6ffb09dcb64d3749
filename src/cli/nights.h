/* From a ledger's surveys to the figures that gates and trends compare. */
#ifndef CLI_NIGHTS_H
#define CLI_NIGHTS_H

#include "cli/beside.h"
#include "cli/command.h"
#include "corpus/set_file.h"
#include "ledger/ledger.h"
#include "run/work_plan.h"
#include "verdict/gate.h"

/* One survey's figures, and where its set file lay. */
struct night {
	struct baseline figures;
	char set_path[LEDGER_PATH_BYTES];
	bool finished;
};

/* id 0: the newest. Statuses of ledger_read and analysis_init. */
MUST_USE enum status night_read(struct ledger *ledger, int64_t id,
				struct night *night, struct reason *why);
void night_release(struct night *night);

/* The set, opened to measure some of its cells again. */
struct remeasure {
	struct set set;
	struct plan plan;
	bool quiet;
	char codec_host[BESIDE_BYTES]; /* "": the set's codecs do not run */
};

/*
 * path: of the set file; own_codecs: those that it declares may run. Statuses
 * of set_load, beside_host and plan_init.
 */
MUST_USE enum status remeasure_init(struct remeasure *again, const char *path,
				    bool outside, bool own_codecs,
				    struct reason *why);
void remeasure_release(struct remeasure *again);

/* Replaces the times and memory of every cell by careful ones. */
MUST_USE enum status remeasure_pin(const struct remeasure *again,
				   struct baseline *baseline,
				   struct reason *why);
/*
 * Settles every suspected check; one that cannot be measured again stays as it
 * is, and the reason is told on stderr.
 */
void remeasure_suspects(const struct remeasure *again, struct gate *gate);

#endif
