/* How the inits put a model together. */
#ifndef SOURCE_MODEL_BUILD_H
#define SOURCE_MODEL_BUILD_H

#include "source/model.h"

/* Shape and memory; on failure the model is released. */
MUST_USE enum status model_begin(struct source_model *model, uint32_t regimes,
				 uint32_t contexts, uint32_t alphabet,
				 size_t edges, struct reason *why);
/* Rows are opened in order of their index; edges go to the open row. */
void model_row_open(struct source_model *model, uint32_t row);
/* Weight 0 adds nothing. STATUS_BAD_INPUT: the row's sum passes 2^32 - 1. */
MUST_USE enum status model_edge_add(struct source_model *model, uint32_t row,
				    uint8_t symbol, uint32_t weight,
				    uint32_t next);
/* Weights of one regime's moves; regimes x regimes values. */
MUST_USE enum status model_moves(struct source_model *model,
				 const uint32_t *weights);
/*
 * Checks the rows and finds the stationary law. So that an init is one chain
 * of TRYs inside, it also takes the status so far and releases the model
 * unless all is well.
 */
MUST_USE enum status model_close(struct source_model *model, enum status so_far,
				 struct reason *why);

/* Weight total of a row; the row has an edge. */
uint32_t model_total(const struct source_model *model, uint32_t row);
uint32_t model_weight(const struct source_model *model, uint32_t edge,
		      const struct model_row *row);
/* P(regime to | regime from). */
double model_move(const struct source_model *model, uint32_t from, uint32_t to);

#endif
