/* Do the reports of a calibration hold its figures in every format? */
#include "report/calibration_report.h"

#include "support/near.h"

#include <jansson.h>
#include <stdlib.h>
#include <string.h>

static struct calibration_case case_of(uint64_t symbols, size_t hits)
{
	struct calibration_case made = {
		.subject = {.source = "two-state",
			    .family = "chain",
			    .finite_memory = true,
			    .order = 2,
			    .symbols = symbols,
			    .known_rate = .57206942},
		.runs = 400,
		.row_count = 1,
	};

	(void)snprintf(made.rows[0].name, TRIAL_NAME_BYTES, "crossfit");
	made.rows[0].bias = (struct measured){.0057206942, .0028603471};
	made.rows[0].own_mean = proportion_of(hits, 400, .99);
	made.rows[0].told = proportion_of(400, 400, .99);
	made.bracket = proportion_of(hits, 400, .99);
	made.bracket_width.value = .0875;
	return made;
}

/* The whole report as a text of the heap. */
static char *written(const char *format, size_t case_count)
{
	const struct calibration_case cases[] = {case_of(10000, 380),
						 case_of(100000, 390)};
	const struct calibration_report report = {
		.program = "ratefloor 0.1.0",
		.seed = 7,
		.orders = 16,
		.cases = cases,
		.case_count = case_count,
	};
	char *text = NULL;
	size_t length;
	FILE *out = open_memstream(&text, &length);

	assert_non_null(out);
	assert_int_equal(
		calibration_format_find(format)->write(out, &report, NULL),
		STATUS_OK);
	(void)fclose(out);
	return text;
}

static void paper_names_lengths_and_figures(void **state)
{
	char *text = written("text", 2);

	(void)state;
	assert_non_null(strstr(text, "10,000 symbols, 400 samples a source"));
	assert_non_null(strstr(text, "100,000 symbols"));
	assert_non_null(strstr(text, "seed 7"));
	/* Bias and its error in % of the rate, coverage .95, width 8.75%. */
	assert_non_null(strstr(text, "+1.000"));
	assert_non_null(strstr(text, "0.500"));
	assert_non_null(strstr(text, "0.950"));
	assert_non_null(strstr(text, "8.75"));
	/* Nothing was said of slow codes and gaps. */
	assert_null(strstr(text, "narrower"));
	assert_null(strstr(text, "unpaired"));
	free(text);
	text = written("markdown", 1);
	assert_non_null(strstr(text, "# Calibration"));
	assert_non_null(strstr(text, "| two-state"));
	free(text);
}

static void json_holds_goals_and_cases(void **state)
{
	char *text = written("json", 2);
	json_t *root = json_loads(text, 0, NULL);
	json_t *one;

	(void)state;
	assert_non_null(root);
	assert_int_equal(json_integer_value(json_object_get(root, "seed")), 7);
	assert_int_equal(json_array_size(json_object_get(root, "cases")), 2);
	one = json_array_get(json_object_get(root, "cases"), 0);
	assert_near(json_real_value(json_object_get(one, "known_rate")),
		    .57206942, 1e-11);
	one = json_object_get(json_object_get(one, "bracket"), "covers");
	assert_near(json_real_value(json_object_get(one, "share")), .95, 1e-11);
	/* Coverage together, finite, by family, and the width: twice. */
	assert_int_equal(json_array_size(json_object_get(root, "goals")), 8);
	json_decref(root);
	free(text);
}

static void a_full_stream_is_told(void **state)
{
	const struct calibration_case one = case_of(10000, 380);
	const struct calibration_report report = {
		.program = "ratefloor 0.1.0", .cases = &one, .case_count = 1};
	struct reason why = {""};

	(void)state;
	for (size_t i = 0; calibration_formats[i]; i++) {
		FILE *out = fopen("/dev/full", "w");

		assert_non_null(out);
		assert_int_equal(
			calibration_formats[i]->write(out, &report, &why),
			STATUS_IO);
		(void)fclose(out);
	}
	assert_null(calibration_format_find("csv"));
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(paper_names_lengths_and_figures),
		cmocka_unit_test(json_holds_goals_and_cases),
		cmocka_unit_test(a_full_stream_is_told),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
