#include "cli/beside.h"
#include "cli/commands.h"
#include "cli/meter.h"
#include "cli/show.h"
#include "run/survey_run.h"

#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#define ROUNDS 3
#define ORDERS_DEFAULT 16

static volatile sig_atomic_t stop_asked;

static void on_signal(int number)
{
	(void)number;
	stop_asked = 1;
}

/* The first one asks to stop after the piece in hand; a second one kills. */
static void catch_signals(void)
{
	struct sigaction action = {.sa_flags = (int)SA_RESETHAND};

	action.sa_handler = on_signal;
	(void)sigemptyset(&action.sa_mask);
	(void)sigaction(SIGINT, &action, NULL);
	(void)sigaction(SIGTERM, &action, NULL);
}

/* What the options ask for. */
struct request {
	struct selection selection;
	struct run_rules rules;
	char ledger[512];
	char codec_host[BESIDE_BYTES];
	const struct report_format *format;
};

static MUST_USE enum status take_names(const struct words *words,
				       const char *option, struct names *names,
				       struct reason *why)
{
	const char *name;

	while ((name = words_nth(words, option, names->count))) {
		if (names->count == PLAN_NAMES_MAX)
			return reason_give(why, STATUS_BAD_USAGE,
					   "--%s: at most %d times", option,
					   PLAN_NAMES_MAX);
		names->name[names->count++] = name;
	}
	return STATUS_OK;
}

static MUST_USE enum status take_part(const struct words *words,
				      struct request *request,
				      struct reason *why)
{
	const char *text = words_get(words, "part");
	unsigned part = 1, parts = 1;
	char rest;

	if (text && (sscanf(text, "%4u/%4u%c", &part, &parts, &rest) != 2 ||
		     part < 1 || part > parts))
		return reason_give(why, STATUS_BAD_USAGE,
				   "--part '%s': I/N is wanted, 1/4 for "
				   "example, with I from 1 to N",
				   text);
	request->selection.part = request->rules.part = part;
	request->selection.parts = request->rules.parts = parts;
	return STATUS_OK;
}

static MUST_USE enum status take_options(const struct words *words,
					 struct request *request,
					 struct reason *why)
{
	uint64_t jobs = 1, seed = 1, orders = ORDERS_DEFAULT;
	long processors = sysconf(_SC_NPROCESSORS_ONLN);

	if (processors > 0)
		jobs = (uint64_t)processors;
	TRY(words_number(words, "jobs", 1, 1024, &jobs, why));
	TRY(words_number(words, "seed", 0, UINT64_MAX, &seed, why));
	TRY(words_number(words, "orders", 1, 32, &orders, why));
	TRY(take_names(words, "corpus", &request->selection.corpora, why));
	TRY(take_names(words, "estimator", &request->selection.estimators,
		       why));
	TRY(take_names(words, "codec", &request->selection.codecs, why));
	TRY(take_names(words, "level", &request->selection.levels, why));
	request->rules = (struct run_rules){
		.jobs = (unsigned)jobs,
		.orders = (unsigned)orders,
		.rounds = words_get(words, "no-timing") ? 0 : ROUNDS,
		.seed = seed,
		.resume = words_get(words, "resume") != NULL,
		.program = "ratefloor " RATEFLOOR_VERSION,
		.stop = &stop_asked,
	};
	request->selection.deep = words_get(words, "deep") != NULL;
	TRY(take_part(words, request, why));
	if (words_get(words, "own-codecs")) {
		TRY(beside_host(request->codec_host, why));
		request->selection.codec_host = request->codec_host;
	}
	return show_format(words, "table", &request->format, why);
}

static MUST_USE enum status name_ledger(const struct words *words,
					const struct set *set,
					struct request *request,
					struct reason *why)
{
	const char *path = words_get(words, "ledger");
	int length = path ? snprintf(request->ledger, sizeof(request->ledger),
				     "%s", path)
			  : snprintf(request->ledger, sizeof(request->ledger),
				     "%s.ledger", set->name);

	if (length < 0 || (size_t)length >= sizeof(request->ledger))
		return reason_give(why, STATUS_BAD_USAGE,
				   "--ledger: name too long");
	return STATUS_OK;
}

static void tell_end(const struct request *request,
		     const struct run_outcome *outcome, bool quiet)
{
	if (outcome->stopped)
		(void)fprintf(stderr,
			      "ratefloor survey: stopped; what was measured "
			      "is in %s: the same command with --resume goes "
			      "on\n",
			      request->ledger);
	else if (!quiet)
		(void)fprintf(stderr, "survey %lld is in %s\n",
			      (long long)outcome->survey, request->ledger);
}

/* Measures into the ledger and shows the report. */
static MUST_USE enum status
survey_into(const struct words *words, const struct plan *plan,
	    struct request *request, struct ledger *ledger,
	    enum exit_code *code, struct reason *why)
{
	bool quiet = words_get(words, "quiet") != NULL;
	struct meter meter;
	struct run_outcome outcome = {0};
	int failed = 0;
	enum status status;

	meter_init(&meter, !quiet);
	request->rules.watch = meter_watch;
	request->rules.context = &meter;
	catch_signals();
	status = survey_run(plan, ledger, &request->rules, &outcome, why);
	meter_clear(&meter);
	TRY(status);
	TRY(show_survey(ledger, outcome.survey, request->format,
			words_get(words, "out"), &failed, why));
	tell_end(request, &outcome, quiet);
	*code = failed || outcome.stopped ? EXIT_FAILED : EXIT_DONE;
	return STATUS_OK;
}

static MUST_USE enum status survey_set(const struct words *words,
				       const struct set *set,
				       struct request *request,
				       enum exit_code *code, struct reason *why)
{
	struct plan plan;
	struct ledger *ledger;
	enum status status;

	TRY(name_ledger(words, set, request, why));
	/* What cannot be planned leaves no ledger behind. */
	TRY(plan_init(&plan, set, &request->selection, why));
	status = ledger_open(request->ledger, LEDGER_WRITE, &ledger, why);
	if (status == STATUS_OK) {
		status = survey_into(words, &plan, request, ledger, code, why);
		ledger_close(ledger);
	}
	plan_release(&plan);
	return status;
}

static enum exit_code survey_run_command(const struct words *words)
{
	struct reason why = {""};
	struct request request = {.rules = {0}};
	struct set set;
	enum exit_code code = EXIT_DONE;
	enum status status;

	if (take_options(words, &request, &why) != STATUS_OK ||
	    set_load(words->operands[0], words_get(words, "outside") != NULL,
		     &set, &why) != STATUS_OK)
		return complain(words, &why);
	status = survey_set(words, &set, &request, &code, &why);
	set_release(&set);
	if (status != STATUS_OK)
		return complain(words, &why);
	return code;
}

static const struct option_row options[] = {
	{"ledger", "FILE",
	 "keep the facts there; by default NAME.ledger, after "
	 "the set's name"},
	{"corpus", "NAME", "only this corpus; may be given more than once"},
	{"estimator", "NAME", "only this estimator; likewise"},
	{"deep", NULL, "also the estimators that take long, for a review"},
	{"codec", "NAME", "only this codec of the set; likewise"},
	{"level", "L", "only this level; likewise"},
	{"jobs", "N", "threads for the sizes; by default one a processor"},
	{"part", "I/N", "only the I-th of N parts of the work; see merge"},
	{"resume", NULL, "go on with the newest unfinished survey"},
	{"no-timing", NULL, "no speeds; sizes and intervals only"},
	{"seed", "S", "of the resampling; 1 by default"},
	{"orders", "K", "highest n-gram order, 1 to 32; 16 by default"},
	{"outside", NULL,
	 "corpora and codecs may lie outside the set file's folder"},
	{"own-codecs", NULL,
	 "codecs that the set file declares may run: they are programs"},
	{"as", "FORMAT",
	 "the report's format: table (the default), text, "
	 "markdown, csv or json"},
	{"out", "FILE", "write the report there"},
	{"quiet", NULL, "no progress and no talk on standard error"},
	{NULL, NULL, NULL},
};

const struct command command_survey = {
	.name = "survey",
	.operands = "SET",
	.operands_min = 1,
	.operands_max = 1,
	.summary = "measures a set: the main job; ends with the table",
	.description =
		"Every corpus of the set file goes through every estimator "
		"and\n"
		"through every codec, level and layout that the set names. "
		"Each\n"
		"stream is decoded again and compared. Facts go to the "
		"ledger,\n"
		"one transaction a row, so that a kill loses at most the rows\n"
		"in hand; the table is then made from the ledger.\n"
		"\n"
		"A codec section's containers, options and dictionary sizes "
		"make\n"
		"cells of their own, named in the level: '6 gzip', '3 "
		"dict:64K'.\n"
		"'ratefloor methods' lists what each codec has.\n"
		"\n"
		"Sizes are measured on several threads and are the same for "
		"any\n"
		"number of them. Speeds are measured afterwards, one codec at "
		"a\n"
		"time with nothing else running, in three rounds; a ~ marks "
		"those\n"
		"whose rounds differ by more than 10%.\n"
		"\n"
		"A set file can declare codecs of its own: commands and "
		"shared\n"
		"objects. They run in child processes with limits on time, "
		"memory\n"
		"and output, and only with --own-codecs: a set file from a\n"
		"stranger runs nothing. What crashes, hangs, writes too much, "
		"loses\n"
		"a byte or gives other bytes the second time is a failed "
		"cell.\n"
		"\n"
		"A corpus that is absent and could be fetched is skipped with "
		"a\n"
		"line. One that is unreadable, empty, of the wrong digest or\n"
		"malformed, and a codec that fails, is recorded and shown; "
		"the\n"
		"others go on and the exit code is 1.",
	.examples =
		"  ratefloor survey corpora/starter.set\n"
		"  ratefloor survey corpora/starter.set --corpus gauge-frames "
		"--codec zstd --level 19\n"
		"  ratefloor survey corpora/nightly.set --corpus king-james "
		"--level '3 dict:64K'\n"
		"  ratefloor survey corpora/starter.set --deep --as text --out "
		"review.txt\n"
		"  ratefloor survey corpora/house.set --own-codecs\n"
		"  ratefloor survey corpora/nightly.set --jobs 2 --no-timing "
		"--as json --out tonight.json",
	.options = options,
	.run = survey_run_command,
};
