/* How often intervals and brackets were right on sources of known rate. */
#ifndef VERDICT_CALIBRATION_H
#define VERDICT_CALIBRATION_H

#include "gap/trial.h"
#include "resample/proportion.h"

/* Two-sided confidence of every Monte-Carlo error below: Wilson 99%. */
#define CALIBRATION_CONFIDENCE 0.99

#define CALIBRATION_NAME_BYTES 32

/* A figure of a finite number of runs, and its standard error. */
struct measured {
	double value, error;
};

/* One estimator on one source at one length; bits per symbol. */
struct calibration_row {
	char name[TRIAL_NAME_BYTES];
	struct measured bias; /* mean of estimate less rate */
	struct measured rmse;
	struct measured width;       /* median full width of the interval */
	struct proportion own_mean;  /* covers the estimator's own mean */
	struct proportion true_rate; /* covers the rate of the source */
	/* The same, of the runs whose trusted order reaches this one: where the
	 * program itself would show the figure. */
	struct proportion trusted_rate;
	struct proportion told; /* runs with an interval */
};

/* What is being calibrated; text is copied. */
struct calibration_subject {
	char source[CALIBRATION_NAME_BYTES];
	char family[CALIBRATION_NAME_BYTES];
	bool finite_memory; /* exact at order */
	bool hidden;        /* states are not seen */
	bool drifting;      /* flags are wanted, coverage is not promised */
	unsigned order;     /* of the grams read */
	uint64_t symbols;
	double known_rate; /* bits per symbol */
};

/* Brackets of some of the samples. */
struct calibration_bracket {
	struct proportion covers; /* of the brackets given */
	struct proportion open_below, above, below;
	struct measured width; /* median, share of the rate; those not open */
};

struct calibration_case {
	struct calibration_subject subject;
	size_t runs;
	struct calibration_row rows[TRIAL_ROWS_MAX];
	size_t row_count;
	struct proportion bracket; /* covers, of the brackets given */
	struct proportion bracket_told, open_below, not_calibrated, drifts;
	struct proportion above, below; /* bracket misses: rate above it, below
					   it; of the brackets given */
	struct measured bracket_width;  /* median, share of the rate; brackets
					 that  are not open below */
	/* Of the samples that mix and ctw ran on: the bracket with them among
	 * the upper edges, and without. No trials: they ran on none. */
	struct calibration_bracket with_codes, without_codes;
	struct measured codes_narrow; /* median of width with over without */
	struct proportion gap;        /* paired interval covers the mean gap */
	struct measured gap_width_ratio; /* median of paired over unpaired */
	/* Median of the paired width over 2 x 1.96 times how the gap really
	 * scatters from sample to sample: 1 is as wide as need be. */
	double gap_width_by_need;
};

/*
 * trials[0 … count-1], count >= 2, are runs of one subject; their rows are the
 * same methods in the same order. STATUS_NO_MEMORY.
 */
MUST_USE enum status
calibration_judge(const struct calibration_subject *subject,
		  const struct trial *trials, size_t count,
		  struct calibration_case *made);

/* A promise, and what was measured. */
struct calibration_goal {
	char what[80];
	char who[CALIBRATION_NAME_BYTES]; /* the source or family that decides;
					     "" for all together */
	uint64_t symbols;
	double least, most;      /* of the value */
	double value;            /* measured: a share, or what says so */
	bool has_share;          /* value is share.value */
	struct proportion share; /* with its error */
	bool met;
};

/* At each length, at most so many. */
#define CALIBRATION_GOALS 14

/*
 * Judges the cases of one length against the promises; goals has room for
 * CALIBRATION_GOALS; returns how many the cases speak to. Coverage of own
 * means, averaged over plug-in and crossfit, and of the rate by the worst
 * source are met where their Wilson interval meets the range, all else by
 * value. Nothing is said of worst sources of fewer than 100 runs. Pure.
 */
size_t calibration_goals(const struct calibration_case *cases, size_t count,
			 struct calibration_goal *goals);

#endif
