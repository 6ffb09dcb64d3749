#include "cli/commands.h"
#include "ledger/ledger.h"

#include <stdio.h>

static enum exit_code merge_run(const struct words *words)
{
	struct reason why = {""};
	struct ledger *ledger;
	int64_t id;
	enum status status;

	if (ledger_open(words->operands[0], LEDGER_WRITE, &ledger, &why) !=
	    STATUS_OK)
		return complain(words, &why);
	status = ledger_merge(ledger, words->operands + 1,
			      words->operand_count - 1, &id, &why);
	ledger_close(ledger);
	if (status != STATUS_OK)
		return complain(words, &why);
	(void)printf("survey %lld of %s holds %zu parts\n", (long long)id,
		     words->operands[0], words->operand_count - 1);
	return EXIT_DONE;
}

static const struct option_row options[] = {
	{NULL, NULL, NULL},
};

const struct command command_merge = {
	.name = "merge",
	.operands = "LEDGER PART...",
	.operands_min = 2,
	.operands_max = WORDS_VALUES_MAX,
	.summary = "joins the ledgers of parts into one survey",
	.description =
		"PART... are ledgers written by survey --part I/N, on one\n"
		"machine or several. Their newest surveys become one survey "
		"of\n"
		"LEDGER. Parts of different sets, seeds or programs, and "
		"cells\n"
		"that two parts hold with different facts, are refused.",
	.examples = "  ratefloor survey my.set --part 1/2 --ledger one.ledger\n"
		    "  ratefloor survey my.set --part 2/2 --ledger two.ledger\n"
		    "  ratefloor merge both.ledger one.ledger two.ledger",
	.options = options,
	.run = merge_run,
};
