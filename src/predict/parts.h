/* The inside of a predictor, shared by the files that make it run. */
#ifndef PREDICT_PARTS_H
#define PREDICT_PARTS_H

#include "predict/cells.h"
#include "predict/past.h"
#include "predict/predictor.h"

/* Inputs of the mixer: two a context, then the common ones. */
#define INPUTS_NIGHTLY 32
#define INPUTS_DEEP 64
#define INPUTS_MAX INPUTS_DEEP
#define COMMON 6 /* order 0, order 1, match (2), second match, constant */

/* Weight sets of a mixer: as many as select them (past.h). */
#define SETS_NIGHTLY 3
#define SETS_DEEP 5
#define SETS_MAX SETS_DEEP

/*
 * Final stages: interpolated tables over the logistic domain, a row a cache
 * line; 25 of its 32 entries are used.
 */
#define STAGE_STEP 256
#define STAGE_USED 25
#define STAGE_ROOM 32
#define STAGE_ROWS 4096

/* Bytes between which the passes of predictor_measure_q32 alternate. */
#define CHUNK 16

/* One decision's way through the mixer, from prediction to update. */
struct mixing {
	const int16_t *inputs;
	int16_t *weights[SETS_MAX];
	int32_t *final;
	int32_t dot[SETS_MAX];
	int32_t x; /* of the final mixer */
	unsigned p[SETS_MAX], p_final;
	uint16_t *stage[2]; /* lower of the two entries used */
	unsigned nearer[2]; /* which of them is nearer */
};

/* What selects weights and stages for a decision. */
struct selection {
	unsigned partial;  /* bits of the byte so far after a leading 1 */
	unsigned bit;      /* 0..7 */
	unsigned step;     /* of the first match while it holds, else 0 */
	unsigned expected; /* its bit */
	const struct view *view;
};

/* By so much larger are the steps of the weights at first. */
#define RATE_MORE 120

/* The mixer's weights and final stages. */
struct mixer {
	struct predict_tables tables;
	unsigned inputs, sets;
	int16_t *weights; /* owned; sets x SET_ROWS x inputs */
	int32_t final[SET_ROWS][SETS_MAX];
	_Alignas(64) uint16_t stage[2][STAGE_ROWS * STAGE_ROOM];
	uint32_t seen; /* decisions, up to the end of fast learning */
	/*
	 * Steps of the weights, in 2^-10 of error times input: now, and in the
	 * end.
	 */
	int32_t rate, rate_last;
};

/* Decisions whose product of probabilities has yet to be turned into bits. */
struct tally {
	uint64_t mantissa; /* in 2^63..2^64 - 1 */
	uint64_t halvings;
};

/* What a mixer of a strength has, and where its steps end. */
static inline void mixer_shape(struct mixer *mixer, bool deep,
			       int32_t rate_last)
{
	mixer->inputs = deep ? INPUTS_DEEP : INPUTS_NIGHTLY;
	mixer->sets = deep ? SETS_DEEP : SETS_NIGHTLY;
	mixer->rate_last = rate_last;
}

/*
 * Fresh weights and final stages: every input of even and odd number starts
 * with this weight, in 2^-14, and every set has the same say.
 */
void mixer_restart(struct mixer *mixer, int16_t even, int16_t odd);

/* The mixer in one instruction set. */
struct lanes {
	/* Fills mixing, returns the probability of a one. */
	unsigned (*predict)(struct mixer *mixer, const struct selection *at,
			    struct mixing *mixing);
	void (*update)(struct mixer *mixer, struct mixing *mixing,
		       unsigned bit);
	/* Both, over the eight bits of a byte; inputs are consecutive. */
	void (*byte)(struct mixer *mixer, const struct view *view,
		     unsigned byte, bool lane_failed, const int16_t *inputs,
		     struct tally *tally);
};

extern const struct lanes lanes_plain;
/* NULL where the processor has nothing better than plain. */
const struct lanes *lanes_fast(void);

/* The lane's decision: probabilities by length, and by two hashed contexts. */
#define LANE_CELLS 3
#define LANE_ROWS 16384

struct lane {
	int32_t weight[LANE_CELLS];
	int32_t x[LANE_CELLS];
	unsigned p16;
};

/* Where a context stands within the byte being coded. */
struct place {
	uint8_t *line, *slot;
	uint8_t tag;
};

struct predictor {
	struct predict_plan plan;
	struct bases *bases; /* owned; instead of all else for that family */
	struct mixer mixer;
	const struct lanes *lanes;
	struct past past;
	unsigned contexts;
	uint8_t *lines_block; /* owned; holds lines */
	uint8_t *lines;       /* contexts x lines_each, aligned */
	bool fresh;           /* lines are zero as they came */
	unsigned lines_log2;
	uint32_t trend[CONTEXTS_MAX][256]; /* by bit history */
	uint32_t order0[256];              /* cells */
	uint16_t *order1;                  /* owned; 65536 */
	uint32_t match_cell[2][MATCH_STEPS];
	uint32_t lane_cell[MATCH_STEPS][256];
	uint32_t lane_row[LANE_CELLS - 1][LANE_ROWS];
	struct lane lane;
	/* between decisions */
	struct view view;
	struct place place[CONTEXTS_MAX];
	struct mixing mixing;
	bool begun;   /* view and place are those of the byte being coded */
	bool pending; /* a byte is complete but not yet pushed */
	bool lane_failed, in_lane;
	unsigned partial, bit;
	_Alignas(64) int16_t inputs[INPUTS_MAX];
	/* passes */
	struct tally tally, lane_tally;
	unsigned threads;
	struct journal *journal; /* owned; NULL: nothing to go back to */
	struct view *views;      /* owned; 2 x CHUNK */
	int16_t *chunk_inputs;   /* owned; CHUNK x 8 x inputs */
};

static inline void tally_add(struct tally *tally, unsigned p16)
{
	uint64_t product = (tally->mantissa >> 16) * p16;
	unsigned zeros = (unsigned)__builtin_clzll(product);

	tally->mantissa = product << zeros;
	tally->halvings += zeros;
}

/* Bits so far in Q32. */
int64_t tally_q32(const struct tally *tally);

#endif
