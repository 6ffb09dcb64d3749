/*
 * How long do the Dirichlet code and the cross-fit take, a symbol (dirichlet:
 * all six orders) or a symbol and order (crossfit), beside the suffix sort?
 *
 * Arguments: files, read as bytes.
 */
#include "estimate/estimator.h"
#include "suffix/suffix.h"
#include "support/grams.h"

#include <stdio.h>
#include <stdlib.h>
#include <time.h>

#define ORDERS 16

static double cpu_seconds(void)
{
	struct timespec now;

	clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &now);
	return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

static void must(int good, const char *what)
{
	if (good)
		return;
	fprintf(stderr, "bench_codes: %s failed\n", what);
	exit(1);
}

static uint8_t *read_all(const char *path, size_t *length)
{
	FILE *file = fopen(path, "rb");
	uint8_t *bytes;

	must(file && fseek(file, 0, SEEK_END) == 0, path);
	*length = (size_t)ftell(file);
	rewind(file);
	bytes = malloc(*length + 1);
	must(bytes && fread(bytes, 1, *length, file) == *length, path);
	fclose(file);
	return bytes;
}

static void run_row(const char *name, const struct estimate_input *input)
{
	double n = (double)input->sequence->n, seconds = cpu_seconds();
	struct findings findings;
	double divisor = n;

	must(estimator_find(name)->measure(input, &findings, NULL) == STATUS_OK,
	     name);
	seconds = cpu_seconds() - seconds;
	if (findings.series_count > 1)
		divisor = n * (double)findings.series_count;
	printf("  %s %.3f s, %.1f ns;", name, seconds, seconds * 1e9 / divisor);
	for (size_t i = 0; i < findings.series_count; i++)
		printf(" %.4f",
		       bits_from_q16(findings.series[i].costs.headline_q16) /
			       n);
	for (size_t i = 0; i < findings.note_count && i < 6; i++)
		printf(" (%.4f)", bits_from_q16(findings.notes[i].value) / n);
	printf("\n");
	findings_release(&findings);
}

int main(int count, char **paths)
{
	for (int i = 1; i < count; i++) {
		size_t n;
		uint8_t *bytes = read_all(paths[i], &n);
		struct sequence sequence = grams_sequence(bytes, n, 1);
		struct cuts cuts = grams_cuts(n, 100);
		struct suffix suffix;
		struct estimate_input input = {.sequence = &sequence,
					       .cuts = &cuts,
					       .suffix = &suffix,
					       .orders = ORDERS,
					       .threads = 1};
		double seconds = cpu_seconds();

		must(suffix_init(&suffix, &sequence, ORDERS, NULL) == STATUS_OK,
		     "suffix");
		printf("%s: %zu bytes, sorted in %.3f s\n", paths[i], n,
		       cpu_seconds() - seconds);
		run_row("dirichlet", &input);
		if (estimator_find("crossfit"))
			run_row("crossfit", &input);
		suffix_release(&suffix);
		free(cuts.symbol);
		free(bytes);
	}
	return 0;
}
