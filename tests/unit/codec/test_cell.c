/* Do cells count, spread and check as their contract says? */
#include "codec/codec.h"

#include "support/bytes.h"
#include "support/near.h"

#include <string.h>

#define LENGTH 700001

static uint8_t bytes[LENGTH];

struct fixture {
	struct sequence sequence;
	struct cuts cuts;
};

static void open_fixture(struct fixture *fixture)
{
	const struct symbol_rules rules = {.kind = SYMBOL_BYTE};
	struct reason why;

	bytes_words(bytes, LENGTH, 4);
	assert_int_equal(sequence_init(&fixture->sequence,
				       (struct slice){bytes, LENGTH}, &rules,
				       &why),
			 STATUS_OK);
	assert_int_equal(cuts_init(&fixture->cuts, &fixture->sequence),
			 STATUS_OK);
}

static void close_fixture(struct fixture *fixture)
{
	cuts_release(&fixture->cuts);
	sequence_release(&fixture->sequence);
}

static void measure(const char *name, const char *level, size_t page_bytes,
		    const struct fixture *fixture, struct cell_facts *facts)
{
	const struct codec *codec = codec_find(name);
	struct codec_setting setting = {.text = ""};
	struct reason why = {""};

	assert_int_equal(codec->parse(level, &setting, &why), STATUS_OK);
	assert_int_equal(cell_measure(codec, &setting, page_bytes,
				      &fixture->sequence, &fixture->cuts, facts,
				      &why),
			 STATUS_OK);
	assert_true(facts->lossless);
	assert_int_equal(facts->flushed.blocks, fixture->cuts.blocks);
	assert_int_equal(costs_block_total(&facts->flushed),
			 facts->flushed.headline_q16);
}

static void store_costs_eight_bits_a_byte(void **state)
{
	struct fixture fixture;
	struct cell_facts facts;
	const size_t layouts[] = {0, 100, 4096, 65536, LENGTH - 1, LENGTH};

	(void)state;
	open_fixture(&fixture);
	for (size_t i = 0; i < sizeof(layouts) / sizeof(*layouts); i++) {
		measure("store", "0", layouts[i], &fixture, &facts);
		assert_int_equal(facts.bytes, LENGTH);
		assert_int_equal(facts.flushed_bytes, LENGTH);
		for (size_t b = 0; b < fixture.cuts.blocks; b++) {
			double wanted =
				8.0 * (double)(fixture.cuts.byte[b + 1] -
					       fixture.cuts.byte[b]);

			/* Rounding down at page ends moves units only. */
			assert_near(bits_from_q16(facts.flushed.block_q16[b]),
				    wanted, 0.01);
		}
		cell_facts_release(&facts);
	}
	close_fixture(&fixture);
}

static void flushing_costs_little(void **state)
{
	static const char *const rows[][2] = {
		{"zlib", "6"}, {"xz", "6"}, {"zstd", "3"}};
	struct fixture fixture;
	struct cell_facts facts;

	(void)state;
	open_fixture(&fixture);
	for (size_t i = 0; i < 3; i++) {
		measure(rows[i][0], rows[i][1], 0, &fixture, &facts);
		assert_int_equal(facts.pages, 1);
		assert_true(facts.flushed_bytes * 8 * (uint64_t)BIT_Q16 ==
			    (uint64_t)facts.flushed.headline_q16);
		/* Common practice, no source: some percent at 100 blocks. */
		assert_in_range(facts.flushed_bytes, facts.bytes * 99 / 100,
				facts.bytes * 120 / 100);
		assert_true(facts.encode_memory_bytes > 10000);
		assert_true(facts.decode_memory_bytes > 1000);
		cell_facts_release(&facts);
	}
	close_fixture(&fixture);
}

static void pages_are_streams_of_their_own(void **state)
{
	static const char *const rows[][2] = {
		{"zlib", "6"}, {"xz", "6"}, {"zstd", "3"}};
	/* Fixed container bytes of a page: RFC 1950, .xz with one block. */
	struct fixture fixture;
	struct cell_facts whole, paged;

	(void)state;
	open_fixture(&fixture);
	for (size_t i = 0; i < 3; i++) {
		const size_t pages[] = {1000, 65536};

		measure(rows[i][0], rows[i][1], 0, &fixture, &whole);
		for (size_t j = 0; j < 2; j++) {
			measure(rows[i][0], rows[i][1], pages[j], &fixture,
				&paged);
			assert_int_equal(paged.pages,
					 (LENGTH + pages[j] - 1) / pages[j]);
			assert_true(paged.bytes > whole.bytes);
			assert_true(paged.framing_bytes >=
				    paged.pages * whole.framing_bytes / 2);
			cell_facts_release(&paged);
		}
		cell_facts_release(&whole);
	}
	close_fixture(&fixture);
}

/* A codec that loses a byte: it must be found out, and where. */
static enum status lose(const struct codec_job *job, struct buffer *out,
			struct reason *why)
{
	(void)why;
	assert_int_equal(buffer_add(out, job->input.bytes, job->input.length),
			 STATUS_OK);
	if (out->length > 5000)
		out->bytes[5000] ^= 1;
	return STATUS_OK;
}

static void a_lossy_codec_is_found_out(void **state)
{
	struct codec lossy = *codec_find("store");
	const struct codec_setting setting = {.text = "0"};
	struct fixture fixture;
	struct cell_facts facts;
	struct reason why = {""};

	(void)state;
	lossy.decode = lose;
	open_fixture(&fixture);
	assert_int_equal(cell_measure(&lossy, &setting, 0, &fixture.sequence,
				      &fixture.cuts, &facts, &why),
			 STATUS_OK);
	assert_false(facts.lossless);
	assert_non_null(strstr(why.text, "byte 5000"));
	cell_facts_release(&facts);
	assert_int_equal(cell_measure(&lossy, &setting, 8192, &fixture.sequence,
				      &fixture.cuts, &facts, &why),
			 STATUS_OK);
	assert_false(facts.lossless);
	assert_non_null(strstr(why.text, "page at byte 0"));
	cell_facts_release(&facts);
	close_fixture(&fixture);
}

static double still(void)
{
	static double seconds;

	return seconds += 0.5;
}

static void rounds_are_timed_by_the_clock_given(void **state)
{
	const struct cell_clock clock = {still, still};
	const struct codec *codec = codec_find("zlib");
	struct codec_setting setting = {.text = ""};
	struct cell_round round;
	struct reason why;

	(void)state;
	bytes_words(bytes, LENGTH, 5);
	assert_int_equal(codec->parse("1", &setting, &why), STATUS_OK);
	assert_int_equal(cell_time(codec, &setting, 350001,
				   (struct slice){bytes, LENGTH}, &clock,
				   &round, &why),
			 STATUS_OK);
	/* Two pages, one step of two readings between start and end. */
	assert_near(round.encode_cpu, 2 * 1.0, 1e-12);
	assert_near(round.decode_wall, 2 * 1.0, 1e-12);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(store_costs_eight_bits_a_byte),
		cmocka_unit_test(flushing_costs_little),
		cmocka_unit_test(pages_are_streams_of_their_own),
		cmocka_unit_test(a_lossy_codec_is_found_out),
		cmocka_unit_test(rounds_are_timed_by_the_clock_given),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
