/* Dictionaries, units of storage, threads and filters: do cells count them? */
#include "codec/codec.h"

#include "support/bytes.h"
#include "support/near.h"

#include <string.h>
#include <zdict.h>
#include <zstd.h>

#define PAGE 512
#define PAGES 900
#define LENGTH (PAGE * PAGES - 120)
#define DICTIONARY 1024

static uint8_t bytes[LENGTH];

static enum status measure_cell(const char *name,
				const struct setting_words *words,
				size_t page_bytes, size_t storage_unit,
				struct cell_facts *facts, struct reason *why)
{
	const struct symbol_rules rules = {.kind = SYMBOL_BYTE};
	struct sequence sequence;
	struct cuts cuts;
	struct codec_setting setting;
	enum status status;

	assert_int_equal(setting_parse(codec_find(name), words, &setting, why),
			 STATUS_OK);
	setting.storage_unit = storage_unit;
	assert_int_equal(sequence_init(&sequence, (struct slice){bytes, LENGTH},
				       &rules, why),
			 STATUS_OK);
	assert_int_equal(cuts_init(&cuts, &sequence), STATUS_OK);
	status = cell_measure(codec_find(name), &setting, page_bytes, &sequence,
			      &cuts, facts, why);
	cuts_release(&cuts);
	sequence_release(&sequence);
	return status;
}

static void measure(const char *name, const struct setting_words *words,
		    size_t page_bytes, size_t storage_unit,
		    struct cell_facts *facts)
{
	struct reason why = {""};

	if (measure_cell(name, words, page_bytes, storage_unit, facts, &why) !=
	    STATUS_OK)
		fail_msg("%s", why.text);
	assert_true(facts->lossless);
	assert_true(costs_block_total(&facts->flushed) ==
		    facts->flushed.headline_q16);
}

/* Pages of one parity through the library's one-shot calls. */
static size_t half_by_hand(size_t parity)
{
	static uint8_t samples[LENGTH], dictionary[DICTIONARY],
		packed[2 * PAGE];
	size_t sizes[PAGES], count = 0, used = 0, sum;
	ZSTD_CCtx *context = ZSTD_createCCtx();
	ZSTD_CDict *ready;

	assert_non_null(context);
	for (size_t i = 1 - parity; i < PAGES; i += 2) {
		size_t left = LENGTH - i * PAGE;

		sizes[count] = left < PAGE ? left : PAGE;
		memcpy(samples + used, bytes + i * PAGE, sizes[count]);
		used += sizes[count++];
	}
	sum = ZDICT_trainFromBuffer(dictionary, DICTIONARY, samples, sizes,
				    (unsigned)count);
	assert_false(ZDICT_isError(sum));
	ready = ZSTD_createCDict(dictionary, sum, 3);
	assert_non_null(ready);
	for (size_t i = parity; i < PAGES; i += 2) {
		size_t left = LENGTH - i * PAGE;

		sum += ZSTD_compress_usingCDict(
			context, packed, sizeof(packed), bytes + i * PAGE,
			left < PAGE ? left : PAGE, ready);
	}
	(void)ZSTD_freeCDict(ready);
	(void)ZSTD_freeCCtx(context);
	return sum;
}

static void
dictionaries_are_counted_and_help_where_pages_are_alike(void **state)
{
	struct setting_words words = {"3", NULL, NULL, "1K"};
	struct cell_facts with, without;
	size_t by_hand;

	(void)state;
	bytes_words(bytes, LENGTH, 31);
	measure("zstd", &words, PAGE, 0, &with);
	words.dictionary = NULL;
	measure("zstd", &words, PAGE, 0, &without);
	assert_int_equal(without.dictionary_bytes, 0);
	assert_in_range(with.dictionary_bytes, 512, (size_t)2 * DICTIONARY);
	assert_int_equal(with.pages, PAGES);
	/* The same work by libzstd's one-shot calls. */
	by_hand = half_by_hand(0) + half_by_hand(1);
	assert_int_equal(with.bytes, by_hand);
	/* Pages near a block's length are flushed inside; both count in it. */
	assert_in_range(with.flushed_bytes, with.bytes, with.bytes * 13 / 10);
	assert_true(with.bytes < without.bytes);
	cell_facts_release(&with);
	cell_facts_release(&without);
}

/*
 * Even pages share words that odd ones never use: what one half teaches is of
 * no use to the other, unless a page met the dictionary it was trained for.
 */
static void no_page_meets_what_it_taught(void **state)
{
	struct setting_words words = {"3", NULL, NULL, "1K"};
	struct cell_facts with, without;

	(void)state;
	for (size_t i = 0; i < PAGES; i++) {
		size_t left = LENGTH - i * PAGE;
		size_t length = left < PAGE ? left : PAGE;
		uint8_t page[PAGE];

		/* Half of a page is the same in all of its parity. */
		bytes_random(page, PAGE / 2, i % 2);
		bytes_random(page + PAGE / 2, PAGE / 2, 100 + i);
		memcpy(bytes + i * PAGE, page, length);
	}
	measure("zstd", &words, PAGE, 0, &with);
	words.dictionary = NULL;
	measure("zstd", &words, PAGE, 0, &without);
	assert_true(with.bytes >= without.bytes);
	cell_facts_release(&with);
	cell_facts_release(&without);
}

static void too_few_pages_teach_nothing(void **state)
{
	const struct setting_words words = {"3", NULL, NULL, "64K"};
	struct cell_facts facts;
	struct reason why = {""};

	(void)state;
	bytes_words(bytes, LENGTH, 31);
	assert_int_equal(measure_cell("zstd", &words, LENGTH, 0, &facts, &why),
			 STATUS_TOO_SHORT);
	assert_non_null(strstr(why.text, "one page"));
	assert_int_equal(
		measure_cell("zstd", &words, LENGTH / 3, 0, &facts, &why),
		STATUS_TOO_SHORT);
	assert_non_null(strstr(why.text, "learns no dictionary"));
}

static void storage_takes_whole_units(void **state)
{
	const struct setting_words words = {"0", NULL, NULL, NULL};
	struct cell_facts facts;

	(void)state;
	bytes_words(bytes, LENGTH, 1);
	measure("store", &words, 0, 4096, &facts);
	assert_int_equal(facts.stored_bytes, (LENGTH / 4096 + 1) * 4096);
	assert_int_equal(facts.storage_unit, 4096);
	assert_int_equal(facts.bytes, LENGTH);
	cell_facts_release(&facts);
	/* 1000 bytes a page take two sectors, the last 680 as well. */
	measure("store", &words, 1000, 512, &facts);
	assert_int_equal(LENGTH % 1000, 680);
	assert_int_equal(facts.stored_bytes, (LENGTH / 1000 + 1) * 1024);
	cell_facts_release(&facts);
	measure("store", &words, 1000, 0, &facts);
	assert_int_equal(facts.storage_unit, 0);
	assert_int_equal(facts.stored_bytes, 0);
	cell_facts_release(&facts);
}

static void threads_give_the_same_bytes(void **state)
{
	const struct setting_words words = {"3", NULL, "threads:2", NULL};
	struct cell_facts facts;

	(void)state;
	bytes_words(bytes, LENGTH, 2);
	measure("zstd", &words, 0, 0, &facts);
	assert_true(facts.bytes < LENGTH);
	/* What threads ask for together hangs on when they meet. */
	assert_true(facts.encode_memory_bytes == CELL_MEMORY_UNKNOWN);
	assert_true(facts.decode_memory_bytes > 0 &&
		    facts.decode_memory_bytes != CELL_MEMORY_UNKNOWN);
	cell_facts_release(&facts);
}

/* A codec whose second run differs, as threads that race would. */
static enum status race(const struct codec_job *job, struct buffer *out,
			struct reason *why)
{
	static uint8_t run;

	(void)why;
	assert_int_equal(buffer_add(out, &run, 1), STATUS_OK);
	run++;
	return buffer_add(out, job->input.bytes, job->input.length);
}

static void threads_that_race_are_found_out(void **state)
{
	const struct symbol_rules rules = {.kind = SYMBOL_BYTE};
	const struct codec_setting setting = {.text = "0", .threads = 2};
	struct codec racing = *codec_find("store");
	struct sequence sequence;
	struct cuts cuts;
	struct cell_facts facts;
	struct reason why = {""};

	(void)state;
	racing.encode = race;
	assert_int_equal(sequence_init(&sequence, (struct slice){bytes, LENGTH},
				       &rules, &why),
			 STATUS_OK);
	assert_int_equal(cuts_init(&cuts, &sequence), STATUS_OK);
	assert_int_equal(cell_measure(&racing, &setting, 0, &sequence, &cuts,
				      &facts, &why),
			 STATUS_CODEC);
	assert_non_null(strstr(why.text, "not reproducible"));
	cuts_release(&cuts);
	sequence_release(&sequence);
}

static void a_filter_that_cannot_flush_has_no_blocks(void **state)
{
	const struct setting_words words = {"0", NULL, "arm64", NULL};
	struct cell_facts facts;

	(void)state;
	bytes_words(bytes, LENGTH, 2);
	measure("xz", &words, 0, 0, &facts);
	assert_int_equal(facts.flushed.blocks, 0);
	cell_facts_release(&facts);
	measure("xz", &words, 1000, 0, &facts);
	assert_true(facts.flushed.blocks > 0);
	cell_facts_release(&facts);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(
			dictionaries_are_counted_and_help_where_pages_are_alike),
		cmocka_unit_test(no_page_meets_what_it_taught),
		cmocka_unit_test(too_few_pages_teach_nothing),
		cmocka_unit_test(storage_takes_whole_units),
		cmocka_unit_test(threads_give_the_same_bytes),
		cmocka_unit_test(threads_that_race_are_found_out),
		cmocka_unit_test(a_filter_that_cannot_flush_has_no_blocks),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
