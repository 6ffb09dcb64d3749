#include "verdict/calibration.h"

#include <stdbool.h>
#include <stdio.h>
#include <string.h>

#include "base/sum.h"

#define CASES_MAX 64
/* With fewer samples of a source, the worst of them is chance. */
#define RUNS_FOR_WORST 100

/* Goals being written. */
struct goals {
	struct calibration_goal *list;
	size_t count;
	uint64_t symbols;
};

static struct calibration_goal *add_goal(struct goals *goals, const char *what,
					 double least, double most)
{
	struct calibration_goal *goal = &goals->list[goals->count++];

	*goal = (struct calibration_goal){
		.symbols = goals->symbols,
		.least = least,
		.most = most,
	};
	(void)snprintf(goal->what, sizeof(goal->what), "%s", what);
	return goal;
}

static void decide_share(struct calibration_goal *goal,
			 const struct proportion *share, const char *who)
{
	goal->has_share = true;
	goal->share = *share;
	goal->value = share->value;
	goal->met = goal->value >= goal->least && goal->value <= goal->most;
	(void)snprintf(goal->who, sizeof(goal->who), "%s", who);
}

static const struct calibration_row *row_of(const struct calibration_case *one,
					    const char *name)
{
	for (size_t i = 0; i < one->row_count; i++) {
		if (strcmp(one->rows[i].name, name) == 0)
			return &one->rows[i];
	}
	return NULL;
}

/* A share of one case; false: the case says nothing about it. */
struct measure {
	bool (*of)(const struct calibration_case *one,
		   struct proportion *share);
};

static bool give(const struct proportion *share, struct proportion *out)
{
	*out = *share;
	return share->trials > 0;
}

static bool family_is(const struct calibration_case *one, const char *family)
{
	return strcmp(one->subject.family, family) == 0;
}

/* As it was measured when the method was chosen: the average of both rows. */
static bool own_mean(const struct calibration_case *one,
		     struct proportion *share)
{
	const struct calibration_row *plugin = row_of(one, "plug-in");
	const struct calibration_row *fitted = row_of(one, "crossfit");

	if (!plugin || !fitted ||
	    !(family_is(one, "i.i.d.") || family_is(one, "chain") ||
	      family_is(one, "order-2") || family_is(one, "hidden")))
		return false;
	*share = proportion_of(
		(plugin->own_mean.hits + fitted->own_mean.hits + 1) / 2,
		(plugin->own_mean.trials + fitted->own_mean.trials + 1) / 2,
		CALIBRATION_CONFIDENCE);
	return share->trials > 0;
}

static bool true_rate(const struct calibration_case *one,
		      struct proportion *share)
{
	const struct calibration_row *row = row_of(one, "grassberger");

	return row && one->subject.finite_memory &&
	       give(&row->true_rate, share);
}

static bool trusted_rate(const struct calibration_case *one,
			 struct proportion *share)
{
	const struct calibration_row *row = row_of(one, "grassberger");

	return row && one->subject.finite_memory &&
	       give(&row->trusted_rate, share);
}

static bool bracket(const struct calibration_case *one,
		    struct proportion *share)
{
	return !one->subject.drifting && give(&one->bracket, share);
}

static bool finite_bracket(const struct calibration_case *one,
			   struct proportion *share)
{
	return one->subject.finite_memory && bracket(one, share);
}

static bool codes_bracket(const struct calibration_case *one,
			  struct proportion *share)
{
	return !one->subject.drifting && give(&one->with_codes.covers, share);
}

static bool false_alarm(const struct calibration_case *one,
			struct proportion *share)
{
	return !one->subject.drifting && give(&one->drifts, share);
}

static bool detection(const struct calibration_case *one,
		      struct proportion *share)
{
	return one->subject.drifting && give(&one->drifts, share);
}

static bool gap(const struct calibration_case *one, struct proportion *share)
{
	return !one->subject.drifting && give(&one->gap, share);
}

/* All cases that speak to it together. */
static struct proportion pool(const struct calibration_case *cases,
			      size_t count, struct measure measure)
{
	size_t hits = 0, trials = 0;

	for (size_t i = 0; i < count; i++) {
		struct proportion share;

		if (!measure.of(&cases[i], &share))
			continue;
		hits += share.hits;
		trials += share.trials;
	}
	return proportion_of(hits, trials, CALIBRATION_CONFIDENCE);
}

static void pooled_goal(struct goals *goals,
			const struct calibration_goal *wanted,
			const struct calibration_case *cases, size_t count,
			struct measure measure)
{
	struct proportion share = pool(cases, count, measure);

	if (share.trials)
		decide_share(add_goal(goals, wanted->what, wanted->least,
				      wanted->most),
			     &share, "");
}

/* How far a share lies outside the range, or inside (negative). */
static double distance(const struct proportion *share,
		       const struct calibration_goal *wanted)
{
	double low = wanted->least - share->value;
	double high = share->value - wanted->most;

	/* All of them is never too many. */
	if (wanted->most >= 1)
		return low;
	return low > high ? low : high;
}

static void worst_goal(struct goals *goals,
		       const struct calibration_goal *wanted,
		       const struct calibration_case *cases, size_t count,
		       struct measure measure)
{
	const struct calibration_case *worst = NULL;
	struct proportion share, worst_share = {0};

	for (size_t i = 0; i < count; i++) {
		if (!measure.of(&cases[i], &share) ||
		    (worst && distance(&share, wanted) <=
				      distance(&worst_share, wanted)))
			continue;
		worst = &cases[i];
		worst_share = share;
	}
	if (worst)
		decide_share(add_goal(goals, wanted->what, wanted->least,
				      wanted->most),
			     &worst_share, worst->subject.source);
}

/*
 * The worst of many sources lies below its own expectation by chance alone: it
 * fails where the error of its measurement does not reach the range.
 */
static void worst_within_error(struct goals *goals,
			       const struct calibration_goal *wanted,
			       const struct calibration_case *cases,
			       size_t count, struct measure measure)
{
	size_t before = goals->count;
	struct calibration_goal *goal = &goals->list[before];

	worst_goal(goals, wanted, cases, count, measure);
	if (goals->count > before)
		goal->met = goal->share.low <= goal->most &&
			    goal->share.high >= goal->least;
}

static void family_goal(struct goals *goals,
			const struct calibration_case *cases, size_t count)
{
	struct proportion worst = {.value = 2};
	const char *who = "";

	for (size_t i = 0; i < count; i++) {
		size_t hits = 0, trials = 0;
		struct proportion share;

		for (size_t j = 0; j < count; j++) {
			if (!family_is(&cases[j], cases[i].subject.family) ||
			    !bracket(&cases[j], &share))
				continue;
			hits += share.hits;
			trials += share.trials;
		}
		share = proportion_of(hits, trials, CALIBRATION_CONFIDENCE);
		if (trials && share.value < worst.value) {
			worst = share;
			who = cases[i].subject.family;
		}
	}
	if (worst.trials)
		decide_share(add_goal(goals, "bracket covers, worst family",
				      0.75, 1),
			     &worst, who);
}

/* What was measured elsewhere for this rule, by length. */
static double width_limit(uint64_t symbols)
{
	if (symbols < 100000)
		return 0.12;
	return symbols < 1000000 ? 0.07 : 0.025;
}

static void figure_goal(struct goals *goals, const char *what, double most,
			double *values, size_t count)
{
	struct calibration_goal *goal;

	if (!count)
		return;
	goal = add_goal(goals, what, 0, most);
	sort_reals(values, count);
	goal->value = quantile_sorted(values, count, 0.5);
	goal->met = goal->value <= most;
}

static void width_goals(struct goals *goals,
			const struct calibration_case *cases, size_t count)
{
	double widths[CASES_MAX], ratios[CASES_MAX], narrow[CASES_MAX];
	size_t width_count = 0, ratio_count = 0, narrow_count = 0;

	for (size_t i = 0; i < count && i < CASES_MAX; i++) {
		struct proportion share;

		if (bracket(&cases[i], &share) &&
		    cases[i].bracket_width.value > 0)
			widths[width_count++] = cases[i].bracket_width.value;
		if (codes_bracket(&cases[i], &share) &&
		    cases[i].with_codes.width.value > 0)
			narrow[narrow_count++] =
				cases[i].with_codes.width.value;
		if (gap(&cases[i], &share))
			ratios[ratio_count++] = cases[i].gap_width_ratio.value;
	}
	figure_goal(goals, "bracket width by the rate, median of sources",
		    width_limit(goals->symbols), widths, width_count);
	figure_goal(goals, "the same with mix and ctw",
		    width_limit(goals->symbols), narrow, narrow_count);
	figure_goal(goals, "paired gap width by unpaired, median of sources",
		    0.7, ratios, ratio_count);
}

size_t calibration_goals(const struct calibration_case *cases, size_t count,
			 struct calibration_goal *list)
{
	struct goals goals = {list, 0, count ? cases[0].subject.symbols : 0};
	bool is_short = goals.symbols < 100000;
	bool many = count && cases[0].runs >= RUNS_FOR_WORST;
	const struct calibration_goal wanted[] = {
		{.what = "interval covers own mean, worst source",
		 .least = 0.93,
		 .most = 0.97},
		{.what = "Grassberger covers the rate, all together",
		 .least = 0.92,
		 .most = 1},
		{.what = "bracket covers, all together",
		 .least = 0.93,
		 .most = 1},
		{.what = "bracket covers, worst finite memory",
		 .least = 0.90,
		 .most = 1},
		{.what = "drift flagged in vain, all together",
		 .least = 0,
		 .most = 0.05},
		{.what = "drift found",
		 .least = is_short ? 0.75 : 0.99,
		 .most = 1},
		{.what = "paired gap covers its mean, all together",
		 .least = 0.92,
		 .most = 0.98},
		{.what = "the same where trusted, worst source",
		 .least = 0.92,
		 .most = 1},
		{.what = "with mix and ctw: bracket covers, all together",
		 .least = 0.93,
		 .most = 1},
	};

	if (many)
		worst_within_error(&goals, &wanted[0], cases, count,
				   (struct measure){own_mean});
	pooled_goal(&goals, &wanted[1], cases, count,
		    (struct measure){true_rate});
	if (many)
		worst_within_error(&goals, &wanted[7], cases, count,
				   (struct measure){trusted_rate});
	pooled_goal(&goals, &wanted[2], cases, count,
		    (struct measure){bracket});
	if (many) {
		worst_goal(&goals, &wanted[3], cases, count,
			   (struct measure){finite_bracket});
		family_goal(&goals, cases, count);
	}
	pooled_goal(&goals, &wanted[8], cases, count,
		    (struct measure){codes_bracket});
	pooled_goal(&goals, &wanted[4], cases, count,
		    (struct measure){false_alarm});
	/* Longer blocks outlast the regimes: then there is no drift to find. */
	if (goals.symbols <= 100000)
		pooled_goal(&goals, &wanted[5], cases, count,
			    (struct measure){detection});
	pooled_goal(&goals, &wanted[6], cases, count, (struct measure){gap});
	width_goals(&goals, cases, count);
	return goals.count;
}
