#define _XOPEN_SOURCE 700 /* mkdtemp, symlink */
/* Are a corpus's bytes read whole, identified, and refused where they must? */
#include "corpus/corpus.h"

#include "support/near.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <unistd.h>

/* A folder with a file "abc", an empty one, a folder, a pipe and two links. */
struct place {
	char folder[64];
	char path[128];
	struct set_corpus entry;
};

static void put(struct place *place, const char *name, const char *bytes)
{
	FILE *file;

	(void)snprintf(place->path, sizeof(place->path), "%s/%s", place->folder,
		       name);
	file = fopen(place->path, "wb");
	assert_non_null(file);
	assert_int_equal(fwrite(bytes, 1, strlen(bytes), file), strlen(bytes));
	assert_int_equal(fclose(file), 0);
}

static void aim(struct place *place, const char *name)
{
	(void)snprintf(place->path, sizeof(place->path), "%s/%s", place->folder,
		       name);
	place->entry.file = place->path;
}

static int set_up(void **state)
{
	static char empty[] = "";
	struct place *place = calloc(1, sizeof(*place));

	assert_non_null(place);
	strcpy(place->folder, "/tmp/ratefloor-corpus-XXXXXX");
	assert_non_null(mkdtemp(place->folder));
	put(place, "abc", "abc");
	put(place, "empty", "");
	aim(place, "pipe");
	assert_int_equal(mkfifo(place->path, 0600), 0);
	aim(place, "inner");
	assert_int_equal(symlink("abc", place->path), 0);
	aim(place, "outer");
	assert_int_equal(symlink("/bin/sh", place->path), 0);
	place->entry.origin = empty;
	place->entry.within = place->folder;
	aim(place, "abc");
	*state = place;
	return 0;
}

static int tear_down(void **state)
{
	static const char *const names[] = {"abc", "empty", "pipe", "inner",
					    "outer"};
	struct place *place = *state;

	for (size_t i = 0; i < sizeof(names) / sizeof(names[0]); i++) {
		aim(place, names[i]);
		(void)unlink(place->path);
	}
	(void)rmdir(place->folder);
	free(place);
	return 0;
}

/* FIPS 180-4's example "abc" (NIST, SHA-256 examples). */
static const char abc_digest[] = "ba7816bf8f01cfea414140de5dae2223"
				 "b00361a396177a9cb410ff61f20015ad";

static void bytes_and_digest_are_right(void **state)
{
	struct place *place = *state;
	struct corpus corpus;

	strcpy(place->entry.sha256, abc_digest);
	assert_int_equal(corpus_open(&place->entry, UINT64_MAX, &corpus, NULL),
			 STATUS_OK);
	assert_int_equal(corpus.length, 3);
	assert_memory_equal(corpus_bytes(&corpus).bytes, "abc", 3);
	assert_int_equal(corpus_bytes(&corpus).length, 3);
	assert_string_equal(corpus.sha256, abc_digest);
	corpus_close(&corpus);
	corpus_close(&corpus);
}

static void refused(struct place *place, uint64_t limit, enum status wanted,
		    const char *words)
{
	struct corpus corpus = {.length = 77};
	struct reason why = {""};

	assert_int_equal(corpus_open(&place->entry, limit, &corpus, &why),
			 wanted);
	if (!strstr(why.text, words) || !strstr(why.text, place->path))
		fail_msg("\"%s\" does not say \"%s\"", why.text, words);
	assert_int_equal(corpus.length, 77);
	assert_int_equal(corpus_open(&place->entry, limit, &corpus, NULL),
			 wanted);
}

static void what_cannot_be_read_is_refused(void **state)
{
	static char origin[] = "ratefloor synth iid --seed 7";
	struct place *place = *state;

	aim(place, "none");
	refused(place, UINT64_MAX, STATUS_NOT_FOUND, "no such file");
	place->entry.origin = origin;
	refused(place, UINT64_MAX, STATUS_NOT_FOUND,
		"it comes from: ratefloor synth iid --seed 7");
	aim(place, "abc/below");
	refused(place, UINT64_MAX, STATUS_NOT_FOUND, "no such file");
	aim(place, "empty");
	refused(place, UINT64_MAX, STATUS_BAD_INPUT, "empty");
	aim(place, "pipe");
	refused(place, UINT64_MAX, STATUS_IO, "no regular file");
	aim(place, "abc");
	place->entry.within = NULL;
	(void)snprintf(place->path, sizeof(place->path), "%s", place->folder);
	refused(place, UINT64_MAX, STATUS_IO, "a folder");
}

static void unreadable_files_are_refused(void **state)
{
	struct place *place = *state;

	if (geteuid() == 0)
		skip(); /* nothing is unreadable to root */
	assert_int_equal(chmod(place->path, 0), 0);
	refused(place, UINT64_MAX, STATUS_IO, "cannot be read");
}

static void a_wrong_digest_says_both(void **state)
{
	struct place *place = *state;

	memset(place->entry.sha256, '0', 64);
	refused(place, UINT64_MAX, STATUS_MISMATCH,
		"expected 0000000000000000000000000000000000000000000000000000"
		"000000000000, found ba7816bf");
}

static void the_memory_needed_is_named(void **state)
{
	struct place *place = *state;
	struct corpus corpus;

	/* Sparse: 3 GiB that take no room on the disk. */
	assert_int_equal(truncate(place->path, (off_t)3 << 30), 0);
	refused(place, (uint64_t)1 << 30, STATUS_NO_MEMORY,
		"3221225472 bytes need 49153 MiB of memory");
	refused(place, (uint64_t)1 << 30, STATUS_NO_MEMORY,
		"1024 MiB may be used");
	assert_int_equal(truncate(place->path, 3), 0);
	refused(place, 47, STATUS_NO_MEMORY, "MiB");
	assert_int_equal(corpus_open(&place->entry, 48, &corpus, NULL),
			 STATUS_OK);
	corpus_close(&corpus);
}

static void links_may_not_leave_the_folder(void **state)
{
	struct place *place = *state;
	struct corpus corpus;

	aim(place, "inner");
	assert_int_equal(corpus_open(&place->entry, UINT64_MAX, &corpus, NULL),
			 STATUS_OK);
	corpus_close(&corpus);
	aim(place, "outer");
	refused(place, UINT64_MAX, STATUS_BAD_USAGE, "--outside");
	place->entry.within = NULL;
	assert_int_equal(corpus_open(&place->entry, UINT64_MAX, &corpus, NULL),
			 STATUS_OK);
	corpus_close(&corpus);
}

#define IN_PLACE(test) cmocka_unit_test_setup_teardown(test, set_up, tear_down)

int main(void)
{
	const struct CMUnitTest tests[] = {
		IN_PLACE(bytes_and_digest_are_right),
		IN_PLACE(what_cannot_be_read_is_refused),
		IN_PLACE(unreadable_files_are_refused),
		IN_PLACE(a_wrong_digest_says_both),
		IN_PLACE(the_memory_needed_is_named),
		IN_PLACE(links_may_not_leave_the_folder),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
