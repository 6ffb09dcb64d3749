#include "cli/commands.h"
#include "cli/fetcher.h"
#include "cli/made.h"
#include "corpus/corpus.h"
#include "corpus/set_file.h"

#include <stdio.h>
#include <string.h>
#include <sys/stat.h>

/* The state of one declared corpus, in our own words. */
static const char *state_of(const struct set_corpus *declared,
			    struct corpus *corpus, enum status *status,
			    struct reason *why)
{
	*status = corpus_open(declared, memory_available(), corpus, why);
	if (*status == STATUS_OK)
		return declared->sha256[0] ? "good" : "no digest";
	if (*status == STATUS_NOT_FOUND)
		return "absent";
	return *status == STATUS_MISMATCH ? "other bytes" : "unusable";
}

static enum exit_code list_corpora(const struct set *set)
{
	for (size_t i = 0; i < set->corpus_count; i++) {
		const struct set_corpus *corpus = &set->corpora[i];

		(void)printf("%-26s %-10s %-20s %s\n", corpus->name,
			     symbol_kind_name(corpus->rules.kind),
			     corpus->licence, corpus->origin);
	}
	return EXIT_DONE;
}

static enum exit_code verify_corpora(const struct set *set)
{
	enum exit_code code = EXIT_DONE;

	for (size_t i = 0; i < set->corpus_count; i++) {
		struct corpus corpus;
		struct reason why = {""};
		enum status status;
		const char *state =
			state_of(&set->corpora[i], &corpus, &status, &why);

		if (status == STATUS_OK) {
			(void)printf("%-26s %-12s %12zu bytes  sha256 %s\n",
				     set->corpora[i].name, state, corpus.length,
				     corpus.sha256);
			corpus_close(&corpus);
			continue;
		}
		(void)printf("%-26s %-12s %s\n", set->corpora[i].name, state,
			     why.text);
		code = EXIT_FAILED;
	}
	return code;
}

static bool is_good(const struct set_corpus *declared)
{
	struct corpus corpus;
	struct reason why;
	enum status status;

	(void)state_of(declared, &corpus, &status, &why);
	if (status != STATUS_OK)
		return false;
	corpus_close(&corpus);
	return true;
}

/* The folder of a path, made if it is not there; its parent must be. */
static void folder_of(const char *path, char folder[4096])
{
	char *slash;

	(void)snprintf(folder, 4096, "%s", path);
	slash = strrchr(folder, '/');
	if (slash)
		*slash = '\0';
	else
		(void)snprintf(folder, 4096, ".");
	(void)mkdir(folder, 0777);
}

static bool make_one(const struct set_corpus *declared, const char *name,
		     uint64_t symbols, uint64_t seed)
{
	struct reason why = {""};
	char folder[4096];
	double rate;

	folder_of(declared->file, folder);
	if (made_write(name, symbols, seed, declared->file, &rate, &why) ==
		    STATUS_OK &&
	    is_good(declared)) {
		(void)printf("%-26s made\n", declared->name);
		return true;
	}
	(void)printf("%-26s failed: %s\n", declared->name,
		     why.text[0] ? why.text
				 : "what was made has another digest than "
				   "the set file says");
	return false;
}

/* The corpora that the script is to fetch, gathered by folder. */
struct errand {
	char folder[4096];
	const char *names[256];
	size_t count;
};

static bool run_errand(struct errand *errand)
{
	struct reason why = {""};
	int all_there = 1;
	enum status status = STATUS_OK;

	if (errand->count) {
		(void)fflush(stdout);
		status = fetcher_run(errand->folder, errand->names,
				     errand->count, &all_there, &why);
	}
	errand->count = 0;
	if (status != STATUS_OK)
		(void)fprintf(stderr, "ratefloor corpora: %s\n", why.text);
	return status == STATUS_OK && all_there;
}

static bool add_errand(struct errand *errand, const struct set_corpus *declared)
{
	char folder[4096];
	const char *slash = strrchr(declared->file, '/');
	bool good = true;

	folder_of(declared->file, folder);
	if (errand->count == 256 || strcmp(folder, errand->folder) != 0)
		good = run_errand(errand);
	(void)snprintf(errand->folder, sizeof(errand->folder), "%s", folder);
	errand->names[errand->count++] = slash ? slash + 1 : declared->file;
	return good;
}

static enum exit_code fetch_corpora(const struct set *set)
{
	struct errand errand = {.count = 0};
	bool all = true;

	for (size_t i = 0; i < set->corpus_count; i++) {
		const struct set_corpus *declared = &set->corpora[i];
		char name[64];
		uint64_t symbols, seed;

		if (is_good(declared)) {
			(void)printf("%-26s there\n", declared->name);
			continue;
		}
		if (made_origin(declared->origin, name, &symbols, &seed) ==
		    STATUS_OK)
			all = make_one(declared, name, symbols, seed) && all;
		else if (declared->origin[0])
			all = add_errand(&errand, declared) && all;
		else
			(void)printf("%-26s has no origin in the set file: it "
				     "cannot be fetched\n",
				     declared->name);
	}
	all = run_errand(&errand) && all;
	return all ? EXIT_DONE : EXIT_FAILED;
}

static enum exit_code corpora_run(const struct words *words)
{
	static const struct {
		const char *name;
		enum exit_code (*run)(const struct set *set);
	} actions[] = {{"list", list_corpora},
		       {"verify", verify_corpora},
		       {"fetch", fetch_corpora}};
	struct reason why = {""};
	struct set set;

	for (size_t i = 0; i < sizeof(actions) / sizeof(*actions); i++) {
		enum exit_code code;

		if (strcmp(words->operands[0], actions[i].name) != 0)
			continue;
		if (set_load(words->operands[1],
			     words_get(words, "outside") != NULL, &set,
			     &why) != STATUS_OK)
			return complain(words, &why);
		code = actions[i].run(&set);
		set_release(&set);
		return code;
	}
	(void)reason_give(&why, STATUS_BAD_USAGE,
			  "'%s' is none of list, verify and fetch",
			  words->operands[0]);
	return complain(words, &why);
}

static const struct option_row options[] = {
	{"outside", NULL, "corpora may lie outside the set file's folder"},
	{NULL, NULL, NULL},
};

const struct command command_corpora = {
	.name = "corpora",
	.operands = "list|verify|fetch SET",
	.operands_min = 2,
	.operands_max = 2,
	.summary = "lists, checks or brings the corpora of a set",
	.description =
		"list shows what the set declares. verify opens each corpus "
		"and\n"
		"compares its digest; exit code 1 if any is absent or "
		"differs.\n"
		"fetch brings those that are not good: made ones from their\n"
		"source, open ones by the package that their origin names.\n"
		"What is there and good is left alone.",
	.examples = "  ratefloor corpora fetch corpora/starter.set\n"
		    "  ratefloor corpora verify corpora/nightly.set",
	.options = options,
	.run = corpora_run,
};
