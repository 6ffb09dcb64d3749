/*
 * Code length and CPU of mix and mix-deep beside xz 9e on real corpora.
 *
 * usage: bench_mix [ROW [CORPUS ...]], ROW "mix", "mix-deep", "pair" (what a
 * second thread gains of wall time) or "both", which is all three. The
 * corpora lie in the folder RATEFLOOR_CORPORA, or corpora/fetched; absent ones
 * are passed over with a line.
 */
#include "estimate/estimator.h"

#include <lzma.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <time.h>

/* Bits a byte that each row is to stay below (asked for with the rows). */
struct wanted {
	const char *name;
	enum symbol_kind kind;
	double mix, deep;
};

static const struct wanted table[] = {
	{"classic_alice29.txt", SYMBOL_BYTE, 1.970, 1.928},
	{"classic_plrabn12.txt", SYMBOL_BYTE, 2.104, 2.076},
	{"moby_dick.txt", SYMBOL_BYTE, 2.077, 2.035},
	{"dasher_russian_RU.txt", SYMBOL_BYTE, 1.342, 1.315},
	{"zh_fortunes.txt", SYMBOL_BYTE, 1.485, 1.405},
	{"go_runtime_src.txt", SYMBOL_BYTE, 1.220, 1.132},
	{"gl.xml", SYMBOL_BYTE, 0.296, 0.220},
	{"birdstrikes.csv", SYMBOL_BYTE, 0.332, 0.294},
	{"sensor_motes.csv", SYMBOL_BYTE, 0.417, 0.375},
	{"iotrace_linux-mysql.txt", SYMBOL_BYTE, 0.672, 0.582},
	{"flights_200k.arrow", SYMBOL_BYTE, 1.996, 1.946},
	{"proj.db", SYMBOL_BYTE, 0.733, 0.581},
	{"libc_arm64.so", SYMBOL_BYTE, 2.716, 2.567},
	{"mscorlib.dll", SYMBOL_BYTE, 1.921, 1.733},
	{"chess_book.bin", SYMBOL_BYTE, 3.559, 3.416},
	{"coads_climatology.cdf", SYMBOL_BYTE, 2.883, 2.811},
	{"fashion_t10k.idx3", SYMBOL_BYTE, 3.615, 3.386},
	{"speech_ve9qrp.raw", SYMBOL_BYTE, 5.798, 5.777},
	{"ecoli_mg1655.seq", SYMBOL_NUCLEOTIDE, 1.910, 1.903},
};

/* CPU asked for, in times that of xz: over the table, and in any row. */
#define MIX_TOTAL 1.0
#define MIX_ROW 2.5
#define DEEP_TOTAL 4.0
#define DEEP_ROW 8.0

struct result {
	double bits_per_byte, seconds, wall;
};

static double cpu_seconds(void)
{
	struct timespec now;

	clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &now);
	return (double)now.tv_sec + (double)now.tv_nsec * 1e-9;
}

static double wall_seconds(void)
{
	struct timespec now;

	clock_gettime(CLOCK_MONOTONIC, &now);
	return (double)now.tv_sec + (double)now.tv_nsec * 1e-9;
}

static struct slice read_file(const char *folder, const char *name)
{
	struct slice slice = {NULL, 0};
	char path[4096];
	uint8_t *bytes;
	FILE *file;
	long length;

	snprintf(path, sizeof(path), "%s/%s", folder, name);
	file = fopen(path, "rb");
	if (!file)
		return slice;
	if (fseek(file, 0, SEEK_END) == 0 && (length = ftell(file)) > 0) {
		rewind(file);
		bytes = malloc((size_t)length);
		if (bytes &&
		    fread(bytes, 1, (size_t)length, file) == (size_t)length)
			slice = (struct slice){bytes, (size_t)length};
		else
			free(bytes);
	}
	fclose(file);
	return slice;
}

static struct result run_xz(struct slice bytes)
{
	size_t room = lzma_stream_buffer_bound(bytes.length), length = 0;
	uint8_t *out = malloc(room);
	double start = cpu_seconds();
	struct result result = {0, 0, 0};

	if (out &&
	    lzma_easy_buffer_encode(9 | LZMA_PRESET_EXTREME, LZMA_CHECK_CRC64,
				    NULL, bytes.bytes, bytes.length, out,
				    &length, room) == LZMA_OK)
		result.bits_per_byte =
			8.0 * (double)length / (double)bytes.length;
	result.seconds = cpu_seconds() - start;
	free(out);
	return result;
}

static struct result run_row(const char *row, struct slice bytes,
			     enum symbol_kind kind, unsigned threads)
{
	struct sequence sequence = {.kind = kind,
				    .canonical = bytes.bytes,
				    .canonical_bytes = bytes.length,
				    .n = bytes.length,
				    .alphabet = 256};
	struct cuts cuts = {0};
	struct estimate_input input = {
		.sequence = &sequence, .cuts = &cuts, .threads = threads};
	struct findings findings;
	struct reason why;
	double start = cpu_seconds(), wall = wall_seconds();
	struct result result = {0, 0, 0};

	if (estimator_find(row)->measure(&input, &findings, &why) !=
	    STATUS_OK) {
		printf("  %s: %s\n", row, why.text);
		return result;
	}
	result.seconds = cpu_seconds() - start;
	result.wall = wall_seconds() - wall;
	result.bits_per_byte =
		bits_from_q16(findings.series[0].costs.headline_q16) /
		(double)bytes.length;
	findings_release(&findings);
	return result;
}

static bool chosen(const char *name, int count, char **names)
{
	for (int i = 0; i < count; i++) {
		if (strstr(name, names[i]))
			return true;
	}
	return count == 0;
}

static void print_table(const char *row, bool deep, int count, char **names)
{
	const char *folder = getenv("RATEFLOOR_CORPORA");
	double xz_total = 0, row_total = 0, worst = 0;

	printf("%-24s %9s %8s %8s %8s %7s %7s\n", row, "bytes", "xz 9e", row,
	       "at most", "times", "us/B");
	for (size_t i = 0; i < sizeof(table) / sizeof(*table); i++) {
		double most = deep ? table[i].deep : table[i].mix, times;
		struct slice bytes;
		struct result xz, own;

		if (!chosen(table[i].name, count, names))
			continue;
		bytes = read_file(folder ? folder : "corpora/fetched",
				  table[i].name);
		if (!bytes.length) {
			printf("%-24s is not there\n", table[i].name);
			continue;
		}
		xz = run_xz(bytes);
		own = run_row(row, bytes, table[i].kind, 1);
		times = own.seconds / xz.seconds;
		printf("%-24s %9zu %8.4f %8.4f %8.3f%s %6.2f%s %7.3f\n",
		       table[i].name, bytes.length, xz.bits_per_byte,
		       own.bits_per_byte, most,
		       own.bits_per_byte <= most ? " " : "!", times,
		       times <= (deep ? DEEP_ROW : MIX_ROW) ? " " : "!",
		       own.seconds * 1e6 / (double)bytes.length);
		fflush(stdout);
		xz_total += xz.seconds;
		row_total += own.seconds;
		worst = times > worst ? times : worst;
		free((void *)(uintptr_t)bytes.bytes);
	}
	if (xz_total > 0)
		printf("CPU %.2f times xz (at most %.1f), worst row %.2f "
		       "(at most %.1f)\n\n",
		       row_total / xz_total, deep ? DEEP_TOTAL : MIX_TOTAL,
		       worst, deep ? DEEP_ROW : MIX_ROW);
}

/* The most the process has held, in MiB. */
static double peak_mib(void)
{
	struct rusage usage;

	getrusage(RUSAGE_SELF, &usage);
	return (double)usage.ru_maxrss / 1024;
}

#define PAIR_GAIN 1.6

/* One thread against two, by wall; the least of three times each. */
static void print_pair(int count, char **names)
{
	const char *folder = getenv("RATEFLOOR_CORPORA");
	double alone = 0, both = 0;

	for (size_t i = 0; i < sizeof(table) / sizeof(*table); i++) {
		double least[2] = {1e9, 1e9}, bits[2] = {0, 0};
		struct slice bytes;

		/* Nucleotides have a predictor of their own, on one thread. */
		if (!chosen(table[i].name, count, names) ||
		    table[i].kind == SYMBOL_NUCLEOTIDE)
			continue;
		bytes = read_file(folder ? folder : "corpora/fetched",
				  table[i].name);
		if (!bytes.length)
			continue;
		for (unsigned turn = 0; turn < 6; turn++) {
			struct result own = run_row("mix", bytes, table[i].kind,
						    1 + turn % 2);

			if (own.wall < least[turn % 2])
				least[turn % 2] = own.wall;
			bits[turn % 2] = own.bits_per_byte;
		}
		printf("%-24s two threads %.2f times as fast%s\n",
		       table[i].name, least[0] / least[1],
		       bits[0] == bits[1] ? "" : ", OTHER LENGTH");
		fflush(stdout);
		alone += least[0];
		both += least[1];
		free((void *)(uintptr_t)bytes.bytes);
	}
	if (both > 0)
		printf("two threads: %.2f times as fast (at least %.1f)\n\n",
		       alone / both, PAIR_GAIN);
}

int main(int argc, char **argv)
{
	const char *row = argc > 1 ? argv[1] : "both";
	int count = argc > 2 ? argc - 2 : 0;

	bool all = strcmp(row, "both") == 0;

	if (all || strcmp(row, "mix") == 0) {
		print_table("mix", false, count, argv + 2);
		printf("peak memory, corpora and xz included: %.0f MiB\n\n",
		       peak_mib());
	}
	if (all || strcmp(row, "pair") == 0)
		print_pair(count, argv + 2);
	if (all || strcmp(row, "mix-deep") == 0) {
		print_table("mix-deep", true, count, argv + 2);
		printf("peak memory, corpora and xz included: %.0f MiB\n",
		       peak_mib());
	}
	return 0;
}
