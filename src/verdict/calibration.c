#include "verdict/calibration.h"

#include <math.h>
#include <string.h>

#include "base/memory.h"
#include "base/sum.h"

static struct proportion share(size_t hits, size_t trials)
{
	return proportion_of(hits, trials, CALIBRATION_CONFIDENCE);
}

/*
 * Median and its standard error: half the distance of the order statistics
 * one binomial standard deviation to either side. values are sorted.
 */
static struct measured median_of(double *values, size_t count)
{
	double step = sqrt((double)count) / 2 / (double)count;

	if (!count)
		return (struct measured){0};
	sort_reals(values, count);
	return (struct measured){
		quantile_sorted(values, count, 0.5),
		(quantile_sorted(values, count, fmin(1, 0.5 + step)) -
		 quantile_sorted(values, count, fmax(0, 0.5 - step))) /
			2,
	};
}

/* Mean over the samples on which the row is known; how many they are. */
static double mean_estimate(const struct trial *trials, size_t count, size_t r,
			    size_t *known)
{
	struct sum sum = {0};

	*known = 0;
	for (size_t i = 0; i < count; i++) {
		if (!trials[i].rows[r].known)
			continue;
		sum_add(&sum, trials[i].rows[r].bits_per_symbol);
		++*known;
	}
	return *known ? sum_value(&sum) / (double)*known : 0;
}

static void judge_errors(const struct trial *trials, size_t count, size_t r,
			 double known_rate, struct calibration_row *row)
{
	struct sum spread = {0}, second = {0}, fourth = {0};
	size_t known;
	double mean = mean_estimate(trials, count, r, &known);
	double n = (double)known, mse;

	for (size_t i = 0; i < count; i++) {
		double x = trials[i].rows[r].bits_per_symbol;
		double error = (x - known_rate) * (x - known_rate);

		if (!trials[i].rows[r].known)
			continue;
		sum_add(&spread, (x - mean) * (x - mean));
		sum_add(&second, error);
		sum_add(&fourth, error * error);
	}
	if (known < 2)
		return;
	mse = sum_value(&second) / n;
	row->bias.value = mean - known_rate;
	row->bias.error = sqrt(sum_value(&spread) / (n - 1) / n);
	row->rmse.value = sqrt(mse);
	/* Delta method: the error of the mean square over twice its root. */
	if (mse > 0)
		row->rmse.error =
			sqrt(fmax(0, sum_value(&fourth) / n - mse * mse) / n) /
			(2 * row->rmse.value);
}

static bool covers(double low, double high, double value)
{
	/* A series without variance has no width: rounding is no miss. */
	return low - 1e-9 <= value && value <= high + 1e-9;
}

static void judge_row(const struct trial *trials, size_t count, size_t r,
		      const struct calibration_subject *subject,
		      double *scratch, struct calibration_row *row)
{
	double known_rate = subject->known_rate;
	size_t known;
	double mean = mean_estimate(trials, count, r, &known);
	size_t told = 0, own = 0, truth = 0, trusted = 0, trusted_truth = 0;
	size_t asked = 0;

	memcpy(row->name, trials[0].rows[r].name, sizeof(row->name));
	for (size_t i = 0; i < count; i++) {
		const struct trial_row *run = &trials[i].rows[r];
		bool hit;

		asked += !run->skipped;
		if (!run->has_interval)
			continue;
		own += covers(run->low, run->high, mean);
		hit = covers(run->low, run->high, known_rate);
		truth += hit;
		if (trials[i].trusted_order >= subject->order) {
			trusted++;
			trusted_truth += hit;
		}
		scratch[told++] = run->high - run->low;
	}
	row->own_mean = share(own, told);
	row->true_rate = share(truth, told);
	row->trusted_rate = share(trusted_truth, trusted);
	row->told = share(told, asked);
	row->width = median_of(scratch, told);
	judge_errors(trials, count, r, known_rate, row);
}

static void judge_bracket(const struct trial *trials, size_t count,
			  double *scratch, struct calibration_case *made)
{
	double rate = made->subject.known_rate;
	size_t told = 0, open = 0, above = 0, below = 0, flagged = 0, wide = 0;

	for (size_t i = 0; i < count; i++) {
		const struct trial *run = &trials[i];

		if (!run->bracket_known)
			continue;
		told++;
		open += run->open_below;
		flagged += run->not_calibrated;
		above += rate > run->bracket_high + 1e-9;
		below += rate < run->bracket_low - 1e-9;
		if (!run->open_below)
			scratch[wide++] =
				(run->bracket_high - run->bracket_low) /
				fmax(rate, 1e-9);
	}
	made->bracket = share(told - above - below, told);
	made->above = share(above, told);
	made->below = share(below, told);
	made->bracket_told = share(told, count);
	made->open_below = share(open, told);
	made->not_calibrated = share(flagged, told);
	made->bracket_width = median_of(scratch, wide);
}

/* with: the brackets with slow codes; else the plain ones, same samples. */
static struct trial_bracket bracket_of(const struct trial *run, bool with)
{
	if (with)
		return run->with_codes;
	return (struct trial_bracket){run->bracket_known, run->open_below,
				      run->bracket_low, run->bracket_high};
}

static void judge_codes(const struct trial *trials, size_t count, bool with,
			double *scratch, struct calibration_case *made)
{
	struct calibration_bracket *judged =
		with ? &made->with_codes : &made->without_codes;
	double rate = made->subject.known_rate;
	size_t told = 0, open = 0, above = 0, below = 0, wide = 0;

	for (size_t i = 0; i < count; i++) {
		struct trial_bracket bracket = bracket_of(&trials[i], with);

		if (!trials[i].codes_ran || !bracket.known)
			continue;
		told++;
		open += bracket.open_below;
		above += rate > bracket.high + 1e-9;
		below += rate < bracket.low - 1e-9;
		if (!bracket.open_below)
			scratch[wide++] =
				(bracket.high - bracket.low) / fmax(rate, 1e-9);
	}
	judged->covers = share(told - above - below, told);
	judged->open_below = share(open, told);
	judged->above = share(above, told);
	judged->below = share(below, told);
	judged->width = median_of(scratch, wide);
}

static void judge_narrowing(const struct trial *trials, size_t count,
			    double *scratch, struct calibration_case *made)
{
	size_t both = 0;

	for (size_t i = 0; i < count; i++) {
		struct trial_bracket with = bracket_of(&trials[i], true);
		struct trial_bracket plain = bracket_of(&trials[i], false);

		if (with.known && plain.known && !with.open_below &&
		    !plain.open_below && plain.high > plain.low)
			scratch[both++] = (with.high - with.low) /
					  (plain.high - plain.low);
	}
	made->codes_narrow = median_of(scratch, both);
}

static void judge_drift(const struct trial *trials, size_t count,
			struct calibration_case *made)
{
	size_t known = 0, drifts = 0;

	for (size_t i = 0; i < count; i++) {
		known += trials[i].drift_known;
		drifts += trials[i].drift_known && trials[i].drifts;
	}
	made->drifts = share(drifts, known);
}

/* Normal quantile of the intervals' 95%. */
#define REACH_95 1.959964

static void judge_gap_need(const struct trial *trials, size_t count,
			   double mean, double *scratch,
			   struct calibration_case *made)
{
	struct sum squares = {0};
	size_t told = 0;
	double spread;

	for (size_t i = 0; i < count; i++) {
		double off = trials[i].gap - mean;

		if (!trials[i].gap_known)
			continue;
		sum_add(&squares, off * off);
		scratch[told++] = trials[i].gap_high - trials[i].gap_low;
	}
	if (told < 2)
		return;
	spread = sqrt(sum_value(&squares) / (double)(told - 1));
	if (spread > 0)
		made->gap_width_by_need = median_of(scratch, told).value /
					  (2 * REACH_95 * spread);
}

static void judge_gap(const struct trial *trials, size_t count, double *scratch,
		      struct calibration_case *made)
{
	size_t told = 0, hits = 0;
	struct sum sum = {0};
	double mean;

	for (size_t i = 0; i < count; i++) {
		if (!trials[i].gap_known)
			continue;
		sum_add(&sum, trials[i].gap);
		told++;
	}
	mean = told ? sum_value(&sum) / (double)told : 0;
	told = 0;
	for (size_t i = 0; i < count; i++) {
		const struct trial *run = &trials[i];

		if (!run->gap_known)
			continue;
		hits += covers(run->gap_low, run->gap_high, mean);
		scratch[told++] = run->unpaired_width > 0
					  ? (run->gap_high - run->gap_low) /
						    run->unpaired_width
					  : 1;
	}
	made->gap = share(hits, told);
	made->gap_width_ratio = median_of(scratch, told);
	judge_gap_need(trials, count, mean, scratch, made);
}

enum status calibration_judge(const struct calibration_subject *subject,
			      const struct trial *trials, size_t count,
			      struct calibration_case *made)
{
	struct calibration_case judged = {.subject = *subject, .runs = count};
	double *scratch;

	TRY(memory_new(count, sizeof(*scratch), &scratch));
	judged.row_count = trials[0].row_count;
	for (size_t r = 0; r < judged.row_count; r++)
		judge_row(trials, count, r, subject, scratch, &judged.rows[r]);
	judge_bracket(trials, count, scratch, &judged);
	judge_codes(trials, count, true, scratch, &judged);
	judge_codes(trials, count, false, scratch, &judged);
	judge_narrowing(trials, count, scratch, &judged);
	judge_drift(trials, count, &judged);
	judge_gap(trials, count, scratch, &judged);
	memory_free(scratch);
	*made = judged;
	return STATUS_OK;
}
