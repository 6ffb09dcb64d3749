/*
 * What does the harness cost beside the work it runs, and what do two jobs
 * gain? usage: bench_run [SET]; prints a ratio a line with its target.
 */
#include "ledger/ledger.h"
#include "run/measure.h"
#include "run/resident.h"
#include "run/stopwatch.h"
#include "run/survey_run.h"

#include <dirent.h>
#include <pthread.h>
#include <stdatomic.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>
#include <unistd.h>

#define LEDGER "build/bench-run.ledger"

static void fail(const char *what, const struct reason *why)
{
	(void)fprintf(stderr, "bench_run: %s: %s\n", what, why->text);
	exit(1);
}

/*
 * Other work on the machine slows two jobs more than one. So a thread looks
 * often at how many of the others run or wait for a processor: what is missing
 * to two was waiting for a lock or the disk, which is the harness's own doing.
 */
struct watcher {
	pthread_t thread;
	atomic_bool stop;
	double runnable; /* mean over the looks */
};

static unsigned runnable_threads(long self)
{
	DIR *tasks = opendir("/proc/self/task");
	const struct dirent *task;
	unsigned count = 0;

	while (tasks && (task = readdir(tasks))) {
		char path[300], state = '?';
		FILE *file;

		if (atol(task->d_name) == self || task->d_name[0] == '.')
			continue;
		(void)snprintf(path, sizeof(path), "/proc/self/task/%s/stat",
			       task->d_name);
		file = fopen(path, "r");
		if (file && fscanf(file, "%*d %*s %c", &state) == 1)
			count += state == 'R';
		if (file)
			(void)fclose(file);
	}
	if (tasks)
		(void)closedir(tasks);
	return count;
}

/* The number that the watcher's own thread has in /proc. */
static long own_task(void)
{
	char link[64] = "";
	const char *slash;

	if (readlink("/proc/thread-self", link, sizeof(link) - 1) < 0)
		return 0;
	slash = strrchr(link, '/');
	return slash ? atol(slash + 1) : 0;
}

static void *watch(void *context)
{
	const struct timespec pause = {0, 5000000};
	struct watcher *watcher = context;
	long self = own_task();
	unsigned looks = 0, seen = 0;

	while (!atomic_load(&watcher->stop)) {
		seen += runnable_threads(self);
		looks++;
		(void)nanosleep(&pause, NULL);
	}
	watcher->runnable = looks ? (double)seen / looks : 0;
	return NULL;
}

/* A whole survey: wall seconds, and CPU of the process through *cpu. */
static double survey_seconds(const struct plan *plan, unsigned jobs,
			     double *cpu, double *runnable)
{
	struct watcher watcher = {.runnable = 0};
	struct run_rules rules = {.jobs = jobs,
				  .orders = 16,
				  .part = 1,
				  .parts = 1,
				  .program = "bench"};
	struct run_outcome outcome;
	struct reason why = {""};
	struct ledger *ledger;
	struct stopwatch stopwatch;
	double before = process_cpu_seconds(), seconds;

	(void)unlink(LEDGER);
	if (pthread_create(&watcher.thread, NULL, watch, &watcher) != 0)
		exit(1);
	stopwatch_start(&stopwatch);
	if (ledger_open(LEDGER, LEDGER_WRITE, &ledger, &why) != STATUS_OK ||
	    survey_run(plan, ledger, &rules, &outcome, &why) != STATUS_OK)
		fail("survey", &why);
	ledger_close(ledger);
	seconds = stopwatch_seconds(&stopwatch);
	*cpu = process_cpu_seconds() - before;
	atomic_store(&watcher.stop, true);
	(void)pthread_join(watcher.thread, NULL);
	*runnable = watcher.runnable;
	return seconds;
}

static void drop_method(void *context, const struct plan_item *item,
			size_t place, const struct method_fact *method)
{
	(void)context;
	(void)item;
	(void)place;
	(void)method;
}

/* The codecs and estimators alone, without ledger, threads or plan. */
static double bare_cpu(const struct plan *plan)
{
	double cpu = 0;

	for (size_t i = 0; i < plan->item_count; i++) {
		const struct plan_item *item = &plan->items[i];
		struct resident resident;
		double before;

		if (resident_init(&resident, &plan->set->corpora[item->corpus],
				  1) != STATUS_OK)
			exit(1);
		if (resident_take(&resident, memory_available()) == STATUS_OK) {
			const struct measure_rows rows = {
				.item = item,
				.sequence = &resident.sequence,
				.cuts = &resident.cuts,
				.orders = 16,
				.put = drop_method,
			};
			struct cell_fact cell;

			before = process_cpu_seconds();
			if (item->rows) {
				measure_rows(&rows);
			} else {
				measure_cell(item->cell, &resident.sequence,
					     &resident.cuts, &cell);
				cell_fact_release(&cell);
			}
			cpu += process_cpu_seconds() - before;
		}
		resident_drop(&resident);
		resident_release(&resident);
	}
	return cpu;
}

int main(int argc, char **argv)
{
	const struct selection all = {.part = 1, .parts = 1};
	const char *path = argc > 1 ? argv[1] : "corpora/starter.set";
	struct set set;
	struct plan plan;
	struct reason why = {""};
	double one, two, cpu, cpu_two, bare, busy_one, busy_two, busy;

	if (set_load(path, false, &set, &why) != STATUS_OK ||
	    plan_init(&plan, &set, &all, &why) != STATUS_OK)
		fail(path, &why);
	bare = bare_cpu(&plan);
	one = survey_seconds(&plan, 1, &cpu, &busy_one);
	two = survey_seconds(&plan, 2, &cpu_two, &busy_two);
	(void)printf("harness CPU / codec and estimator CPU   %.3f  (at most "
		     "1.05)  %s\n",
		     cpu / bare, cpu / bare <= 1.05 ? "ok" : "over");
	(void)printf("speed of two jobs / one                 %.3f  (at least "
		     "1.8)  %s\n",
		     one / two, one / two >= 1.8 ? "ok" : "under");
	/* Two jobs that were never kept waiting, and took no more CPU. */
	busy = busy_two / busy_one * cpu / cpu_two;
	(void)printf(
		"the same, had the machine been free        %.3f  (at least "
		"1.8)  %s\n",
		busy, busy >= 1.8 ? "ok" : "under");
	plan_release(&plan);
	set_release(&set);
	(void)unlink(LEDGER);
	return 0;
}
