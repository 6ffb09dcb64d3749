/* Sources with parameters: chains, hidden chains, constraints, regimes. */
#ifndef SOURCE_MODEL_H
#define SOURCE_MODEL_H

#include "source/source.h"

#define MODEL_REGIMES_MAX 3
#define MODEL_NEVER UINT32_MAX

/* One way on from a row: weight = cumulative less that of the edge before. */
struct model_edge {
	uint32_t cumulative;
	uint32_t next; /* context after the symbol */
	uint8_t symbol;
};

struct model_row {
	uint32_t first, count; /* its edges; the last one holds their total */
};

/*
 * A stationary source over bytes 0 .. alphabet - 1 (trained ones: any byte).
 * It is in a hidden regime r and a context c that the symbols so far settle.
 * It emits a symbol by the whole-number weights of row (r, c), which leads to
 * the next context, and then moves to a regime by the weights of moves. One
 * regime: a Markov chain. One context: a hidden Markov source. All private;
 * start with one of the inits, end with source_model_release.
 */
struct source_model {
	uint32_t regimes, contexts, alphabet;
	struct model_row *rows;   /* owned; regimes x contexts */
	struct model_edge *edges; /* owned */
	size_t edge_count, edge_room;
	uint32_t *moves;             /* owned; regimes x regimes, cumulative */
	double *stationary;          /* owned; of the rows, sums to 1 */
	uint32_t *begin;             /* owned; the same, cumulative in 2^-32 */
	uint32_t begin_last;         /* last row with a chance to begin */
	const struct source *packed; /* borrowed; or NULL: the above */
};

/* The entropy rate and a bound on its error (from roundings apart). */
struct known_rate {
	double bits_per_symbol, error;
};

/*
 * All inits: every probability is weight / sum of its row's weights; a row's
 * sum is 1 to 2^32 - 1. They hand an owned model out through *model, or leave
 * it released. STATUS_BAD_INPUT with a reason: an empty or too large row, an
 * alphabet over 256, more than one closed class of states.
 */

/* Independent symbols. */
MUST_USE enum status source_model_init_iid(struct source_model *model,
					   uint32_t alphabet,
					   const uint32_t *weights,
					   struct reason *why);
/*
 * Markov chain of any order: weights of symbol x after the symbols a .. b
 * (oldest first, read as digits) at [((a * alphabet + .. b)) * alphabet + x].
 */
MUST_USE enum status source_model_init_markov(struct source_model *model,
					      uint32_t alphabet, unsigned order,
					      const uint32_t *weights,
					      struct reason *why);
/* Hidden Markov: emits by emits[state][symbol], then moves[state][state]. */
MUST_USE enum status
source_model_init_hidden(struct source_model *model, uint32_t states,
			 uint32_t alphabet, const uint32_t *moves,
			 const uint32_t *emits, struct reason *why);
/* Chains of order 1, weights[regime][before][symbol], that take turns. */
MUST_USE enum status
source_model_init_switching(struct source_model *model, uint32_t regimes,
			    uint32_t alphabet, const uint32_t *moves,
			    const uint32_t *weights, struct reason *why);
/*
 * The source of largest entropy on the paths of a graph (Parry 1964; Shannon
 * 1948): next[state * alphabet + symbol] is a state or MODEL_NEVER. The
 * probabilities are rounded to 2^-31, which the rate takes into account; being
 * largest, it changes by less than 1e-15.
 */
MUST_USE enum status source_model_init_graph(struct source_model *model,
					     uint32_t states, uint32_t alphabet,
					     const uint32_t *next,
					     struct reason *why);
/*
 * Bits with d to k zeros between ones, at largest entropy; k MODEL_NEVER: no
 * upper limit. (1, no limit) is the golden mean shift. d < k, d <= 62.
 */
MUST_USE enum status source_model_init_runs(struct source_model *model,
					    uint32_t d, uint32_t k,
					    struct reason *why);
/*
 * The order-2 chain whose transition counts are those of the bytes read
 * cyclically. STATUS_TOO_SHORT under 3 bytes.
 */
MUST_USE enum status source_model_init_trained(struct source_model *model,
					       const uint8_t *bytes,
					       size_t length,
					       struct reason *why);
/* A row of the source table (packed records and so on); cannot fail. */
void source_model_init_packed(struct source_model *model,
			      const struct source *source);

/* Accepts a released or zeroed model. */
void source_model_release(struct source_model *model);

/*
 * The entropy rate of what source_model_make draws.
 * One regime: sum over contexts of pi H(row), pi by elimination without
 * subtraction (Grassmann, Taksar, Heyman 1985).
 * Hidden: the bounds of Cover and Thomas 2006, theorem 4.5.1, where they meet
 * to 1e-10 by n = 22; else the transfer operator of the belief (Blackwell
 * 1957) by collocation, refined until two grids agree to 1e-8.
 * STATUS_NO_MEMORY; STATUS_BAD_INPUT: too large, or no grid
 * reached 1e-7.
 */
MUST_USE enum status source_model_rate(const struct source_model *model,
				       struct known_rate *rate,
				       struct reason *why);
/*
 * H(Y_n | Y_1 .. Y_n-1, X_1) and H(Y_n | Y_1 .. Y_n-1): the lower and upper
 * bound of Cover and Thomas 2006, theorem 4.5.1; one context, n >= 1, and
 * alphabet^n <= 2^24. STATUS_BAD_USAGE otherwise.
 */
MUST_USE enum status source_model_bounds(const struct source_model *model,
					 unsigned n, double *lower,
					 double *upper, struct reason *why);

/*
 * Draws `symbols` bytes, from the stationary law on: the same ones on every
 * machine for one model and seed.
 */
void source_model_make(const struct source_model *model, size_t symbols,
		       uint64_t seed, uint8_t *bytes);

#endif
