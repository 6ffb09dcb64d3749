/* Are times and memory measured again against the right cell and bytes? */
#include "run/retime.h"

#include "base/digest.h"
#include "support/ledger_file.h"
#include "support/near.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

#define BYTES 60000

/* A corpus in the scratch folder, and a set over it. */
struct fixture {
	struct set set;
	struct plan plan;
	char sha256[DIGEST_TEXT_BYTES];
};

static void fixture_init(const struct scratch *scratch, struct fixture *fixture)
{
	static const char text[] =
		"[set]\nname = bay\nyardstick = zlib 6\n"
		"[corpus frames]\nfile = frames.bin\nsymbols = byte\n"
		"[codec zlib]\nlevels = 6\nlayouts = 4K whole\n"
		"[codec store]\nlevels = 0\n";
	const struct slice slice = {(const uint8_t *)text, sizeof(text) - 1};
	const struct selection all = {.part = 1, .parts = 1};
	unsigned char bytes[BYTES];
	struct reason why = {""};
	char path[96];

	for (size_t i = 0; i < BYTES; i++)
		bytes[i] = (unsigned char)((i * i >> 7) ^ (i >> 3));
	scratch_path(scratch, "frames.bin", path);
	scratch_write(path, bytes, BYTES);
	digest_sha256(bytes, BYTES, fixture->sha256);
	scratch_path(scratch, "bay.set", path);
	if (set_parse(slice, path, false, &fixture->set, &why) != STATUS_OK ||
	    plan_init(&fixture->plan, &fixture->set, &all, &why) != STATUS_OK)
		fail_msg("%s", why.text);
}

static void fixture_release(struct fixture *fixture)
{
	plan_release(&fixture->plan);
	set_release(&fixture->set);
}

static struct retime_job job_of(const struct fixture *fixture,
				const struct cell_key *key)
{
	return (struct retime_job){
		.set = &fixture->set,
		.plan = &fixture->plan,
		.corpus = "frames",
		.sha256 = fixture->sha256,
		.yardstick = "zlib 6",
		.key = key,
	};
}

/* The yardstick's whole stream is preferred, so it is itself: a ratio of one,
 * by definition, as far as clocks go. */
static void a_yardstick_is_as_fast_as_itself(void **state)
{
	const struct cell_key key = {"zlib", "6", "whole"};
	struct retime_result result;
	struct reason why = {""};
	struct fixture fixture;
	struct retime_job job;

	fixture_init(*state, &fixture);
	job = job_of(&fixture, &key);
	job.memory = true;
	if (retime(&job, &result, &why) != STATUS_OK)
		fail_msg("%s", why.text);
	for (size_t i = 0; i < RATIO_COUNT; i++)
		assert_true(result.ratios[i].known);
	assert_near(log2(result.ratios[RATIO_ENCODE_TIME].value), 0, 0.5);
	assert_near(log2(result.ratios[RATIO_DECODE_TIME].value), 0, 0.5);
	assert_near(result.ratios[RATIO_ENCODE_MEMORY].value, 1, 0);
	assert_true(result.unrest >= 0);
	fixture_release(&fixture);
}

static void copying_is_faster_than_matching(void **state)
{
	const struct cell_key key = {"store", "0", "whole"};
	const double enough[RATIO_COUNT] = {HUGE_VAL, HUGE_VAL, HUGE_VAL,
					    HUGE_VAL};
	struct retime_result result;
	struct fixture fixture;
	struct retime_job job;

	fixture_init(*state, &fixture);
	job = job_of(&fixture, &key);
	job.enough = enough; /* after a few rounds */
	assert_int_equal(retime(&job, &result, NULL), STATUS_OK);
	assert_true(result.ratios[RATIO_ENCODE_TIME].known);
	assert_true(result.ratios[RATIO_ENCODE_TIME].value < 0.5);
	assert_false(result.ratios[RATIO_ENCODE_MEMORY].known);
	fixture_release(&fixture);
}

static void refused(const struct retime_job *job, enum status wanted,
		    const char *words)
{
	struct retime_result result = {.unrest = 7};
	struct reason why = {""};

	assert_int_equal(retime(job, &result, &why), wanted);
	if (!strstr(why.text, words))
		fail_msg("'%s' lacks '%s'", why.text, words);
	assert_near(result.unrest, 7, 0);
}

static void what_is_not_there_is_named(void **state)
{
	const struct cell_key key = {"zlib", "6", "4096"};
	const struct cell_key other = {"zlib", "7", "4096"};
	const volatile sig_atomic_t stop = 1;
	struct fixture fixture;
	struct retime_job job;
	char path[96];

	fixture_init(*state, &fixture);
	job = job_of(&fixture, &key);
	job.corpus = "tides";
	refused(&job, STATUS_NOT_FOUND, "tides");
	job = job_of(&fixture, &other);
	refused(&job, STATUS_NOT_FOUND, "zlib");
	job = job_of(&fixture, &key);
	job.yardstick = "xz 9";
	refused(&job, STATUS_NOT_FOUND, "xz 9");
	job = job_of(&fixture, &key);
	job.stop = &stop;
	refused(&job, STATUS_CANCELLED, "stopped");
	job = job_of(&fixture, &key);
	scratch_path(*state, "frames.bin", path);
	scratch_write(path, "fresh data of tonight", 21);
	refused(&job, STATUS_MISMATCH, "frames has other bytes");
	fixture_release(&fixture);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		scratch_test(a_yardstick_is_as_fast_as_itself),
		scratch_test(copying_is_faster_than_matching),
		scratch_test(what_is_not_there_is_named),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
