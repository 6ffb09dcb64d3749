/* The rules of a gate, one file a group; for this room only. */
#ifndef VERDICT_GATE_PARTS_H
#define VERDICT_GATE_PARTS_H

#include "verdict/gate.h"

/*
 * Adds a check, words printf-style; NULL where memory is out, which sticks in
 * gate->status. The pointer is good until the next one is added.
 */
struct gate_check *gate_add(struct gate *gate, enum gate_rule rule,
			    enum gate_outcome outcome, const char *corpus,
			    const struct cell_key *key);
void gate_say(struct gate_check *check, const char *format, ...)
	__attribute__((format(printf, 2, 3)));

/* STATUS_MISMATCH: not to be compared. */
MUST_USE enum status gate_refuse(const struct baseline *pin,
				 const struct baseline *tonight,
				 struct reason *why);
/* Each adds its checks; failures stick in gate->status. */
void gate_notes(struct gate *gate);
void gate_corpora(struct gate *gate);
void gate_cells(struct gate *gate);
void gate_ratios(struct gate *gate, const struct baseline_cell *pinned,
		 const struct baseline_cell *found);
MUST_USE enum status gate_kinds(struct gate *gate);

/* Whether cells of the corpus can be compared one by one tonight. */
bool gate_comparable(const struct gate *gate, const char *corpus);
/* "; zlib 1.2.13 at the pin, 1.3.1 tonight", or "; zlib 1.2.13 as pinned". */
struct version_words {
	char text[3 * LEDGER_NAME_BYTES];
};
struct version_words gate_versions(const struct gate *gate,
				   const char *library);

#endif
