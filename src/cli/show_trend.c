#include "cli/show_trend.h"

#include <string.h>

#include "base/memory.h"
#include "cli/nights.h"
#include "cli/output.h"
#include "report/trend_report.h"

static MUST_USE enum status add_night(struct ledger *ledger, int64_t id,
				      const char *set_name, struct trend *trend,
				      struct reason *why)
{
	struct night night = {.finished = false};
	enum status status;

	TRY(night_read(ledger, id, &night, why));
	status = night.finished && strcmp(night.figures.set_name, set_name) == 0
			 ? trend_add(trend, &night.figures)
			 : STATUS_OK;
	night_release(&night);
	return status;
}

static MUST_USE enum status collect(struct ledger *ledger, struct trend *trend,
				    struct reason *why)
{
	struct survey newest = {0};
	char set_name[LEDGER_NAME_BYTES];
	int64_t *ids;
	size_t count;
	enum status status = STATUS_OK;

	TRY(ledger_read(ledger, 0, &newest, why));
	memcpy(set_name, newest.set_name, sizeof(set_name));
	survey_release(&newest);
	TRY(ledger_list(ledger, &ids, &count, why));
	for (size_t i = 0; status == STATUS_OK && i < count; i++)
		status = add_night(ledger, ids[i], set_name, trend, why);
	memory_free(ids);
	return status == STATUS_OK ? trend_find(trend) : status;
}

static MUST_USE enum status write_trend(const struct trend *trend,
					const struct trend_format *format,
					const char *path, struct reason *why)
{
	struct output output;

	TRY(output_open(&output, path, why));
	return output_end(&output, format->write(output.file, trend, why), why);
}

enum status show_trend(struct ledger *ledger, const char *format,
		       const char *path, struct reason *why)
{
	const struct trend_format *chosen =
		trend_format_find(format ? format : "text");
	struct trend trend = {.nights = NULL};
	enum status status;

	if (!chosen)
		return reason_give(why, STATUS_BAD_USAGE,
				   "--as %s: trends come as text, markdown, "
				   "csv or json",
				   format);
	status = collect(ledger, &trend, why);
	if (status == STATUS_NO_MEMORY)
		(void)reason_give(why, status, "out of memory");
	if (status == STATUS_OK)
		status = write_trend(&trend, chosen, path, why);
	trend_release(&trend);
	return status;
}
