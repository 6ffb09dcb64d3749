/*
 * How long do n-gram facts of orders 1 to 16 take beside the bare suffix sort
 * of the same bytes, how much memory, and how does the ratio grow with length?
 *
 * RATEFLOOR_CORPORA: folder of real corpora (default corpora/fetched).
 * RATEFLOOR_BENCH_BYTES: no input longer than this (default 100000000).
 */
#include "estimate/corrections.h"
#include "estimate/estimator.h"
#include "suffix/suffix.h"
#include "support/grams.h"

#include "base/random.h"

#include <divsufsort.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/wait.h>
#include <time.h>
#include <unistd.h>

#define ORDERS 16
#define RATIO_TARGET 3.0
#define MEMORY_TARGET 14.0
#define GROWTH_TARGET 1.2

struct measured {
	double seconds, bare_seconds, bytes_per_byte;
};

static double cpu_seconds(void)
{
	struct timespec now;

	clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &now);
	return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

static double peak_bytes(void)
{
	struct rusage usage;

	getrusage(RUSAGE_SELF, &usage);
	return 1024.0 * (double)usage.ru_maxrss;
}

static void must(int good, const char *what)
{
	if (good)
		return;
	fprintf(stderr, "bench_suffix: %s failed\n", what);
	exit(1);
}

/* 100 x 2^j blocks of at least 4 KiB, 3200 at most. */
static size_t block_count(size_t n)
{
	size_t blocks = 100;

	while (blocks < 3200 && n / (2 * blocks) >= 4096)
		blocks *= 2;
	return blocks;
}

static double ngram_seconds(const struct sequence *sequence,
			    const struct cuts *cuts)
{
	double from = cpu_seconds();
	struct findings findings;
	struct corrected corrected;
	struct suffix suffix;
	struct estimate_input input = {.sequence = sequence,
				       .cuts = cuts,
				       .suffix = &suffix,
				       .orders = ORDERS,
				       .threads = 1};

	must(suffix_init(&suffix, sequence, ORDERS, NULL) == STATUS_OK,
	     "suffix_init");
	must(estimator_find("ngram")->measure(&input, &findings, NULL) ==
		     STATUS_OK,
	     "ngram");
	for (size_t k = 0; k < ORDERS; k++) {
		corrected_from_counts(&findings.orders[k].all,
				      8.0 * (double)(k + 1), &corrected);
		must(isfinite(corrected.chao_wang_jost), "corrections");
	}
	findings_release(&findings);
	suffix_release(&suffix);
	return cpu_seconds() - from;
}

static double bare_seconds(const struct sequence *sequence)
{
	double from = cpu_seconds();
	int32_t *order = malloc(sequence->n * sizeof(*order));

	must(order != NULL, "malloc");
	must(divsufsort(sequence->codes, order, (saidx_t)sequence->n) == 0,
	     "divsufsort");
	free(order);
	return cpu_seconds() - from;
}

/* The least of several runs where one is short. */
static struct measured measure(const uint8_t *bytes, size_t n)
{
	struct sequence sequence = grams_sequence(bytes, n, 1);
	struct cuts cuts = grams_cuts(n, block_count(n));
	int rounds = n <= 1000000 ? 9 : n <= 10000000 ? 3 : 1;
	double before = peak_bytes();
	struct measured best = {HUGE_VAL, HUGE_VAL, 0};

	for (int i = 0; i < rounds; i++) {
		best.seconds =
			fmin(best.seconds, ngram_seconds(&sequence, &cuts));
		if (i == 0)
			best.bytes_per_byte =
				(peak_bytes() - before) / (double)n;
		best.bare_seconds =
			fmin(best.bare_seconds, bare_seconds(&sequence));
	}
	free(cuts.symbol);
	return best;
}

/* Makes n bytes, or as many as there are: returns how many; NULL asks. */
typedef size_t maker(const char *name, uint8_t *bytes, size_t n);

static void run_child(int to, maker *make, const char *name, size_t n)
{
	uint8_t *bytes = malloc(n);
	struct measured measured;

	must(bytes && make(name, bytes, n) == n, name);
	measured = measure(bytes, n);
	must(write(to, &measured, sizeof(measured)) == sizeof(measured),
	     "write");
	exit(0);
}

/* In a process of its own, so that its peak of memory is its own. */
static struct measured apart(maker *make, const char *name, size_t n)
{
	struct measured measured = {0};
	int ends[2], status;
	pid_t child;

	fflush(stdout);
	must(pipe(ends) == 0, "pipe");
	child = fork();
	must(child >= 0, "fork");
	if (child == 0)
		run_child(ends[1], make, name, n);
	must(read(ends[0], &measured, sizeof(measured)) == sizeof(measured),
	     name);
	must(waitpid(child, &status, 0) == child && status == 0, name);
	close(ends[0]);
	close(ends[1]);
	return measured;
}

static void print_ratio(const char *name, const char *what, double value,
			double target)
{
	printf("%-28s %-34s %7.2f  target <= %-4.1f %s\n", name, what, value,
	       target, value <= target ? "ok" : "over");
}

static size_t corpus(const char *name, uint8_t *bytes, size_t n)
{
	const char *folder = getenv("RATEFLOOR_CORPORA");
	char path[4096];
	size_t length;
	FILE *file;

	snprintf(path, sizeof(path), "%s/%s",
		 folder ? folder : "corpora/fetched", name);
	file = fopen(path, "rb");
	if (!file)
		return 0;
	fseek(file, 0, SEEK_END);
	length = (size_t)ftell(file);
	rewind(file);
	if (bytes)
		length = fread(bytes, 1, n, file);
	fclose(file);
	return length;
}

static size_t text(const char *name, uint8_t *bytes, size_t n)
{
	(void)name;
	grams_pseudo_text(bytes, n, 41);
	return n;
}

static size_t zeros(const char *name, uint8_t *bytes, size_t n)
{
	(void)name;
	memset(bytes, 0, n);
	return n;
}

static size_t one_line(const char *name, uint8_t *bytes, size_t n)
{
	static const char line[] = "gauge 7 reads 2.385 m above datum, quality "
				   "good, battery 3.71 V\n";

	(void)name;
	for (size_t i = 0; i < n; i++)
		bytes[i] = (uint8_t)line[i % (sizeof(line) - 1)];
	return n;
}

static size_t fibonacci(const char *name, uint8_t *bytes, size_t n)
{
	(void)name;
	grams_fibonacci(bytes, n);
	return n;
}

static void bench_corpus(const char *name)
{
	size_t n = corpus(name, NULL, 0);
	struct measured measured;

	if (n == 0) {
		printf("%-28s skipped: not fetched\n", name);
		return;
	}
	measured = apart(corpus, name, n);
	print_ratio(name, "ngram 1..16 / bare suffix sort",
		    measured.seconds / measured.bare_seconds, RATIO_TARGET);
	print_ratio(name, "peak bytes / byte", measured.bytes_per_byte,
		    MEMORY_TARGET);
}

static void bench_growth(maker *make, const char *name, size_t from,
			 size_t limit)
{
	double before = 0;

	for (size_t n = from; n <= limit; n *= 10) {
		struct measured measured = apart(make, name, n);
		double ratio = measured.seconds / measured.bare_seconds;
		char what[64];

		printf("%-28s %9zu bytes: %.3f s, bare %.3f s, ratio %.2f, "
		       "%.1f bytes/byte\n",
		       name, n, measured.seconds, measured.bare_seconds, ratio,
		       measured.bytes_per_byte);
		if (n > from) {
			snprintf(what, sizeof(what), "growth to %zu bytes", n);
			print_ratio(name, what, ratio / before, GROWTH_TARGET);
		}
		before = ratio;
	}
}

int main(void)
{
	const char *cap = getenv("RATEFLOOR_BENCH_BYTES");
	size_t limit = cap ? (size_t)strtoull(cap, NULL, 10) : 100000000;

	bench_corpus("classic_alice29.txt");
	bench_corpus("ecoli_mg1655.seq");
	bench_corpus("king_james.txt");
	bench_growth(text, "pseudo-random text", 100000, limit);
	bench_growth(zeros, "all zeros", 1000000, limit);
	bench_growth(one_line, "one line repeated", 1000000, limit);
	bench_growth(fibonacci, "Fibonacci word", 1000000, limit);
	return 0;
}
