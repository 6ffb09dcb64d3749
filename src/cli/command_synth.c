#include "cli/commands.h"
#include "cli/made.h"
#include "source/source.h"

#include <stdio.h>

static void show_rate(FILE *out, const struct source *source)
{
	(void)fprintf(out, "%-14s %s %.9f bits per %s", source->name,
		      source->rate_exact ? "exactly" : "at most",
		      source->bits_per_symbol(), source->symbols);
}

static enum exit_code list_sources(void)
{
	for (size_t i = 0; sources[i]; i++) {
		show_rate(stdout, sources[i]);
		(void)printf("  %s\n", sources[i]->summary);
	}
	return EXIT_DONE;
}

static enum exit_code synth_run(const struct words *words)
{
	struct reason why = {""};
	uint64_t symbols = 0, seed = 1;
	const char *path = words_get(words, "out");
	double rate;

	if (words_get(words, "list"))
		return list_sources();
	if (!words->operand_count)
		(void)reason_give(&why, STATUS_BAD_USAGE,
				  "wants the name of a source; --list shows "
				  "them");
	if (!words->operand_count ||
	    words_number(words, "symbols", 1, UINT64_C(1) << 40, &symbols,
			 &why) != STATUS_OK ||
	    words_number(words, "seed", 0, UINT64_MAX, &seed, &why) !=
		    STATUS_OK ||
	    made_write(words->operands[0], symbols, seed, path, &rate, &why) !=
		    STATUS_OK)
		return complain(words, &why);
	show_rate(stderr, source_find(words->operands[0]));
	(void)fprintf(stderr, "\n");
	return EXIT_DONE;
}

static const struct option_row options[] = {
	{"symbols", "N", "how many; each source has its own default"},
	{"seed", "S", "equal seeds give equal bytes everywhere; 1 by default"},
	{"out", "FILE", "write there instead of standard output"},
	{"list", NULL, "show the sources with their exact rates"},
	{NULL, NULL, NULL},
};

const struct command command_synth = {
	.name = "synth",
	.operands = "SOURCE",
	.operands_max = 1,
	.summary = "writes a corpus of known entropy rate and says the rate",
	.description =
		"The bytes go to --out or standard output, the rate to "
		"standard\n"
		"error. The rate is exact: each source is worked out with its\n"
		"formula beside its generator. The scenario, Marrow Bay, is "
		"an\n"
		"invented estuary observatory.",
	.examples = "  ratefloor synth --list\n"
		    "  ratefloor synth gauge-frames --symbols 1000000 --seed 7 "
		    "--out frames.bin",
	.options = options,
	.run = synth_run,
};
