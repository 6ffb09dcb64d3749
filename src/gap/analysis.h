/* What follows from a survey's facts: floor, brackets, gaps and intervals. */
#ifndef GAP_ANALYSIS_H
#define GAP_ANALYSIS_H

#include "base/status.h"
#include "ledger/survey.h"

#include <stdbool.h>
#include <stddef.h>

#define ANALYSIS_REASON_BYTES 200

/* An interval for data of this kind, or the reason why there is none. */
struct interval {
	bool known;
	double low, high;        /* bits per symbol */
	double standard_error;   /* likewise; 0 where not known */
	double effective_blocks; /* blocks / automatic block length, after the
				    AR(1) guard; also set on a refusal */
	unsigned block_length; /* of the circular block bootstrap, in blocks */
	char reason[ANALYSIS_REASON_BYTES]; /* "" where known */
};

/* One gram order. Bits per symbol unless said. */
struct order_row {
	unsigned order;
	double H;           /* plug-in block entropy, bits per gram */
	double h_plugin;    /* H_k - H_(k-1) */
	double h_corrected; /* Grassberger 2003 */
	double h_cwj;       /* Chao, Wang, Jost 2013 */
	bool has_crossfit;
	double h_crossfit;
	double coverage; /* Chao-Jost sample coverage of the k-grams, 0 to 1 */
	uint64_t distinct;
	bool trusted; /* order <= trusted order */
};

/* One row of table 1 as shown. */
struct estimate_row {
	const struct method_fact *fact; /* borrowed */
	bool known;        /* false: fact->outcome and fact->reason say why */
	const char *leans; /* borrowed: "above", "none", "unknown" */
	bool is_code;      /* bits a decoder could live on */
	double bits_per_symbol;
	unsigned order; /* at which, where the row has orders */
	struct interval interval;
};

struct floor_row {
	bool known;
	char held_by[3 * CELL_NAME_BYTES]; /* "mix", "xz 9e" */
	bool by_codec; /* no estimator came as low: one misses a structure */
	unsigned rows; /* code rows and cells it is the minimum of */
	double bits_per_symbol;
	struct interval interval;
};

struct bracket_row {
	bool known;      /* else reason */
	bool open_below; /* a code length is below the lower edge: refuted */
	bool not_calibrated; /* the series drifts */
	unsigned order;      /* k^ */
	double low, high;
	char upper_by[3 * CELL_NAME_BYTES];
	char reason[ANALYSIS_REASON_BYTES];
};

/*
 * What the shortest code row would tend to on endless data of this kind: the
 * spread of three published forms from two start points. Not a bound.
 */
struct extrapolation_row {
	bool known;
	char method[3 * CELL_NAME_BYTES];
	double last;      /* bits per symbol of the row here */
	double low, high; /* of the fits */
	double miss;      /* worst error at the last point when left out */
	unsigned fits;
	char reason[ANALYSIS_REASON_BYTES];
};

/*
 * achieved = floor + restart + family + effort + framing, signed. The floor's
 * own interval is that of struct floor_row; the other terms are differences of
 * two runs, each with the interval of the paired block series of those two.
 * A term between a run and itself is 0, exactly; framing is counted, so exact.
 */
struct gap_stack {
	bool known;
	double floor, restart, family, effort, framing;
	char best_level[CELL_NAME_BYTES]; /* of this codec at this layout */
	struct interval restart_interval, family_interval, effort_interval,
		framing_interval; /* of no meaning unless known */
	/* stored = achieved + storage: what whole units of storage add. */
	bool has_storage;
	double storage;
};

/*
 * What trained dictionaries did to a cell, against the same codec, level and
 * pages without one. Bits per symbol; what is won is positive.
 */
struct dictionary_row {
	bool has;   /* the cell has dictionaries */
	bool known; /* the cell without is there, too; else all is zero */
	double own; /* the dictionaries' own bytes, counted in the cell */
	double won; /* less with than without, own bytes counted */
	struct interval won_interval; /* of the paired difference */
	/* The bound: the reference that has seen the other half of the pages,
	 * page by page, and the same that starts from nothing. */
	bool warm_known;
	double warm, cold;
};

/* (largest - smallest) / median over rounds from which times are noise. */
#define TIMING_SPREAD_MOST 0.10

struct cell_row {
	const struct cell_fact *fact; /* borrowed */
	bool known;                   /* false: failed; fact->reason */
	double bits_per_symbol, payload_bits_per_symbol;
	struct interval interval;
	double gap;                   /* achieved - floor, bits per symbol */
	struct interval gap_interval; /* of the paired difference */
	bool has_percent;
	double gap_percent; /* 100 gap / floor; not below .001 bit of floor */
	double efficiency;  /* floor / achieved, 0 to 1 */
	double flush_cost;  /* flushed / headline - 1; 0 where not flushed */
	unsigned effective_order; /* least trusted order with h <= payload;
				     0: ">trusted order" */
	bool has_record;
	double bits_per_record;
	struct gap_stack stack;
	struct dictionary_row dictionary;
	double encode_mb_per_s, decode_mb_per_s; /* 0: not timed; MB = 1e6 bytes
						    of canonical input, CPU */
	double encode_wall_mb_per_s, decode_wall_mb_per_s; /* likewise, wall */
	bool timing_noisy; /* rounds spread over TIMING_SPREAD_MOST */
};

struct corpus_view {
	const struct corpus_fact *fact; /* borrowed */
	struct order_row *orders;       /* owned */
	size_t order_count;
	unsigned trusted_order;                  /* 0: none */
	char trust_limit[ANALYSIS_REASON_BYTES]; /* which test fails next */
	struct estimate_row *estimates;          /* owned, table order */
	size_t estimate_count;
	struct floor_row floor;
	struct bracket_row bracket;
	struct extrapolation_row extrapolation;
	struct cell_row *cells; /* owned, same order as fact->cells */
	size_t cell_count;
};

struct analysis {
	const struct survey *survey; /* borrowed; must outlive this */
	struct corpus_view *corpora; /* owned, same order as the survey's */
	size_t corpus_count;
};

/* What is asked of the intervals. */
struct analysis_rules {
	unsigned draws;    /* bootstrap draws, at least 1999 */
	double confidence; /* 0.95 */
};

/* By which everything is shown and judged: 1999 draws, 95%. */
extern const struct analysis_rules analysis_usual;

/*
 * Pure: the same survey and rules give the same analysis. A corpus or cell
 * that failed gets a row with known false. STATUS_NO_MEMORY.
 */
MUST_USE enum status analysis_init(struct analysis *analysis,
				   const struct survey *survey,
				   const struct analysis_rules *rules,
				   struct reason *why);
void analysis_release(struct analysis *analysis);

/* 1 when any cell, method or corpus failed or was not lossless, else 0. */
int analysis_failed(const struct analysis *analysis);

#endif
