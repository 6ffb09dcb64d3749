/* The family for nucleotides: bare A, C, G, T, one letter a byte. */
#ifndef PREDICT_BASES_H
#define PREDICT_BASES_H

#include "predict/plan.h"

/*
 * A base is two decisions. Contexts are the last 1 to 20 bases; those of 9 and
 * more learn from both strands: what was read also tells what follows on the
 * reverse complement. Two matches follow the longest repeat of either strand.
 * (Inverted repeats in sequence coding: Grumbach and Tahi 1993.) The calls are
 * those of predict/predictor.h.
 */
struct bases;

MUST_USE enum status bases_new(const struct predict_plan *plan,
			       struct bases **bases);
void bases_free(struct bases *bases);
void bases_restart(struct bases *bases, const uint8_t *bytes);
unsigned bases_probability(struct bases *bases);
unsigned bases_decision(const struct bases *bases, uint8_t byte);
bool bases_update(struct bases *bases, unsigned decision, uint8_t *byte);
int64_t bases_measure_q32(struct bases *bases, size_t count);
void bases_set_plain(struct bases *bases, bool plain);

#endif
