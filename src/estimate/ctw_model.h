/* Symbols coded as binary decisions by weighted context trees. */
#ifndef ESTIMATE_CTW_MODEL_H
#define ESTIMATE_CTW_MODEL_H

#include "estimate/ctw_tree.h"
#include "estimate/quick_log2.h"

#define CTW_DECISIONS_MAX 8

/*
 * A symbol below A is written with as many bits as A - 1 needs, the highest
 * first; each prefix of it has a tree of its own, whose contexts are the
 * symbols before: Tjalkens, Volf, Willems 1997. A bit that A leaves no choice
 * for is not coded.
 */
struct ctw_model {
	struct ctw_tree tree;
	struct quick_log2 *logs; /* owned */
	unsigned alphabet;       /* A, 1 to 256 */
	unsigned decisions;      /* a symbol */
	/* Names of the nodes of two symbols: one in hand, and the next. */
	uint64_t names[2][CTW_DECISIONS_MAX][CTW_NODES_MAX];
};

/* depth in symbols; slots_max as in ctw_tree_init. STATUS_NO_MEMORY. */
MUST_USE enum status ctw_model_init(struct ctw_model *model, unsigned alphabet,
				    unsigned depth, size_t slots_max);
void ctw_model_release(struct ctw_model *model);

/*
 * Bits of the symbols first … last - 1 in Q32, learning them. Contexts reach
 * back to symbols[known], known <= first; before it all symbols count as 0.
 * Of no use once tree.exhausted.
 */
wide_int ctw_model_measure_q32(struct ctw_model *model, const uint8_t *symbols,
			       size_t known, size_t first, size_t last);

#endif
