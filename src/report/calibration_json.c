#include "report/calibration_report.h"

#include "report/json_value.h"
#include "report/stream.h"

#define SCHEMA 1
#define DIGITS 12

static json_t *share_object(const struct proportion *share)
{
	bool known = share->trials > 0;
	struct json_maker made;

	json_begin(&made);
	json_put_real(&made, "share", known, share->value);
	json_put_real(&made, "low", known, share->low);
	json_put_real(&made, "high", known, share->high);
	json_put_count(&made, "trials", share->trials);
	return json_done(&made);
}

static json_t *measured_object(const struct measured *measured)
{
	struct json_maker made;

	json_begin(&made);
	json_put_real(&made, "value", true, measured->value);
	json_put_real(&made, "error", true, measured->error);
	return json_done(&made);
}

static json_t *row_object(const struct calibration_row *row)
{
	struct json_maker made;

	json_begin(&made);
	json_put_text(&made, "method", row->name);
	json_put(&made, "bias", measured_object(&row->bias));
	json_put(&made, "rmse", measured_object(&row->rmse));
	json_put(&made, "width", measured_object(&row->width));
	json_put(&made, "covers_own_mean", share_object(&row->own_mean));
	json_put(&made, "covers_rate", share_object(&row->true_rate));
	json_put(&made, "told", share_object(&row->told));
	return json_done(&made);
}

static json_t *bracket_object(const struct calibration_case *one)
{
	struct json_maker made;

	json_begin(&made);
	json_put(&made, "covers", share_object(&one->bracket));
	json_put(&made, "told", share_object(&one->bracket_told));
	json_put(&made, "open_below", share_object(&one->open_below));
	json_put(&made, "not_calibrated", share_object(&one->not_calibrated));
	json_put(&made, "rate_above", share_object(&one->above));
	json_put(&made, "rate_below", share_object(&one->below));
	json_put(&made, "width_by_rate", measured_object(&one->bracket_width));
	return json_done(&made);
}

static json_t *some_brackets_object(const struct calibration_bracket *judged)
{
	struct json_maker made;

	json_begin(&made);
	json_put(&made, "covers", share_object(&judged->covers));
	json_put(&made, "open_below", share_object(&judged->open_below));
	json_put(&made, "rate_above", share_object(&judged->above));
	json_put(&made, "rate_below", share_object(&judged->below));
	json_put(&made, "width_by_rate", measured_object(&judged->width));
	return json_done(&made);
}

static json_t *rows_array(const struct calibration_case *one)
{
	json_t *rows = json_array();

	for (size_t i = 0; rows && i < one->row_count; i++) {
		if (json_array_append_new(rows, row_object(&one->rows[i])) !=
		    0) {
			json_decref(rows);
			return NULL;
		}
	}
	return rows;
}

static json_t *case_object(const struct calibration_case *one)
{
	const struct calibration_subject *subject = &one->subject;
	struct json_maker made;

	json_begin(&made);
	json_put_text(&made, "source", subject->source);
	json_put_text(&made, "family", subject->family);
	json_put_bool(&made, "finite_memory", subject->finite_memory);
	json_put_bool(&made, "hidden", subject->hidden);
	json_put_bool(&made, "drifting", subject->drifting);
	json_put_count(&made, "order", subject->order);
	json_put_count(&made, "symbols", subject->symbols);
	json_put_count(&made, "samples", one->runs);
	json_put_real(&made, "known_rate", true, subject->known_rate);
	json_put(&made, "estimates", rows_array(one));
	json_put(&made, "bracket", bracket_object(one));
	json_put(&made, "bracket_with_codes",
		 some_brackets_object(&one->with_codes));
	json_put(&made, "bracket_without_codes",
		 some_brackets_object(&one->without_codes));
	json_put(&made, "width_with_by_without",
		 measured_object(&one->codes_narrow));
	json_put(&made, "drift_flag", share_object(&one->drifts));
	json_put(&made, "gap_covers_mean", share_object(&one->gap));
	json_put(&made, "gap_width_by_unpaired",
		 measured_object(&one->gap_width_ratio));
	json_put_real(&made, "gap_width_by_need", one->gap_width_by_need > 0,
		      one->gap_width_by_need);
	return json_done(&made);
}

static json_t *goal_object(const struct calibration_goal *goal)
{
	struct json_maker made;

	json_begin(&made);
	json_put_text(&made, "what", goal->what);
	json_put_reason(&made, "decided_by", goal->who);
	json_put_count(&made, "symbols", goal->symbols);
	json_put_real(&made, "least", true, goal->least);
	json_put_real(&made, "most", true, goal->most);
	json_put_real(&made, "value", true, goal->value);
	json_put_real(&made, "low", goal->has_share, goal->share.low);
	json_put_real(&made, "high", goal->has_share, goal->share.high);
	json_put_bool(&made, "met", goal->met);
	return json_done(&made);
}

static bool append_goals(json_t *list, const struct calibration_case *cases,
			 size_t count)
{
	struct calibration_goal goals[CALIBRATION_GOALS];
	size_t goal_count = calibration_goals(cases, count, goals);

	for (size_t i = 0; i < goal_count; i++) {
		if (json_array_append_new(list, goal_object(&goals[i])) != 0)
			return false;
	}
	return true;
}

static json_t *goals_array(const struct calibration_report *report)
{
	json_t *list = json_array();
	size_t i = 0;

	while (list && i < report->case_count) {
		size_t same = calibration_run_of(report->cases + i,
						 report->case_count - i);

		if (!append_goals(list, report->cases + i, same)) {
			json_decref(list);
			return NULL;
		}
		i += same;
	}
	return list;
}

static json_t *cases_array(const struct calibration_report *report)
{
	json_t *list = json_array();

	for (size_t i = 0; list && i < report->case_count; i++) {
		if (json_array_append_new(
			    list, case_object(&report->cases[i])) != 0) {
			json_decref(list);
			return NULL;
		}
	}
	return list;
}

static enum status write_json(FILE *out,
			      const struct calibration_report *report,
			      struct reason *why)
{
	struct json_maker made;
	json_t *root;

	json_begin(&made);
	json_put_count(&made, "schema", SCHEMA);
	json_put_text(&made, "program", report->program);
	json_put_count(&made, "seed", report->seed);
	json_put_count(&made, "orders", report->orders);
	json_put(&made, "goals", goals_array(report));
	json_put(&made, "cases", cases_array(report));
	root = json_done(&made);
	if (!root)
		return report_finish(out, STATUS_NO_MEMORY, why);
	/* What the stream refuses it remembers, and is asked below. */
	(void)json_dumpf(root, out,
			 JSON_INDENT(2) | JSON_REAL_PRECISION(DIGITS));
	(void)fputc('\n', out);
	json_decref(root);
	return report_finish(out, STATUS_OK, why);
}

const struct calibration_format calibration_json = {
	.name = "json",
	.write = write_json,
};
