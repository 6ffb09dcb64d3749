#include "resample/bootstrap.h"

#include <math.h>
#include <stdio.h>

#include "base/memory.h"
#include "base/sum.h"
#include "resample/batches.h"
#include "resample/block_length.h"
#include "resample/draws.h"
#include "resample/normal.h"
#include "resample/start_up.h"

/* Where the guard begins: 1.7 standard errors of 100 batches. */
#define GUARD_LAG1 0.17
/* Beyond this the factor 19 would only pretend to know more. */
#define GUARD_LAG1_MOST 0.9
/* Below, quantiles studentised by so few block sums are unstable. */
#define STUDENTISE_MIN 30
/* Facts are rounded to 2^-16 bit: less than this a block is no variance. */
#define ROUNDING_BITS 0x1p-15
#define KEPT 6
/* A correction of higher order that were larger would be no correction. */
#define EXCESS_SHARE_MOST 0.5

struct bootstrap {
	struct bootstrap_rules rules;
	struct draws kept[KEPT]; /* oldest is replaced first */
	size_t next;
};

/* Series in hand while an interval is made. */
struct work {
	double *residual;    /* bits - mean x symbols, of each block */
	double *sum_bits;    /* prefix sums of residual, twice around */
	double *sum_symbols; /* prefix sums of symbols, twice around */
	double *t;           /* studentised draws */
	size_t blocks;
};

enum status bootstrap_new(const struct bootstrap_rules *rules,
			  struct bootstrap **bootstrap)
{
	TRY(memory_new_zeroed(1, sizeof(**bootstrap), bootstrap));
	(*bootstrap)->rules = *rules;
	return STATUS_OK;
}

void bootstrap_free(struct bootstrap *bootstrap)
{
	if (!bootstrap)
		return;
	for (size_t i = 0; i < KEPT; i++)
		draws_release(&bootstrap->kept[i]);
	memory_free(bootstrap);
}

static enum status draws_for(struct bootstrap *bootstrap, size_t blocks,
			     size_t length, const struct draws **draws)
{
	const struct bootstrap_rules *rules = &bootstrap->rules;
	struct draws made, *place;

	for (size_t i = 0; i < KEPT; i++) {
		place = &bootstrap->kept[i];
		if (place->blocks == blocks && place->length == length) {
			*draws = place;
			return STATUS_OK;
		}
	}
	TRY(draws_init(&made, rules->draws, blocks, length, rules->seed,
		       rules->corpus));
	place = &bootstrap->kept[bootstrap->next++ % KEPT];
	draws_release(place);
	*place = made;
	*draws = place;
	return STATUS_OK;
}

static enum status work_init(struct work *work,
			     const struct block_series *series, unsigned draws,
			     size_t start_up)
{
	size_t m = series->blocks;
	double mean = sum_of(series->bits + start_up, m - start_up) /
		      sum_of(series->symbols + start_up, m - start_up);
	double *numbers;

	TRY(memory_new(5 * m + 2 + draws, sizeof(*numbers), &numbers));
	*work = (struct work){numbers, numbers + m, numbers + 3 * m + 1,
			      numbers + 5 * m + 2, m};
	work->sum_bits[0] = 0;
	work->sum_symbols[0] = 0;
	for (size_t i = 0; i < 2 * m; i++) {
		double bits = series->bits[i % m];
		double symbols = series->symbols[i % m];

		if (i < m)
			work->residual[i] =
				i < start_up ? 0 : bits - mean * symbols;
		work->sum_bits[i + 1] =
			work->sum_bits[i] + work->residual[i % m];
		work->sum_symbols[i + 1] = work->sum_symbols[i] + symbols;
	}
	return STATUS_OK;
}

static void work_release(struct work *work)
{
	memory_free(work->residual);
}

/* Exact standard error of the circular scheme; one freedom is spent. */
static double exact_error(const struct work *work, size_t length)
{
	size_t m = work->blocks;
	double pieces = (double)m / (double)length;
	double squares = 0;

	for (size_t i = 0; i < m; i++) {
		double u = work->sum_bits[i + length] - work->sum_bits[i];

		squares += u * u;
	}
	return sqrt(squares / (double)m * pieces * pieces / (pieces - 1)) /
	       work->sum_symbols[m];
}

/* The factor on the error when the series' excess leaves its variance. */
static double without_excess(double error, double symbols, double excess)
{
	double variance = error * error * symbols * symbols;

	if (!(variance > 0))
		return 1;
	return sqrt(1 - fmin(excess / variance, EXCESS_SHARE_MOST));
}

/* Sums over one draw: residuals u, symbols s, and their products. */
struct draw_sums {
	double u, s, uu, us, ss;
};

static void add_piece(struct draw_sums *sums, const struct work *work,
		      size_t start, size_t length)
{
	double u = work->sum_bits[start + length] - work->sum_bits[start];
	double s = work->sum_symbols[start + length] - work->sum_symbols[start];

	sums->u += u;
	sums->s += s;
	sums->uu += u * u;
	sums->us += u * s;
	sums->ss += s * s;
}

static double studentised(const struct draw_sums *sums, double pieces,
			  double error)
{
	double shift = sums->u / sums->s;
	double squares =
		sums->uu - 2 * shift * sums->us + shift * shift * sums->ss;
	double own = squares > 0
			     ? sqrt(squares * pieces / (pieces - 1)) / sums->s
			     : 0;

	return shift / (own > 0 ? own : error);
}

static void studentise(struct work *work, const struct draws *draws,
		       double error)
{
	size_t full = draws->pieces - 1;
	size_t rest = draws->blocks - full * draws->length;
	double pieces = (double)draws->blocks / (double)draws->length;

	for (size_t d = 0; d < draws->draws; d++) {
		const uint16_t *starts = draws->starts + d * draws->pieces;
		/* Two sets of sums, so that additions overlap in time. */
		struct draw_sums even = {0}, odd = {0};
		size_t i = 0;

		for (; i + 1 < full; i += 2) {
			add_piece(&even, work, starts[i], draws->length);
			add_piece(&odd, work, starts[i + 1], draws->length);
		}
		if (i < full)
			add_piece(&even, work, starts[i], draws->length);
		add_piece(&odd, work, starts[full], rest);
		even.u += odd.u;
		even.s += odd.s;
		even.uu += odd.uu;
		even.us += odd.us;
		even.ss += odd.ss;
		work->t[d] = studentised(&even, pieces, error);
	}
}

/* Distances of the ends from the mean, in standard errors, both >= 0. */
struct reach {
	double below, above;
};

static enum status find_reach(struct bootstrap *bootstrap, struct work *work,
			      size_t length, double error, struct reach *reach)
{
	double tail = (1 - bootstrap->rules.confidence) / 2;
	double pieces = (double)work->blocks / (double)length;
	const struct draws *draws;

	if (pieces < STUDENTISE_MIN) {
		reach->above = student_quantile(1 - tail, pieces - 1);
		reach->below = reach->above;
		return STATUS_OK;
	}
	TRY(draws_for(bootstrap, work->blocks, length, &draws));
	studentise(work, draws, error);
	sort_reals(work->t, draws->draws);
	reach->below =
		fmax(0, quantile_sorted(work->t, draws->draws, 1 - tail));
	reach->above = fmax(0, -quantile_sorted(work->t, draws->draws, tail));
	return STATUS_OK;
}

/* Correlation that blocks did not absorb: fewer, and wider. */
static void guard(struct bootstrap_result *result, double confidence,
		  struct reach *reach)
{
	double rho = fmin(result->lag1, GUARD_LAG1_MOST);
	double factor = (1 + rho) / (1 - rho), before, after;

	if (result->lag1 <= GUARD_LAG1)
		return;
	result->guarded = true;
	before = fmax(result->effective_blocks - 1, 7);
	result->effective_blocks /= factor;
	after = fmax(result->effective_blocks - 1, 7);
	result->standard_error *= sqrt(factor);
	factor = student_quantile((1 + confidence) / 2, after) /
		 student_quantile((1 + confidence) / 2, before);
	reach->below *= factor;
	reach->above *= factor;
}

static void conclude(struct bootstrap_result *result, const struct reach *reach,
		     double from)
{
	if (from < EFFECTIVE_BLOCKS_MIN) {
		(void)snprintf(
			result->reason, sizeof(result->reason),
			"the spread comes from about %.0f of the blocks, "
			"%d needed: a start-up or one odd stretch is no "
			"spread",
			from, EFFECTIVE_BLOCKS_MIN);
		return;
	}
	if (result->effective_blocks < EFFECTIVE_BLOCKS_MIN) {
		(void)snprintf(result->reason, sizeof(result->reason),
			       "%.1f effective blocks of %d needed: about "
			       "%.0f times as much data of this kind would do",
			       result->effective_blocks, EFFECTIVE_BLOCKS_MIN,
			       ceil(EFFECTIVE_BLOCKS_MIN /
				    fmax(result->effective_blocks, 0.1)));
		return;
	}
	result->known = true;
	result->low = result->mean - reach->below * result->standard_error;
	result->high = result->mean + reach->above * result->standard_error;
}

/*
 * How many blocks the spread comes from: (sum u^2)^2 / sum u^4, blocks / 3 for
 * normal values, 1 where a single block differs. Draws that miss such blocks
 * see no spread at all, and their quantiles say nothing.
 */
static double spread_blocks(const struct work *work)
{
	double squares = 0, fourths = 0;

	for (size_t i = 0; i < work->blocks; i++) {
		double square = work->residual[i] * work->residual[i];

		squares += square;
		fourths += square * square;
	}
	return squares * squares / fourths;
}

static bool is_constant(const struct work *work)
{
	for (size_t i = 0; i < work->blocks; i++) {
		if (fabs(work->residual[i]) > ROUNDING_BITS)
			return false;
	}
	return true;
}

static enum status interval_of(struct bootstrap *bootstrap, struct work *work,
			       double excess, struct bootstrap_result *result)
{
	struct block_length automatic;
	struct batches batches;
	struct reach reach = {0};

	if (is_constant(work)) {
		result->constant = true;
		result->block_length = 1;
		result->effective_blocks = (double)work->blocks;
		conclude(result, &reach, (double)work->blocks);
		return STATUS_OK;
	}
	TRY(block_length_find(work->residual, work->blocks, &automatic));
	batches_find(work->residual, work->blocks, &batches);
	result->constant = automatic.degenerate;
	result->block_length =
		block_length_clamp(automatic.circular, work->blocks);
	result->effective_blocks =
		(double)work->blocks / (double)result->block_length;
	result->lag1 = batches.lag1;
	result->drifts = batches.drifts;
	/* Blocks left out spread nothing: the others stand for them. */
	result->standard_error =
		exact_error(work, result->block_length) *
		sqrt((double)work->blocks /
		     (double)(work->blocks - result->start_up));
	if (result->effective_blocks >= EFFECTIVE_BLOCKS_MIN) {
		TRY(find_reach(bootstrap, work, result->block_length,
			       result->standard_error, &reach));
	}
	result->standard_error *=
		without_excess(result->standard_error,
			       work->sum_symbols[work->blocks], excess);
	guard(result, bootstrap->rules.confidence, &reach);
	conclude(result, &reach, spread_blocks(work));
	return STATUS_OK;
}

enum status bootstrap_interval(struct bootstrap *bootstrap,
			       const struct block_series *series,
			       struct bootstrap_result *result)
{
	struct bootstrap_result made = {0};
	struct work work;
	enum status status;

	if (!series->blocks) {
		(void)snprintf(made.reason, sizeof(made.reason),
			       "no blocks to resample");
		*result = made;
		return STATUS_OK;
	}
	made.mean = sum_of(series->bits, series->blocks) /
		    sum_of(series->symbols, series->blocks);
	if (series->learns)
		made.start_up = start_up_blocks(series);
	TRY(work_init(&work, series, bootstrap->rules.draws, made.start_up));
	status = interval_of(bootstrap, &work, series->excess, &made);
	work_release(&work);
	if (status == STATUS_OK)
		*result = made;
	return status;
}
