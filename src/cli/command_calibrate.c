#include "cli/commands.h"
#include "cli/output.h"
#include "report/calibration_report.h"
#include "run/calibration_run.h"

#include <stdio.h>
#include <unistd.h>

#define ORDERS_DEFAULT 16
#define COUNT(array) (sizeof(array) / sizeof((array)[0]))

/* One line rewritten on a terminal; nothing elsewhere. */
static void show_share(void *context, double share, double seconds)
{
	double *shown = context;

	if (seconds < *shown + 0.5)
		return;
	*shown = seconds;
	(void)fprintf(stderr, "\r%5.1f%%  about %.0f s left ", 100 * share,
		      seconds * (1 - share) / share);
}

struct length_row {
	uint64_t symbols;
	size_t runs, codes;
	unsigned alphabet_least;
	bool gap;
};

/*
 * A full calibration. The third length is for the gap, which needs blocks that
 * can pay for their flushes, on the sources that zlib is quick on. The fourth
 * is for the width.
 */
static const struct length_row lengths[] = {
	{10000, 2000, 100, 0, false},
	{100000, 300, 30, 0, false},
	{400000, 200, 0, 16, true},
	{1000000, 12, 0, 0, false},
};

/* Below, flushes cost over what an interval allows. */
#define GAP_SYMBOLS_MIN 262144

static void add_length(struct calibration_rules *rules,
		       const struct length_row *row)
{
	size_t i = rules->length_count++;

	rules->symbols[i] = row->symbols;
	rules->runs[i] = row->runs;
	rules->codes[i] = row->codes;
	rules->alphabet_least[i] = row->alphabet_least;
	rules->gap[i] = row->gap;
}

/* A length of its own takes the samples of the longest below it. */
static struct length_row row_like(uint64_t symbols)
{
	struct length_row row = lengths[symbols < 100000 ? 0 : 1];

	row.symbols = symbols;
	row.gap = symbols >= GAP_SYMBOLS_MIN;
	return row;
}

/* The lengths of a full calibration, or the one that was asked for. */
static enum status read_lengths(const struct words *words,
				struct calibration_rules *rules,
				struct reason *why)
{
	uint64_t symbols = 0, samples = 0, thin = 1, longest = UINT64_MAX;
	uint64_t codes = UINT64_MAX;

	TRY(words_number(words, "symbols", 6400, 100000000, &symbols, why));
	TRY(words_number(words, "replicates", 2, 1000000, &samples, why));
	TRY(words_number(words, "thin", 1, 20, &thin, why));
	TRY(words_number(words, "longest", 10000, 100000000, &longest, why));
	TRY(words_number(words, "codes", 0, 1000000, &codes, why));
	*rules = (struct calibration_rules){.orders = ORDERS_DEFAULT};
	if (symbols) {
		const struct length_row row = row_like(symbols);

		add_length(rules, &row);
	}
	for (size_t i = 0; !symbols && i < COUNT(lengths); i++) {
		if (lengths[i].symbols <= longest)
			add_length(rules, &lengths[i]);
	}
	for (size_t i = 0; i < rules->length_count; i++) {
		size_t all = samples ? samples : rules->runs[i] / thin;

		rules->runs[i] = all < 2 ? 2 : all;
		rules->codes[i] =
			codes < UINT64_MAX ? codes : rules->codes[i] / thin;
	}
	return STATUS_OK;
}

static enum status read_rules(const struct words *words,
			      struct calibration_rules *rules,
			      struct reason *why)
{
	uint64_t seed = 1, jobs = 1;

	TRY(read_lengths(words, rules, why));
	TRY(words_number(words, "seed", 0, UINT32_MAX, &seed, why));
	TRY(words_number(words, "jobs", 1, 256, &jobs, why));
	rules->seed = seed;
	rules->jobs = (unsigned)jobs;
	rules->source = words_get(words, "source");
	return STATUS_OK;
}

static enum status run_and_write(const struct calibration_rules *rules,
				 const struct calibration_format *format,
				 FILE *out, struct reason *why)
{
	struct calibration_report report = {
		.program = "ratefloor " RATEFLOOR_VERSION,
		.seed = rules->seed,
		.orders = rules->orders,
	};
	struct calibration calibration;
	enum status status;

	TRY(calibration_run(rules, &calibration, why));
	(void)fprintf(stderr, "%s%zu sources and lengths in %.1f s\n",
		      rules->watch ? "\r" : "", calibration.case_count,
		      calibration.seconds);
	report.cases = calibration.cases;
	report.case_count = calibration.case_count;
	status = format->write(out, &report, why);
	calibration_release(&calibration);
	return status;
}

static enum status calibrate(const struct words *words, struct reason *why)
{
	const char *as = words_get(words, "as");
	const struct calibration_format *format =
		calibration_format_find(as ? as : "text");
	struct calibration_rules rules;
	struct output output;
	double shown = 0;

	if (!format)
		return reason_give(why, STATUS_BAD_USAGE,
				   "--as takes text, markdown or json, not %s",
				   as);
	TRY(read_rules(words, &rules, why));
	if (isatty(STDERR_FILENO)) {
		rules.watch = show_share;
		rules.context = &shown;
	}
	/* Before minutes of work, not after them. */
	TRY(output_open(&output, words_get(words, "out"), why));
	return output_end(&output,
			  run_and_write(&rules, format, output.file, why), why);
}

static enum exit_code calibrate_run(const struct words *words)
{
	struct reason why = {""};

	if (calibrate(words, &why) != STATUS_OK)
		return complain(words, &why);
	return EXIT_DONE;
}

static const struct option_row options[] = {
	{"symbols", "N",
	 "length of a sample, from 6400; by default 10000, 100000, 400000 "
	 "and 1000000"},
	{"longest", "N", "of the default lengths only those up to N"},
	{"replicates", "R",
	 "samples of each source; by default 2000, 300, 200 and 12"},
	{"codes", "C",
	 "of these, samples on which mix and ctw run too; by default 100, 30, "
	 "none and none"},
	{"thin", "N",
	 "one in N of the default samples; 1 by default, at most 20"},
	{"source", "NAME", "only this source of the list"},
	{"seed", "S", "equal seeds give equal figures; 1 by default"},
	{"jobs", "N", "threads; 1 by default"},
	{"as", "FORMAT", "text, markdown or json"},
	{"out", "FILE", "write there instead of standard output"},
	{NULL, NULL, NULL},
};

const struct command command_calibrate = {
	.name = "calibrate",
	.operands = "",
	.summary = "checks estimators and intervals on sources of known rate",
	.description =
		"Draws many samples of each source of a fixed list, whose "
		"entropy\n"
		"rates are known exactly, and counts how often intervals and\n"
		"rate brackets were right, how wide they were, and how often\n"
		"drift was seen. The promises stand first, each with what was\n"
		"measured and its own Monte-Carlo error.",
	.examples = "  ratefloor calibrate --jobs 2 --out calibration.txt\n"
		    "  ratefloor calibrate --source two-state --symbols 10000 "
		    "--replicates 200",
	.options = options,
	.run = calibrate_run,
};
