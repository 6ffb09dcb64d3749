/* Gate and trend: does every allocation that fails leave things clean? */
#include "faults/inject.h"

#include "verdict/gate.h"
#include "verdict/trend.h"

#include "report/baseline_report.h"
#include "support/gate_nights.h"
#include "support/near.h"
#include "support/sample_survey.h"

#include <stdlib.h>
#include <string.h>

#define MOST 200

static struct baseline pin;

static enum status read_figures(void *context)
{
	const struct analysis *analysis = context;
	struct baseline got;
	struct reason why = {""};
	enum status status = baseline_init(&got, analysis, &why);

	if (status == STATUS_OK)
		baseline_release(&got);
	else
		assert_non_null(strstr(why.text, "out of memory"));
	return status;
}

static void figures_of_a_survey(void **state)
{
	struct survey survey;
	struct analysis analysis;

	(void)state;
	sample_survey(&survey);
	assert_int_equal(
		analysis_init(&analysis, &survey, &analysis_usual, NULL),
		STATUS_OK);
	inject_each(read_figures, &analysis, MOST);
	analysis_release(&analysis);
	survey_release(&survey);
}

static enum status parse(void *context)
{
	const char *text = context;
	struct baseline got;
	struct reason why = {""};
	enum status status =
		baseline_parse(&got, text, strlen(text), "b.json", &why);

	if (status == STATUS_OK)
		baseline_release(&got);
	else
		assert_non_null(strstr(why.text, "out of memory"));
	return status;
}

static void parsing(void **state)
{
	char *text = NULL;
	size_t length = 0;
	FILE *out = open_memstream(&text, &length);

	(void)state;
	assert_non_null(out);
	assert_int_equal(baseline_write(out, &pin, NULL), STATUS_OK);
	assert_int_equal(fclose(out), 0);
	inject_each(parse, text, MOST);
	free(text);
}

static enum status judge(void *context)
{
	struct gate gate;
	struct reason why = {""};
	enum status status = gate_init(&gate, &pin, context, &why);

	if (status == STATUS_OK)
		gate_release(&gate);
	else
		assert_non_null(strstr(why.text, "out of memory"));
	return status;
}

static void judging(void **state)
{
	(void)state;
	inject_each(judge, &pin, MOST);
}

static enum status follow(void *context)
{
	struct trend trend = {.nights = NULL};
	enum status status = STATUS_OK;

	for (unsigned i = 0; status == STATUS_OK && i < 20; i++) {
		/* Every night is another corpus to it: events, too. */
		(void)snprintf(gate_night_corpus(context, "frames")->sha256, 65,
			       "%u", i);
		status = trend_add(&trend, context);
	}
	if (status == STATUS_OK)
		status = trend_find(&trend);
	trend_release(&trend);
	return status;
}

static void following(void **state)
{
	(void)state;
	inject_each(follow, &pin, MOST);
}

static int make_pin(void **state)
{
	(void)state;
	gate_night_init(&pin);
	return 0;
}

static int drop_pin(void **state)
{
	(void)state;
	baseline_release(&pin);
	return 0;
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(figures_of_a_survey),
		cmocka_unit_test(parsing),
		cmocka_unit_test(judging),
		cmocka_unit_test(following),
	};

	return cmocka_run_group_tests(tests, make_pin, drop_pin);
}
