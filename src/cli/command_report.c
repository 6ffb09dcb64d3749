#include "cli/commands.h"
#include "cli/show.h"
#include "cli/show_trend.h"

static enum exit_code trend_run(const struct words *words)
{
	struct reason why = {""};
	struct ledger *ledger;
	enum status status;

	if (words_get(words, "survey")) {
		(void)reason_give(&why, STATUS_BAD_USAGE,
				  "--trend is over all surveys: leave out "
				  "--survey");
		return complain(words, &why);
	}
	if (ledger_open(words->operands[0], LEDGER_READ, &ledger, &why) !=
	    STATUS_OK)
		return complain(words, &why);
	status = show_trend(ledger, words_get(words, "as"),
			    words_get(words, "out"), &why);
	ledger_close(ledger);
	return status == STATUS_OK ? EXIT_DONE : complain(words, &why);
}

static enum exit_code report_run(const struct words *words)
{
	struct reason why = {""};
	const struct report_format *format;
	struct ledger *ledger;
	uint64_t id = 0;
	int failed = 0;
	enum status status;

	if (words_get(words, "trend"))
		return trend_run(words);
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
	{"trend", NULL, "what changed over all surveys, and on which night"},
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
		"for other programs: keys are added, never renamed.\n"
		"\n"
		"--trend reads all finished surveys of the newest one's set:\n"
		"fixed corpora are compared exactly from night to night, and\n"
		"on rolling ones a sum of standardised differences to the\n"
		"yardstick (CUSUM, one false alarm in 1000 nights over all\n"
		"cells) names the night on which a shift began.",
	.examples = "  ratefloor report starter.ledger --as markdown --out "
		    "review.md\n"
		    "  ratefloor report nights.ledger --trend\n"
		    "  ratefloor report starter.ledger --as json | jq "
		    "'.corpora[].floor'",
	.options = options,
	.run = report_run,
};
