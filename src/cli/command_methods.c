#include "cli/commands.h"
#include "codec/codec.h"
#include "estimate/estimator.h"

#include <stdio.h>

static const char *leaning_words(const struct estimator *row)
{
	if (row->is_code)
		return "a code: above the rate";
	if (row->leans == LEANS_ABOVE)
		return "leans above the rate";
	if (row->leans == LEANS_UNKNOWN)
		return "either side: diagnostic";
	return "leans to neither side";
}

static void print_choices(const struct codec *row)
{
	if (row->containers) {
		(void)printf("  %-10s containers", "");
		for (size_t i = 0; row->containers[i]; i++)
			(void)printf(" %s", row->containers[i]);
		(void)printf("\n");
	}
	if (row->options)
		(void)printf("  %-10s options %s\n", "", row->options);
	if (row->trainer)
		(void)printf("  %-10s trains dictionaries for pages\n", "");
}

static enum exit_code methods_run(const struct words *words)
{
	(void)words;
	(void)printf("estimators\n");
	for (size_t i = 0; estimators[i]; i++) {
		const struct estimator *row = estimators[i];

		(void)printf("  %-10s %s\n  %-10s %s%s; %s\n", row->name,
			     row->summary, "", leaning_words(row),
			     row->deep ? "; only by --estimator" : "",
			     row->source);
	}
	(void)printf("\ncodecs\n");
	for (size_t i = 0; codecs[i]; i++) {
		const struct codec *row = codecs[i];

		(void)printf("  %-10s %s\n  %-10s levels %s", row->name,
			     row->summary, "", row->levels);
		if (row->version)
			(void)printf("; library %s", row->version());
		(void)printf("; %s\n", row->source);
		print_choices(row);
	}
	return EXIT_DONE;
}

static const struct option_row options[] = {
	{NULL, NULL, NULL},
};

const struct command command_methods = {
	.name = "methods",
	.operands = "",
	.summary = "lists estimators and codecs with levels, versions, sources",
	.description = "Versions are those of the libraries as they run now.",
	.options = options,
	.run = methods_run,
};
