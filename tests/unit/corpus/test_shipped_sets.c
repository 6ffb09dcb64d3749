/*
 * Are the sets that come with the program valid, and do they name the files and
 * digests that scripts/fetch-corpora brings?
 */
#include "base/digest.h"
#include "corpus/set_file.h"
#include "source/source.h"

#include "support/near.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static const char *script_text(void)
{
	static char text[1 << 16];
	FILE *file = fopen("scripts/fetch-corpora", "rb");
	size_t length;

	assert_non_null(file);
	length = fread(text, 1, sizeof(text) - 1, file);
	(void)fclose(file);
	assert_true(length > 0 && length < sizeof(text) - 1);
	text[length] = '\0';
	return text;
}

/* The row "NAME|set|…|digest" of a file, copied; fails where there is none. */
static void row_of(const char *file, char row[512])
{
	const char *name = strrchr(file, '/') + 1;
	char head[128];
	const char *found;

	(void)snprintf(head, sizeof(head), "\n%s|", name);
	found = strstr(script_text(), head);
	if (!found)
		fail_msg("scripts/fetch-corpora knows no %s", name);
	(void)snprintf(row, 512, "%.*s", (int)strcspn(found + 1, "\n"),
		       found + 1);
}

static void check_fetched(const struct set *set,
			  const struct set_corpus *corpus)
{
	char row[512];

	row_of(corpus->file, row);
	assert_int_equal(strlen(corpus->sha256), 64);
	if (!strstr(row, corpus->sha256))
		fail_msg("%s: another digest in the script", corpus->name);
	/* A newcomer's set must be all in the script's set of that name. */
	if (strcmp(set->name, "starter") == 0)
		assert_non_null(strstr(row, "|starter|"));
	assert_true(strncmp(corpus->origin, "Debian package ", 15) == 0);
}

/* What the set file says of a made corpus, against its source. */
static void check_made(const struct set_corpus *corpus)
{
	char name[64], digest[DIGEST_TEXT_BYTES], rest;
	unsigned long symbols, seed;
	const struct source *source;
	uint8_t *bytes;

	assert_int_equal(sscanf(corpus->origin,
				"ratefloor synth %63s --symbols %lu --seed %lu "
				"%c",
				name, &symbols, &seed, &rest),
			 3);
	source = source_find(name);
	assert_non_null(source);
	assert_true(corpus->rate_known);
	assert_near(corpus->known_rate, source->bits_per_symbol(), 5e-10);
	bytes = malloc(symbols);
	assert_non_null(bytes);
	source_fill(source, symbols, seed, bytes);
	digest_sha256(bytes, symbols, digest);
	assert_string_equal(digest, corpus->sha256);
	free(bytes);
}

static size_t check_set(const char *path)
{
	struct reason why = {""};
	struct set set;
	size_t fetched = 0;

	if (set_load(path, false, &set, &why) != STATUS_OK)
		fail_msg("%s", why.text);
	for (size_t i = 0; i < set.corpus_count; i++) {
		const struct set_corpus *corpus = &set.corpora[i];

		assert_true(*corpus->licence && *corpus->origin);
		if (strncmp(corpus->file, "corpora/fetched/", 16) == 0) {
			check_fetched(&set, corpus);
			fetched++;
			continue;
		}
		assert_true(strncmp(corpus->file, "corpora/made/", 13) == 0);
		check_made(corpus);
	}
	assert_int_equal(set.codec_count, 4);
	set_release(&set);
	return fetched;
}

static void they_agree_with_the_script(void **state)
{
	(void)state;
	assert_int_equal(check_set("corpora/starter.set"), 5);
	assert_int_equal(check_set("corpora/nightly.set"), 17);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(they_agree_with_the_script),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
