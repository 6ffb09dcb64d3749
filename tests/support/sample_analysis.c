#include "support/sample_analysis.h"

#include "base/memory.h"
#include "report/report.h"
#include "support/near.h"
#include "support/sample_survey.h"

#include <string.h>

static const struct interval refused = {
	.effective_blocks = 5.25,
	.block_length = 19,
	.reason = "only 5.2 effective blocks where 8 are needed",
};

static struct interval between(double low, double high)
{
	return (struct interval){.known = true,
				 .low = low,
				 .high = high,
				 .effective_blocks = 61.5,
				 .block_length = 2};
}

static void fill_rows(struct sample_analysis *sample,
		      const struct corpus_fact *fact)
{
	sample->orders[0] =
		(struct order_row){1,    2.1234567, 2.1234567, 2.125, 2.1251,
				   true, 2.2,       0.99987,   801,   true};
	sample->orders[1] = (struct order_row){.order = 2,
					       .H = 3.75,
					       .h_plugin = 1.6265433,
					       .h_corrected = 1.7000001,
					       .h_cwj = 1.71,
					       .coverage = 0.81234,
					       .distinct = 123456};
	for (size_t i = 0; i < 3; i++)
		sample->estimates[i] = (struct estimate_row){
			.fact = &fact->methods[i], .leans = "none"};
	sample->estimates[0].known = true;
	sample->estimates[0].bits_per_symbol = 1.7000001;
	sample->estimates[0].order = 1;
	sample->estimates[0].interval = refused;
	sample->estimates[1].leans = "above";
	sample->estimates[2].known = true;
	sample->estimates[2].leans = "above";
	sample->estimates[2].is_code = true;
	sample->estimates[2].bits_per_symbol = 1.5234;
	sample->estimates[2].interval = between(1.5011, 1.5462);
}

static void fill_cells(struct sample_analysis *sample,
		       const struct corpus_fact *fact)
{
	for (size_t i = 0; i < 3; i++)
		sample->cells[i] = (struct cell_row){.fact = &fact->cells[i]};
	sample->cells[0] = (struct cell_row){
		.fact = &fact->cells[0],
		.known = true,
		.bits_per_symbol = 1.9021,
		.payload_bits_per_symbol = 1.9019,
		.interval = between(1.8877, 1.9166),
		.gap = 0.3787,
		.gap_interval = between(0.3701, 0.3873),
		.has_percent = true,
		.gap_percent = 24.85887,
		.efficiency = 0.80091,
		.flush_cost = 0.0213,
		.effective_order = 1,
		.has_record = true,
		.bits_per_record = 22.8252,
		.stack = {.known = true,
			  .floor = 1.5234,
			  .restart = 0.25,
			  .family = 0.1385,
			  .effort = -0.01,
			  .framing = 0.0002,
			  .best_level = "9e",
			  .restart_interval = between(0.2401, 0.2599),
			  .family_interval = between(0.1301, 0.1469),
			  .effort_interval = refused,
			  .framing_interval = between(0.0002, 0.0002),
			  .has_storage = true,
			  .storage = 0.0005},
		.encode_mb_per_s = 3.517,
		.decode_mb_per_s = 67.11,
	};
	sample->cells[1] = (struct cell_row){
		.fact = &fact->cells[1],
		.known = true,
		.bits_per_symbol = 2.385,
		.payload_bits_per_symbol = 2.385,
		.interval = refused,
		.gap = 0.8616,
		.gap_interval = refused,
		.efficiency = 0.63874,
		.dictionary = {.has = true,
			       .known = true,
			       .own = 0.21,
			       .won = -0.0315,
			       .won_interval = between(-0.0401, -0.0229),
			       .warm_known = true,
			       .warm = 1.387,
			       .cold = 2.574},
	};
}

void sample_analysis_init(struct sample_analysis *sample)
{
	struct corpus_view *view = &sample->views[0];

	memset(sample, 0, sizeof(*sample));
	sample_survey(&sample->survey);
	sample->survey.id = 3;
	sample->survey.seed = 7;
	sample->survey.finished = true;
	sample->analysis = (struct analysis){
		.survey = &sample->survey,
		.corpora = sample->views,
		.corpus_count = 2,
	};
	fill_rows(sample, &sample->survey.corpora[0]);
	fill_cells(sample, &sample->survey.corpora[0]);
	*view = (struct corpus_view){
		.fact = &sample->survey.corpora[0],
		.orders = sample->orders,
		.order_count = 2,
		.trusted_order = 1,
		.trust_limit = "at order 2 coverage is 81.2%, 95% is needed",
		.estimates = sample->estimates,
		.estimate_count = 3,
		.cells = sample->cells,
		.cell_count = 3,
	};
	view->floor = (struct floor_row){
		.known = true,
		.held_by = "mix",
		.rows = 5,
		.bits_per_symbol = 1.5234,
		.interval = between(1.5011, 1.5462),
	};
	view->bracket = (struct bracket_row){
		.known = true,
		.order = 1,
		.low = 1.4321,
		.high = 1.5432,
		.upper_by = "mix",
	};
	sample->views[1] = (struct corpus_view){
		.fact = &sample->survey.corpora[1],
		.bracket = {.reason = "the corpus was skipped"},
	};
}

void sample_analysis_release(struct sample_analysis *sample)
{
	survey_release(&sample->survey);
}

char *sample_report(const struct report_format *format,
		    const struct analysis *analysis)
{
	FILE *file = tmpfile();
	struct reason why = {""};
	char *text = NULL;
	long length;

	assert_non_null(file);
	assert_int_equal(format->write(file, analysis, &why), STATUS_OK);
	length = ftell(file);
	assert_true(length > 0);
	rewind(file);
	assert_int_equal(memory_new((size_t)length + 1, 1, &text), STATUS_OK);
	assert_int_equal(fread(text, 1, (size_t)length, file), length);
	text[length] = '\0';
	(void)fclose(file);
	return text;
}
