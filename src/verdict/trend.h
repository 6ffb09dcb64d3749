/* Changes over all nights of a ledger, each with the night it began. */
#ifndef VERDICT_TREND_H
#define VERDICT_TREND_H

#include "verdict/baseline.h"

/* Reference value of the sum: half of a shift of one standard error. */
#define TREND_K 0.5
/* Nights between two false alarms, over all cells together. */
#define TREND_NIGHTS 1000

struct trend_night {
	int64_t survey;
	char started[LEDGER_NAME_BYTES];
	struct library_fact *libraries; /* owned */
	size_t library_count;
};

/* One cell on one night. */
struct trend_point {
	size_t night; /* index */
	uint64_t bytes;
	double bits_per_symbol;
	struct baseline_pair pair;              /* reason is empty */
	char identity[2 * BASELINE_NAME_BYTES]; /* of the bytes that were
						   compressed */
};

struct trend_series {
	char corpus[LEDGER_NAME_BYTES];
	struct cell_key key;
	bool rolling;
	struct trend_point *points; /* owned, oldest first */
	size_t count, room;
	/* Filled by trend_find, for rolling series. */
	double sum;    /* CUSUM after the last night */
	double spread; /* nights vary so many times as their intervals say;
			  1 unless that is beyond chance */
	size_t judged; /* nights that entered the sum */
};

enum trend_kind {
	TREND_WORSE,  /* fixed corpus: more bytes, exactly */
	TREND_BETTER, /* fewer */
	TREND_SHIFT,  /* rolling corpus: the sum passed its limit */
	TREND_CORPUS  /* other bytes or symbols: compared anew from here */
};

struct trend_event {
	enum trend_kind kind;
	size_t series;        /* index */
	size_t night;         /* the change began here */
	size_t seen;          /* and was seen here; the same for exact ones */
	double before, after; /* bytes; TREND_SHIFT: mean differences in bits
				 per symbol */
};

struct trend {
	char set_name[LEDGER_NAME_BYTES];
	struct trend_night *nights; /* owned */
	size_t night_count, night_room;
	struct trend_series *series; /* owned */
	size_t series_count, series_room;
	struct trend_event *events; /* owned, by night, then series */
	size_t event_count, event_room;
	size_t rolling_count; /* M: series whose nights are judged by chance */
	double limit;         /* h; 0 while M is 0 */
};

/* Adds a night, later than those before. STATUS_NO_MEMORY. */
MUST_USE enum status trend_add(struct trend *trend,
			       const struct baseline *night);
/*
 * Finds the events, once all nights are there.
 *
 * Rolling: each night's paired difference is standardised against the mean of
 * the nights before it, as a recursive residual (Brown, Durbin and Evans 1975),
 * the mean error of all nights and its degrees of freedom, so that on unchanged
 * code and data the residuals are independent and standard normal from the
 * second night on, with no window to choose. A one-sided CUSUM (Page 1954) adds
 * residual less k and alarms above h = ln(500 M) - 1.17, which gives one false
 * alarm in 1000 nights over M cells (Siegmund's approximation, 1985). The
 * change began on the night after the sum was last zero; the new level then
 * becomes the reference. Fixed: bytes compared exactly. STATUS_NO_MEMORY.
 */
MUST_USE enum status trend_find(struct trend *trend);
/* Accepts {0}. */
void trend_release(struct trend *trend);

/* h for so many cells; 0 for none. */
double trend_limit(size_t cells);
/* "" where the night does not know it. */
const char *trend_version(const struct trend_night *night, const char *library);

/*
 * A one-sided CUSUM of one series, fed night by night; start from {0}, with
 * spread 1. For trend_find and for simulations of it.
 */
struct trend_cusum {
	double mean;     /* of the level so far */
	double variance; /* of one night: mean of the squared errors */
	size_t nights;   /* that are in both */
	double sum;
	double squares; /* of residuals, each at most 9 */
	size_t residuals;
	double spread;
	bool rising; /* sum above zero */
};
/* true: above the limit; the caller starts the level anew (trend_restart). */
bool trend_step(struct trend_cusum *cusum, const struct baseline_pair *pair,
		double limit);
/* Forgets the level and the sum, keeps the spread. */
void trend_restart(struct trend_cusum *cusum);
/* Takes a night into the level without judging it. */
void trend_learn(struct trend_cusum *cusum, const struct baseline_pair *pair);

#endif
