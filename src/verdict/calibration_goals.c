#include "verdict/calibration.h"

#include <stdio.h>
#include <string.h>

#include "base/sum.h"

#define CASES_MAX 64

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

/* A share of one case; NULL: the case says nothing about it. */
struct measure {
	const struct proportion *(*of)(const struct calibration_case *one);
};

static const struct proportion *own_mean(const struct calibration_case *one)
{
	static const char *const families[] = {"i.i.d.", "chain", "order-2",
					       "hidden"};
	const struct calibration_row *row = row_of(one, "grassberger");

	for (size_t i = 0; i < sizeof(families) / sizeof(families[0]); i++) {
		if (row && row->own_mean.trials &&
		    strcmp(one->subject.family, families[i]) == 0)
			return &row->own_mean;
	}
	return NULL;
}

static const struct proportion *true_rate(const struct calibration_case *one)
{
	const struct calibration_row *row = row_of(one, "grassberger");

	if (!row || !row->true_rate.trials || !one->subject.finite_memory)
		return NULL;
	return &row->true_rate;
}

static const struct proportion *bracket(const struct calibration_case *one)
{
	return one->bracket.trials && !one->subject.drifting ? &one->bracket
							     : NULL;
}

static const struct proportion *
finite_bracket(const struct calibration_case *one)
{
	return one->subject.finite_memory ? bracket(one) : NULL;
}

static const struct proportion *false_alarm(const struct calibration_case *one)
{
	return one->drifts.trials && !one->subject.drifting ? &one->drifts
							    : NULL;
}

static const struct proportion *detection(const struct calibration_case *one)
{
	return one->drifts.trials && one->subject.drifting ? &one->drifts
							   : NULL;
}

static const struct proportion *gap(const struct calibration_case *one)
{
	return one->gap.trials && !one->subject.drifting ? &one->gap : NULL;
}

/* All cases that speak to it together. */
static struct proportion pool(const struct calibration_case *cases,
			      size_t count, struct measure measure)
{
	size_t hits = 0, trials = 0;

	for (size_t i = 0; i < count; i++) {
		const struct proportion *share = measure.of(&cases[i]);

		hits += share ? share->hits : 0;
		trials += share ? share->trials : 0;
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

	return low > high ? low : high;
}

static void worst_goal(struct goals *goals,
		       const struct calibration_goal *wanted,
		       const struct calibration_case *cases, size_t count,
		       struct measure measure)
{
	const struct calibration_case *worst = NULL;

	for (size_t i = 0; i < count; i++) {
		const struct proportion *share = measure.of(&cases[i]);

		if (share &&
		    (!worst || distance(share, wanted) >
				       distance(measure.of(worst), wanted)))
			worst = &cases[i];
	}
	if (worst)
		decide_share(add_goal(goals, wanted->what, wanted->least,
				      wanted->most),
			     measure.of(worst), worst->subject.source);
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
			if (strcmp(cases[j].subject.family,
				   cases[i].subject.family) != 0 ||
			    !bracket(&cases[j]))
				continue;
			hits += cases[j].bracket.hits;
			trials += cases[j].bracket.trials;
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
	double widths[CASES_MAX], ratios[CASES_MAX];
	size_t width_count = 0, ratio_count = 0;

	for (size_t i = 0; i < count && i < CASES_MAX; i++) {
		if (bracket(&cases[i]) && cases[i].bracket_width.value > 0)
			widths[width_count++] = cases[i].bracket_width.value;
		if (gap(&cases[i]))
			ratios[ratio_count++] = cases[i].gap_width_ratio.value;
	}
	figure_goal(goals, "bracket width by the rate, median of sources",
		    width_limit(goals->symbols), widths, width_count);
	figure_goal(goals, "paired gap width by unpaired, median of sources",
		    0.7, ratios, ratio_count);
}

size_t calibration_goals(const struct calibration_case *cases, size_t count,
			 struct calibration_goal *list)
{
	struct goals goals = {list, 0, count ? cases[0].subject.symbols : 0};
	bool is_short = goals.symbols < 100000;
	const struct calibration_goal wanted[] = {
		{.what = "interval covers own mean, worst source",
		 .least = 0.93,
		 .most = 0.97},
		{.what = "Grassberger covers the rate, worst source",
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
	};

	worst_goal(&goals, &wanted[0], cases, count,
		   (struct measure){own_mean});
	/* A range is met where the error of the measurement reaches it. */
	if (goals.count)
		list[0].met = list[0].share.low <= list[0].most &&
			      list[0].share.high >= list[0].least;
	worst_goal(&goals, &wanted[1], cases, count,
		   (struct measure){true_rate});
	pooled_goal(&goals, &wanted[2], cases, count,
		    (struct measure){bracket});
	worst_goal(&goals, &wanted[3], cases, count,
		   (struct measure){finite_bracket});
	family_goal(&goals, cases, count);
	pooled_goal(&goals, &wanted[4], cases, count,
		    (struct measure){false_alarm});
	pooled_goal(&goals, &wanted[5], cases, count,
		    (struct measure){detection});
	pooled_goal(&goals, &wanted[6], cases, count, (struct measure){gap});
	width_goals(&goals, cases, count);
	return goals.count;
}
