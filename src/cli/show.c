#include "cli/show.h"

#include "cli/output.h"

static MUST_USE enum status write_report(const struct analysis *analysis,
					 const struct report_format *format,
					 const char *path, struct reason *why)
{
	struct output output;

	TRY(output_open(&output, path, why));
	return output_end(&output, format->write(output.file, analysis, why),
			  why);
}

enum status show_survey(struct ledger *ledger, int64_t id,
			const struct report_format *format, const char *path,
			int *failed, struct reason *why)
{
	struct survey survey = {0};
	struct analysis analysis;
	enum status status;

	TRY(ledger_read(ledger, id, &survey, why));
	status = analysis_init(&analysis, &survey, &analysis_usual, why);
	if (status == STATUS_OK) {
		status = write_report(&analysis, format, path, why);
		if (status == STATUS_OK)
			*failed = analysis_failed(&analysis);
		analysis_release(&analysis);
	}
	survey_release(&survey);
	return status;
}

enum status show_format(const struct words *words, const char *usual,
			const struct report_format **format, struct reason *why)
{
	const char *name = words_get(words, "as");
	char all[128] = "";
	size_t used = 0;

	*format = report_find(name ? name : usual);
	if (*format)
		return STATUS_OK;
	for (size_t i = 0; report_formats[i] && used < sizeof(all); i++)
		used += (size_t)snprintf(all + used, sizeof(all) - used, " %s",
					 report_formats[i]->name);
	return reason_give(why, STATUS_BAD_USAGE,
			   "--as %s: there is no such format; there are:%s",
			   name, all);
}
