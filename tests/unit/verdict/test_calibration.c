/* Do the statistics of a calibration follow from its trials? By hand. */
#include "verdict/calibration.h"

#include "support/near.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

static const struct calibration_subject subject = {
	.source = "chain",
	.family = "chain",
	.finite_memory = true,
	.order = 2,
	.symbols = 10000,
	.known_rate = 2,
};

/* One row with an interval of full width 1 about it. */
static struct trial trial_of(double estimate)
{
	struct trial trial = {
		.row_count = 1,
		.drift_known = true,
		.bracket_known = true,
		.bracket_low = estimate - .75,
		.bracket_high = estimate + .25,
		.gap_known = true,
		.gap = estimate,
		.gap_low = estimate - .6,
		.gap_high = estimate + .4,
		.unpaired_width = 4,
	};

	(void)snprintf(trial.rows[0].name, TRIAL_NAME_BYTES, "grassberger");
	trial.rows[0].known = true;
	trial.rows[0].bits_per_symbol = estimate;
	trial.rows[0].has_interval = true;
	trial.rows[0].low = estimate - .5;
	trial.rows[0].high = estimate + .5;
	return trial;
}

/* Estimates 1, 2, 3, 4 of a rate of 2: mean 2.5, bias .5, mean square 1.5. */
static void errors_and_coverage(void **state)
{
	struct trial trials[4];
	struct calibration_case made;
	const struct calibration_row *row = &made.rows[0];

	(void)state;
	for (unsigned i = 0; i < 4; i++) {
		trials[i] = trial_of(i + 1);
		trials[i].trusted_order = i;
	}
	assert_int_equal(calibration_judge(&subject, trials, 4, &made),
			 STATUS_OK);
	assert_int_equal(made.row_count, 1);
	assert_string_equal(row->name, "grassberger");
	assert_near(row->bias.value, .5, 1e-12);
	/* Variance 5/3 of one, over 4. */
	assert_near(row->bias.error, sqrt(5.0 / 12), 1e-12);
	assert_near(row->rmse.value, sqrt(1.5), 1e-12);
	/* Squares 1, 0, 1, 4: variance 4.5 - 2.25 = 2.25 over 4, root .75. */
	assert_near(row->rmse.error, .75 / (2 * sqrt(1.5)), 1e-12);
	/* 2.5 lies in those about 2 and 3; 2 in the one about 2 alone. */
	assert_int_equal(row->own_mean.hits, 2);
	assert_int_equal(row->true_rate.hits, 1);
	/* Order 2 is trusted in the last two runs, which miss. */
	assert_int_equal(row->trusted_rate.trials, 2);
	assert_int_equal(row->trusted_rate.hits, 0);
	assert_near(row->width.value, 1, 1e-12);
	assert_near(row->width.error, 0, 1e-12);
	/* 2 lies in [1.25,2.25] and [2.25,3.25] is above it. */
	assert_int_equal(made.bracket.hits, 1);
	assert_int_equal(made.below.hits, 2);
	assert_int_equal(made.above.hits, 1);
	assert_near(made.bracket_width.value, .5, 1e-12);
	/* The mean gap 2.5 is in [1.4,2.4]? no; [2.4,3.4] yes. */
	assert_int_equal(made.gap.hits, 1);
	assert_near(made.gap_width_ratio.value, .25, 1e-12);
}

/* Where a row declined, its empty place is no estimate of 0. */
static void an_unknown_row_is_left_out(void **state)
{
	struct trial trials[3] = {trial_of(1), trial_of(2), trial_of(3)};
	struct calibration_case made;

	(void)state;
	trials[2].rows[0] = (struct trial_row){.name = "grassberger"};
	assert_int_equal(calibration_judge(&subject, trials, 3, &made),
			 STATUS_OK);
	assert_near(made.rows[0].bias.value, -.5, 1e-12);
	assert_near(made.rows[0].rmse.value, sqrt(.5), 1e-12);
	assert_int_equal(made.rows[0].told.hits, 2);
	assert_int_equal(made.rows[0].own_mean.trials, 2);
}

static void what_was_not_told_does_not_count(void **state)
{
	struct trial trials[5];
	struct calibration_case made;

	(void)state;
	for (int i = 0; i < 5; i++) {
		trials[i] = trial_of(2);
		trials[i].drifts = i < 2;
	}
	trials[0].rows[0].has_interval = false;
	trials[1].bracket_known = false;
	trials[2].gap_known = false;
	trials[3].drift_known = false;
	trials[4].open_below = true;
	trials[4].bracket_low = 0;
	assert_int_equal(calibration_judge(&subject, trials, 5, &made),
			 STATUS_OK);
	assert_int_equal(made.rows[0].told.hits, 4);
	assert_int_equal(made.rows[0].own_mean.trials, 4);
	assert_int_equal(made.bracket.trials, 4);
	assert_int_equal(made.bracket_told.hits, 4);
	assert_int_equal(made.open_below.hits, 1);
	assert_int_equal(made.gap.trials, 4);
	assert_int_equal(made.drifts.hits, 2);
	assert_int_equal(made.drifts.trials, 4);
	/* Open brackets have no width. */
	assert_near(made.bracket_width.value, .5, 1e-12);
}

static struct calibration_case case_of(const char *source, const char *family,
				       size_t hits, size_t trials)
{
	static const char *const rows[] = {"plug-in", "grassberger",
					   "crossfit"};
	struct calibration_case made = {
		.subject = subject, .runs = trials, .row_count = 3};

	(void)snprintf(made.subject.source, CALIBRATION_NAME_BYTES, "%s",
		       source);
	(void)snprintf(made.subject.family, CALIBRATION_NAME_BYTES, "%s",
		       family);
	made.bracket = proportion_of(hits, trials, .99);
	for (size_t r = 0; r < 3; r++) {
		struct calibration_row *row = &made.rows[r];

		(void)snprintf(row->name, TRIAL_NAME_BYTES, "%s", rows[r]);
		row->own_mean = made.bracket;
		row->true_rate = made.bracket;
		row->trusted_rate = made.bracket;
	}
	made.bracket_width.value = .05;
	made.drifts = proportion_of(trials - hits, trials, .99);
	made.gap = made.bracket;
	made.gap_width_ratio.value = .5;
	return made;
}

static const struct calibration_goal *
goal_named(const struct calibration_goal *goals, size_t count,
	   const char *beginning)
{
	for (size_t i = 0; i < count; i++) {
		if (strncmp(goals[i].what, beginning, strlen(beginning)) == 0)
			return &goals[i];
	}
	fail_msg("no goal %s", beginning);
	return NULL;
}

static void goals_name_who_decides(void **state)
{
	struct calibration_case cases[3] = {
		case_of("iid", "i.i.d.", 950, 1000),
		case_of("chain", "chain", 910, 1000),
		case_of("regimes", "regime", 400, 1000),
	};
	struct calibration_goal goals[CALIBRATION_GOALS];
	const struct calibration_goal *goal;
	size_t count;

	(void)state;
	cases[2].subject.drifting = true;
	cases[2].subject.finite_memory = false;
	count = calibration_goals(cases, 3, goals);
	assert_true(count <= CALIBRATION_GOALS);
	/* .910 of 1000: Wilson 99% up to .931, so that .93 is not refuted. */
	goal = goal_named(goals, count, "interval covers own mean");
	assert_string_equal(goal->who, "chain");
	assert_true(goal->met && goal->share.high > .93 && goal->value < .93);
	/* 1860 of 2000 together meet .92; the worst, .91, may be chance. */
	goal = goal_named(goals, count, "Grassberger covers");
	assert_true(goal->met);
	assert_near(goal->value, .93, 1e-12);
	goal = goal_named(goals, count, "the same where trusted");
	assert_string_equal(goal->who, "chain");
	assert_true(goal->met && goal->value < .92 && goal->share.high > .92);
	/* 1860 of 2000: the drifting source is left out. */
	goal = goal_named(goals, count, "bracket covers, all");
	assert_int_equal(goal->share.trials, 2000);
	assert_true(goal->met);
	goal = goal_named(goals, count, "bracket covers, worst finite");
	assert_string_equal(goal->who, "chain");
	assert_true(goal->met);
	goal = goal_named(goals, count, "bracket covers, worst family");
	assert_near(goal->value, .91, 1e-12);
	goal = goal_named(goals, count, "drift flagged");
	assert_near(goal->value, .07, 1e-12);
	assert_false(goal->met);
	goal = goal_named(goals, count, "drift found");
	assert_near(goal->value, .6, 1e-12);
	assert_false(goal->met);
	goal = goal_named(goals, count, "bracket width");
	assert_true(goal->met && !goal->has_share);
	goal = goal_named(goals, count, "paired gap width");
	assert_near(goal->value, .5, 1e-12);
}

static bool has_goal(const struct calibration_goal *goals, size_t count,
		     const char *part)
{
	for (size_t i = 0; i < count; i++) {
		if (strstr(goals[i].what, part))
			return true;
	}
	return false;
}

/* .89 of 1000: Wilson 99% up to .913, so .92 is refuted. */
static void a_worst_source_that_is_no_chance_fails(void **state)
{
	struct calibration_case one = case_of("chain", "chain", 890, 1000);
	struct calibration_goal goals[CALIBRATION_GOALS];
	size_t count = calibration_goals(&one, 1, goals);

	(void)state;
	assert_false(goal_named(goals, count, "the same where trusted")->met);
	/* Nothing is said of the worst by a few runs. */
	one = case_of("chain", "chain", 10, 12);
	count = calibration_goals(&one, 1, goals);
	assert_false(has_goal(goals, count, "worst"));
	assert_true(has_goal(goals, count, "all together"));
}

/*
 * Of five samples the codes ran on three. Without them [1.25,2.25]; with them
 * upper edges 2.05, 1.95 and an open one: widths .8, .7; the rate 2 is missed
 * by one. Half of the rate each: .4 and .35, median .375; narrower by .75.
 */
static void brackets_with_codes_are_judged_apart(void **state)
{
	struct trial trials[5];
	struct calibration_case made;

	(void)state;
	for (int i = 0; i < 5; i++) {
		trials[i] = trial_of(2);
		trials[i].codes_ran = i < 3;
	}
	trials[0].with_codes = (struct trial_bracket){true, false, 1.25, 2.05};
	trials[1].with_codes = (struct trial_bracket){true, false, 1.25, 1.95};
	trials[2].with_codes = (struct trial_bracket){true, true, 0, 2.25};
	trials[3].rows[0].skipped = true;
	trials[3].rows[0].known = trials[3].rows[0].has_interval = false;
	assert_int_equal(calibration_judge(&subject, trials, 5, &made),
			 STATUS_OK);
	assert_int_equal(made.with_codes.covers.trials, 3);
	assert_int_equal(made.with_codes.covers.hits, 2);
	assert_int_equal(made.with_codes.above.hits, 1);
	assert_int_equal(made.with_codes.open_below.hits, 1);
	assert_near(made.with_codes.width.value, .375, 1e-12);
	assert_int_equal(made.without_codes.covers.trials, 3);
	assert_int_equal(made.without_codes.covers.hits, 3);
	assert_near(made.without_codes.width.value, .5, 1e-12);
	assert_near(made.codes_narrow.value, .75, 1e-12);
	assert_int_equal(made.bracket.trials, 5);
	/* A row that was not asked is not one that has nothing to tell. */
	assert_int_equal(made.rows[0].told.trials, 4);
	assert_int_equal(made.rows[0].told.hits, 4);
}

/* Gaps 1, 2, 3 of standard deviation 1 and width 1: 1 of 3.92 needed. */
static void widths_are_set_against_the_scatter(void **state)
{
	struct trial trials[3] = {trial_of(1), trial_of(2), trial_of(3)};
	struct calibration_case made;

	(void)state;
	assert_int_equal(calibration_judge(&subject, trials, 3, &made),
			 STATUS_OK);
	assert_near(made.gap_width_by_need, 1 / 3.919928, 1e-6);
}

static void no_cases_no_goals(void **state)
{
	struct calibration_goal goals[CALIBRATION_GOALS];
	struct calibration_case empty = {.subject = subject};

	(void)state;
	assert_int_equal(calibration_goals(NULL, 0, goals), 0);
	assert_int_equal(calibration_goals(&empty, 1, goals), 0);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(errors_and_coverage),
		cmocka_unit_test(an_unknown_row_is_left_out),
		cmocka_unit_test(what_was_not_told_does_not_count),
		cmocka_unit_test(goals_name_who_decides),
		cmocka_unit_test(a_worst_source_that_is_no_chance_fails),
		cmocka_unit_test(brackets_with_codes_are_judged_apart),
		cmocka_unit_test(widths_are_set_against_the_scatter),
		cmocka_unit_test(no_cases_no_goals),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
