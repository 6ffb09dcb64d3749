/*
 * Does the ratio of two codecs' speeds repeat? Three runs of the timing phase
 * on made bytes; the ratio must repeat within 5%, or a run is marked noisy.
 */
#include "base/memory.h"
#include "gap/analysis.h"
#include "ledger/ledger.h"
#include "run/survey_run.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <unistd.h>

#define LEDGER "build/bench-timing.ledger"
#define CORPUS "build/bench-timing.bin"
#define SET                                                              \
	"[set]\nname = timing\n[corpus made]\nfile = bench-timing.bin\n" \
	"symbols = byte\n[codec zlib]\nlevels = 6\n[codec zstd]\nlevels = 3\n"
#define RUNS 3

static void fail(const char *what, const struct reason *why)
{
	(void)fprintf(stderr, "bench_timing: %s: %s\n", what, why->text);
	exit(1);
}

/* Words out of a small list, so that both codecs have something to do. */
static void write_corpus(void)
{
	FILE *file = fopen(CORPUS, "wb");
	unsigned state = 1;

	if (!file)
		exit(1);
	for (unsigned i = 0; i < 300000; i++) {
		state = state * 1664525 + 1013904223;
		(void)fprintf(file, "%x ", state >> 24 & state >> 16);
	}
	(void)fclose(file);
}

/* Encode speed of zlib over zstd, and of decoding; true where it is noisy. */
static bool run_once(const struct plan *plan, double ratio[2])
{
	const struct run_rules rules = {.jobs = 1,
					.orders = 1,
					.rounds = 5,
					.part = 1,
					.parts = 1,
					.program = "bench"};
	const struct analysis_rules asked = {1999, 0.95};
	struct run_outcome outcome;
	struct survey survey = {0};
	struct analysis analysis;
	const struct cell_row *cells;
	struct ledger *ledger;
	struct reason why = {""};
	bool noisy;

	(void)unlink(LEDGER);
	if (ledger_open(LEDGER, LEDGER_WRITE, &ledger, &why) != STATUS_OK ||
	    survey_run(plan, ledger, &rules, &outcome, &why) != STATUS_OK ||
	    ledger_read(ledger, 0, &survey, &why) != STATUS_OK ||
	    analysis_init(&analysis, &survey, &asked, &why) != STATUS_OK)
		fail("survey", &why);
	cells = analysis.corpora[0].cells;
	ratio[0] = cells[0].encode_mb_per_s / cells[1].encode_mb_per_s;
	ratio[1] = cells[0].decode_mb_per_s / cells[1].decode_mb_per_s;
	noisy = cells[0].timing_noisy || cells[1].timing_noisy;
	analysis_release(&analysis);
	survey_release(&survey);
	ledger_close(ledger);
	return noisy;
}

static void print(const char *what, double ratios[RUNS][2], unsigned which,
		  unsigned noisy)
{
	double low = ratios[0][which], high = low, spread;

	for (unsigned i = 1; i < RUNS; i++) {
		if (ratios[i][which] < low)
			low = ratios[i][which];
		if (ratios[i][which] > high)
			high = ratios[i][which];
	}
	spread = high / low;
	(void)printf("%s speed of zlib 6 / zstd 3, largest / smallest of three "
		     "runs  %.3f  (at most 1.05, or marked)  %s\n",
		     what, spread,
		     spread <= 1.05 ? "ok"
		     : noisy        ? "marked noisy"
				    : "over");
}

int main(void)
{
	const struct selection all = {
		.estimators = {.name = {"uniform"}, .count = 1},
		.part = 1,
		.parts = 1};
	const struct slice text = {(const uint8_t *)SET, sizeof(SET) - 1};
	double ratios[RUNS][2];
	struct set set;
	struct plan plan;
	struct reason why = {""};
	unsigned noisy = 0;

	write_corpus();
	if (set_parse(text, "build/timing.set", false, &set, &why) !=
		    STATUS_OK ||
	    plan_init(&plan, &set, &all, &why) != STATUS_OK)
		fail("set", &why);
	for (unsigned i = 0; i < RUNS; i++)
		noisy += run_once(&plan, ratios[i]);
	print("encode", ratios, 0, noisy);
	print("decode", ratios, 1, noisy);
	plan_release(&plan);
	set_release(&set);
	(void)unlink(LEDGER);
	(void)unlink(CORPUS);
	return 0;
}
