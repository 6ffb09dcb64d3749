/* Left of the ledger: does every allocation that fails leave things clean? */
#include "faults/inject.h"

#include "codec/codec.h"
#include "corpus/corpus.h"
#include "estimate/estimator.h"
#include "suffix/suffix.h"

#include "support/bytes.h"
#include "support/near.h"

#include <string.h>

#define LENGTH 12000
#define MOST 60

static uint8_t bytes[LENGTH];

static enum status map_kind(void *context)
{
	const struct symbol_rules *rules = context;
	struct sequence sequence;
	struct cuts cuts;
	struct reason why;
	enum status status;

	TRY(sequence_init(&sequence, (struct slice){bytes, LENGTH}, rules,
			  &why));
	status = cuts_init(&cuts, &sequence);
	if (status == STATUS_OK)
		cuts_release(&cuts);
	sequence_release(&sequence);
	return status;
}

static void every_symbol_kind(void **state)
{
	(void)state;
	for (int kind = 0; kind < SYMBOL_KIND_COUNT; kind++) {
		struct symbol_rules rules = {.kind = (enum symbol_kind)kind};

		bytes_words(bytes, LENGTH, 1);
		if (kind == SYMBOL_NUCLEOTIDE)
			memset(bytes, 'A', LENGTH);
		inject_each(map_kind, &rules, MOST);
	}
}

struct fixture {
	struct sequence sequence;
	struct cuts cuts;
	struct suffix suffix;
	const struct estimator *row;
	const struct codec *codec;
	const char *level;
	size_t page_bytes;
};

static void open_fixture(struct fixture *fixture)
{
	const struct symbol_rules rules = {.kind = SYMBOL_BYTE};
	struct reason why;

	bytes_words(bytes, LENGTH, 2);
	assert_int_equal(sequence_init(&fixture->sequence,
				       (struct slice){bytes, LENGTH}, &rules,
				       &why),
			 STATUS_OK);
	assert_int_equal(cuts_init(&fixture->cuts, &fixture->sequence),
			 STATUS_OK);
	assert_int_equal(
		suffix_init(&fixture->suffix, &fixture->sequence, 8, &why),
		STATUS_OK);
}

static void close_fixture(struct fixture *fixture)
{
	suffix_release(&fixture->suffix);
	cuts_release(&fixture->cuts);
	sequence_release(&fixture->sequence);
}

static enum status run_row(void *context)
{
	const struct fixture *fixture = context;
	const struct estimate_input input = {
		.sequence = &fixture->sequence,
		.cuts = &fixture->cuts,
		.suffix = &fixture->suffix,
		.orders = 8,
		.page_bytes = fixture->page_bytes,
		.threads = 1,
	};
	struct findings findings;
	struct reason why;

	TRY(fixture->row->measure(&input, &findings, &why));
	findings_release(&findings);
	return STATUS_OK;
}

static void every_estimator(void **state)
{
	struct fixture fixture = {.row = NULL};

	(void)state;
	open_fixture(&fixture);
	for (size_t i = 0; estimators[i]; i++) {
		fixture.row = estimators[i];
		/* Warm rows are for pages only. */
		fixture.page_bytes = estimators[i]->warm ? LENGTH / 4 : 0;
		inject_each(run_row, &fixture, 12);
	}
	close_fixture(&fixture);
}

static enum status sort_suffixes(void *context)
{
	const struct fixture *fixture = context;
	struct suffix suffix;
	struct reason why;

	TRY(suffix_init(&suffix, &fixture->sequence, 8, &why));
	suffix_release(&suffix);
	return STATUS_OK;
}

static void the_suffix_order(void **state)
{
	struct fixture fixture = {.row = NULL};

	(void)state;
	open_fixture(&fixture);
	inject_each(sort_suffixes, &fixture, MOST);
	close_fixture(&fixture);
}

static enum status run_cell(void *context)
{
	const struct fixture *fixture = context;
	struct codec_setting setting = {.text = ""};
	struct cell_facts facts;
	struct reason why;

	TRY(fixture->codec->parse(fixture->level, &setting, &why));
	TRY(cell_measure(fixture->codec, &setting, fixture->page_bytes,
			 &fixture->sequence, &fixture->cuts, &facts, &why));
	cell_facts_release(&facts);
	return STATUS_OK;
}

static void every_codec(void **state)
{
	static const char *const levels[][2] = {
		{"store", "0"}, {"zlib", "6"}, {"xz", "1"}, {"zstd", "3"}};
	struct fixture fixture = {.row = NULL};

	(void)state;
	open_fixture(&fixture);
	for (size_t i = 0; i < 4; i++) {
		fixture.codec = codec_find(levels[i][0]);
		fixture.level = levels[i][1];
		for (size_t page = 0; page <= 6000; page += 6000) {
			fixture.page_bytes = page;
			inject_each(run_cell, &fixture, MOST);
		}
	}
	close_fixture(&fixture);
}

static enum status read_set(void *context)
{
	static const char text[] =
		"[set]\nname = bay\ngap-limit = 40%\nyardstick = zstd 3\n"
		"[corpus a]\nfile = a.bin\nsymbols = byte\nrecords = lines\n"
		"licence = CC0-1.0\norigin = here\n"
		"[codec zlib]\nlevels = 1 6 9\nlayouts = whole 4K\n"
		"[codec zstd]\nlevels = 3\n";
	struct set set;
	struct reason why;

	(void)context;
	TRY(set_parse((struct slice){(const uint8_t *)text, sizeof(text) - 1},
		      "bay/bay.set", false, &set, &why));
	set_release(&set);
	return STATUS_OK;
}

static void a_set_file(void **state)
{
	(void)state;
	inject_each(read_set, NULL, 200);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(every_symbol_kind),
		cmocka_unit_test(the_suffix_order),
		cmocka_unit_test(every_estimator),
		cmocka_unit_test(every_codec),
		cmocka_unit_test(a_set_file),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
