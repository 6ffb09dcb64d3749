#include "cli/commands.h"
#include "cli/show.h"

static enum exit_code report_run(const struct words *words)
{
	struct reason why = {""};
	const struct report_format *format;
	struct ledger *ledger;
	uint64_t id = 0;
	int failed = 0;
	enum status status;

	if (show_format(words, "text", &format, &why) != STATUS_OK ||
	    words_number(words, "survey", 1, INT64_MAX, &id, &why) !=
		    STATUS_OK ||
	    ledger_open(words->operands[0], LEDGER_READ, &ledger, &why) !=
		    STATUS_OK)
		return complain(words, &why);
	status = show_survey(ledger, (int64_t)id, format,
			     words_get(words, "out"), &failed, &why);
	ledger_close(ledger);
	if (status != STATUS_OK)
		return complain(words, &why);
	return EXIT_DONE;
}

static const struct option_row options[] = {
	{"as", "FORMAT", "text (the default), table, markdown, csv or json"},
	{"out", "FILE", "write there instead of standard output"},
	{"survey", "ID", "this survey of the ledger; the newest by default"},
	{NULL, NULL, NULL},
};

const struct command command_report = {
	.name = "report",
	.operands = "LEDGER",
	.operands_min = 1,
	.operands_max = 1,
	.summary = "writes what a ledger holds as a report",
	.description =
		"Everything shown is recomputed from the facts in the ledger:\n"
		"nothing is measured again. The JSON report is the contract\n"
		"for other programs: keys are added, never renamed.",
	.examples = "  ratefloor report starter.ledger --as markdown --out "
		    "review.md\n"
		    "  ratefloor report starter.ledger --as json | jq "
		    "'.corpora[].floor'",
	.options = options,
	.run = report_run,
};
