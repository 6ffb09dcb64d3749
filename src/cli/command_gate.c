#include "cli/commands.h"
#include "cli/nights.h"
#include "cli/output.h"
#include "corpus/file_read.h"
#include "report/baseline_report.h"
#include "report/gate_report.h"

#include <string.h>

#define BASELINE_BYTES_MOST (64 << 20)

/* What one call works on. */
struct gating {
	const struct words *words;
	struct ledger *ledger;
	struct night tonight;
	const char *set_path;
};

/* Opens the set where measuring again is wanted and can be done. */
static bool open_set(const struct gating *gating, struct remeasure *again)
{
	struct reason why = {""};
	bool quiet = words_get(gating->words, "quiet") != NULL;

	if (words_get(gating->words, "no-repeat"))
		return false;
	if (remeasure_init(again, gating->set_path,
			   words_get(gating->words, "outside") != NULL,
			   words_get(gating->words, "own-codecs") != NULL,
			   &why) == STATUS_OK) {
		again->quiet = quiet;
		return true;
	}
	(void)fprintf(stderr,
		      "ratefloor gate: nothing can be measured again: %s\n",
		      why.text);
	return false;
}

static MUST_USE enum status write_pin(const struct baseline *baseline,
				      const char *path, struct reason *why)
{
	struct output output;

	TRY(output_open(&output, path, why));
	return output_end(&output, baseline_write(output.file, baseline, why),
			  why);
}

static void name_skipped(const struct baseline *baseline)
{
	for (size_t i = 0; i < baseline->corpus_count; i++) {
		if (baseline->corpora[i].outcome == OUTCOME_SKIPPED)
			(void)fprintf(stderr,
				      "ratefloor gate: %s was skipped and is "
				      "not in the baseline\n",
				      baseline->corpora[i].name);
	}
}

static enum exit_code pin(struct gating *gating, const char *path)
{
	struct baseline *figures = &gating->tonight.figures;
	struct remeasure again;
	struct reason why = {""};
	enum status status;

	name_skipped(figures);
	status = baseline_settle(figures, &why);
	if (status != STATUS_OK) {
		(void)complain(gating->words, &why);
		return EXIT_FAILED;
	}
	if (open_set(gating, &again)) {
		if (remeasure_pin(&again, figures, &why) != STATUS_OK)
			(void)fprintf(stderr,
				      "ratefloor gate: some times are those "
				      "of the survey alone: %s\n",
				      why.text);
		remeasure_release(&again);
	}
	if (write_pin(figures, path, &why) != STATUS_OK)
		return complain(gating->words, &why);
	(void)printf("survey %lld is pinned in %s: %zu corpora, %zu cells\n",
		     (long long)figures->survey, path, figures->corpus_count,
		     figures->cell_count);
	return EXIT_DONE;
}

static MUST_USE enum status read_pin(const char *path, struct baseline *pin,
				     struct reason *why)
{
	const struct read_limit limit = {BASELINE_BYTES_MOST, 1};
	uint8_t *text;
	size_t length;
	enum status status;

	TRY(file_read(path, &limit, &text, &length, why));
	status = baseline_parse(pin, (const char *)text, length, path, why);
	memory_free(text);
	return status;
}

/* Follows breaches back over the older surveys of the set. */
static MUST_USE enum status reach_back(struct gating *gating, struct gate *gate,
				       struct reason *why)
{
	int64_t *ids;
	size_t count;
	bool goes_on = gate_count(gate, GATE_BREACHED) > 0;
	enum status status = STATUS_OK;

	TRY(ledger_list(gating->ledger, &ids, &count, why));
	while (goes_on && status == STATUS_OK && count-- > 0) {
		struct night night = {.finished = false};
		struct gate older;

		if (ids[count] >= gate->tonight->survey)
			continue;
		status = night_read(gating->ledger, ids[count], &night, why);
		if (status != STATUS_OK)
			break;
		if (night.finished &&
		    strcmp(night.figures.set_name, gate->pin->set_name) == 0) {
			goes_on = gate_init(&older, gate->pin, &night.figures,
					    NULL) == STATUS_OK;
			if (goes_on) {
				goes_on = gate_reach_back(gate, &older);
				gate_release(&older);
			}
		}
		night_release(&night);
	}
	memory_free(ids);
	return status;
}

/* One of the two files, whole or not there. */
static MUST_USE enum status
write_file(const char *path, const struct gate_paper *paper,
	   enum status (*write)(FILE *, const struct gate_paper *,
				struct reason *),
	   struct reason *why)
{
	struct output output;

	if (!path)
		return STATUS_OK;
	TRY(output_open(&output, path, why));
	return output_end(&output, write(output.file, paper, why), why);
}

static MUST_USE enum status write_papers(const struct gating *gating,
					 const struct gate_paper *paper,
					 struct reason *why)
{
	TRY(write_file(words_get(gating->words, "junit"), paper,
		       gate_junit_write, why));
	TRY(write_file(words_get(gating->words, "markdown"), paper,
		       gate_markdown_write, why));
	return gate_lines_write(stdout, paper, why);
}

static MUST_USE enum status
write_refusal(const char *path, const char *words,
	      enum status (*write)(FILE *, const char *, struct reason *),
	      struct reason *why)
{
	struct output output;

	if (!path)
		return STATUS_OK;
	TRY(output_open(&output, path, why));
	return output_end(&output, write(output.file, words, why), why);
}

/* A server that reads only the files must not see those of last night. */
static enum exit_code refuse(const struct gating *gating,
			     const struct reason *why)
{
	struct reason second = {""};

	if (write_refusal(words_get(gating->words, "junit"), why->text,
			  gate_junit_refusal, &second) != STATUS_OK ||
	    write_refusal(words_get(gating->words, "markdown"), why->text,
			  gate_markdown_refusal, &second) != STATUS_OK)
		(void)complain(gating->words, &second);
	return complain(gating->words, why);
}

static enum exit_code judge(struct gating *gating, const char *path)
{
	struct gate_paper paper = {.baseline = path,
				   .set_path = gating->set_path};
	struct baseline pinned;
	struct remeasure again;
	struct gate gate;
	struct reason why = {""};
	enum exit_code code = EXIT_DONE;
	enum status status;

	if (read_pin(path, &pinned, &why) != STATUS_OK)
		return refuse(gating, &why);
	if (gate_init(&gate, &pinned, &gating->tonight.figures, &why) !=
	    STATUS_OK) {
		baseline_release(&pinned);
		return refuse(gating, &why);
	}
	if (gate_count(&gate, GATE_SUSPECTED) && open_set(gating, &again)) {
		remeasure_suspects(&again, &gate);
		remeasure_release(&again);
	}
	paper.gate = &gate;
	status = reach_back(gating, &gate, &why);
	if (status == STATUS_OK)
		status = write_papers(gating, &paper, &why);
	if (status != STATUS_OK)
		code = complain(gating->words, &why);
	else if (gate_count(&gate, GATE_BREACHED))
		code = EXIT_FAILED;
	gate_release(&gate);
	baseline_release(&pinned);
	return code;
}

static enum exit_code work(struct gating *gating)
{
	const char *pinned = words_get(gating->words, "pin");
	const char *set = words_get(gating->words, "set");
	struct reason why = {""};

	if (!gating->tonight.finished) {
		(void)reason_give(&why, STATUS_BAD_USAGE,
				  "survey %lld is not finished: run it to its "
				  "end with --resume",
				  (long long)gating->tonight.figures.survey);
		return refuse(gating, &why);
	}
	gating->set_path = set ? set : gating->tonight.set_path;
	return pinned ? pin(gating, pinned)
		      : judge(gating, words_get(gating->words, "against"));
}

static enum exit_code gate_run(const struct words *words)
{
	struct gating gating = {.words = words};
	struct reason why = {""};
	enum exit_code code;
	uint64_t id = 0;

	if (!words_get(words, "pin") == !words_get(words, "against")) {
		(void)reason_give(&why, STATUS_BAD_USAGE,
				  "wants one of --pin FILE and --against FILE");
		return complain(words, &why);
	}
	if (words_number(words, "survey", 1, INT64_MAX, &id, &why) !=
		    STATUS_OK ||
	    ledger_open(words->operands[0], LEDGER_READ, &gating.ledger,
			&why) != STATUS_OK)
		return complain(words, &why);
	if (night_read(gating.ledger, (int64_t)id, &gating.tonight, &why) !=
	    STATUS_OK) {
		ledger_close(gating.ledger);
		return complain(words, &why);
	}
	code = work(&gating);
	night_release(&gating.tonight);
	ledger_close(gating.ledger);
	return code;
}

static const struct option_row options[] = {
	{"pin", "FILE", "write the survey's figures there as the baseline"},
	{"against", "FILE", "judge the survey against that baseline"},
	{"survey", "ID", "this survey of the ledger; the newest by default"},
	{"set", "FILE", "the set file; by default where the survey found it"},
	{"outside", NULL, "corpora may lie outside the set file's folder"},
	{"own-codecs", NULL,
	 "codecs that the set file declares may run: they are programs"},
	{"no-repeat", NULL,
	 "measure nothing again: what is slow is then suspected only"},
	{"junit", "FILE", "also write the XML that CI servers read"},
	{"markdown", "FILE", "also write a summary for a page"},
	{"quiet", NULL, "no talk on standard error"},
	{NULL, NULL, NULL},
};

const struct command command_gate = {
	.name = "gate",
	.operands = "LEDGER",
	.operands_min = 1,
	.operands_max = 1,
	.summary = "judges the newest survey against a pinned baseline",
	.description =
		"--pin writes a baseline: JSON, one line a cell, made to be\n"
		"committed and reviewed. --against judges by these rules:\n"
		"\n"
		"lossless: every byte comes back. broken: no codec and no\n"
		"method fails. missing: all that is pinned was measured.\n"
		"corpus-changed: a fixed corpus has the bytes of the pin.\n"
		"size: on a fixed corpus, exact bytes against the set's\n"
		"tolerance. size-of-kind: on a rolling one, the paired\n"
		"difference to the yardstick, beyond the tolerance and beyond\n"
		"chance over all cells (Holm). gap-limit and floor-taken: "
		"what\n"
		"was not so at the pin. speed and memory: relative to the\n"
		"yardstick, over speed-tolerance, and only if measuring again\n"
		"says so each time, on a machine with nothing else to do.\n"
		"\n"
		"Each breach is one line: what, by how much, since when, and\n"
		"the command that measures it again. What cannot be compared\n"
		"(another set, symbol kind, feed, option, yardstick or "
		"version\n"
		"of the reference) is refused with exit code 2. A codec's\n"
		"version is what is judged: it is named.",
	.examples =
		"  ratefloor survey bay.set --ledger nights.ledger\n"
		"  ratefloor gate nights.ledger --pin baseline.json\n"
		"  ratefloor gate nights.ledger --against baseline.json \\\n"
		"      --junit gate.xml --markdown gate.md",
	.options = options,
	.run = gate_run,
};
