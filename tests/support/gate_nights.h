/* Baselines with figures chosen by the test. */
#ifndef SUPPORT_GATE_NIGHTS_H
#define SUPPORT_GATE_NIGHTS_H

#include "verdict/gate.h"

/*
 * Survey 3 of the set marrow-bay: corpora frames (fixed, 80,000 bytes) and
 * feed (rolling), each with zlib 6, zlib 9 at layout 4096 and the yardstick
 * zstd 3; every figure known, and rules as by default with a gap limit of 40%.
 */
void gate_night_init(struct baseline *night);
/* The cell of frames or feed; fails the test where there is none. */
struct baseline_cell *gate_night_cell(struct baseline *night,
				      const char *corpus, const char *codec,
				      const char *level);
struct baseline_corpus *gate_night_corpus(struct baseline *night,
					  const char *name);
/* Judges; fails the test on any status. */
void gate_nights_judge(const struct baseline *pin, const struct baseline *night,
		       struct gate *gate);
/* The only check that is breached, of that rule; fails the test otherwise. */
struct gate_check *gate_only_breach(struct gate *gate, enum gate_rule rule);
/* Checks of a rule and outcome. */
size_t gate_checks(const struct gate *gate, enum gate_rule rule,
		   enum gate_outcome outcome);

#endif
