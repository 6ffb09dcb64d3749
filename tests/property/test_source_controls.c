/* Do the controls, and the chain inside the event feed, draw their laws? */
#include "source/source.h"

#include "support/near.h"
#include "support/plugin.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

enum { BYTES = 2000000 };

static uint8_t *drawn(const char *name, size_t bytes)
{
	uint8_t *out = malloc(bytes + 1);

	assert_non_null(out);
	out[bytes] = 0;
	source_fill(source_find(name), bytes, 7, out);
	return out;
}

/* H of runs of `bytes` bytes that begin at every multiple of stride. */
static double counted(const uint8_t *from, size_t bytes, size_t stride)
{
	struct codes codes = {0};
	double bits;

	for (size_t at = 0; at + stride <= BYTES; at += stride) {
		uint64_t code = 0;

		for (size_t k = 0; k < bytes; k++)
			code = code << 8 | from[at + k];
		codes_add(&codes, code);
	}
	bits = codes_entropy(&codes);
	codes_release(&codes);
	return bits;
}

static double rate_of(const char *name)
{
	return source_find(name)->bits_per_symbol();
}

static void bytes_of_one_kind(void **state)
{
	uint8_t *random = drawn("random", BYTES), *zeros = drawn("zeros", 999);
	uint8_t *iid = drawn("iid", BYTES);

	(void)state;
	/* Standard errors: of uniform bytes none but 255 chi-squares, 1e-5;
	 * of the Zipf-like ones sd 2.5 / sqrt n = .0018. */
	assert_near(counted(random, 1, 1), 8, 1e-4);
	assert_near(counted(iid, 1, 1), rate_of("iid"), .007);
	for (size_t i = 0; i < 999; i++)
		assert_int_equal(zeros[i], 0);
	free(random);
	free(zeros);
	free(iid);
}

/* Neighbours tell nothing of each other where symbols are independent. */
static void independent_bytes_are_independent(void **state)
{
	uint8_t *random = drawn("random", BYTES);
	struct codes pairs = {0};

	(void)state;
	for (size_t i = 0; i + 1 < BYTES; i++)
		codes_add(&pairs, (random[i] & 0xf0U) | random[i + 1] >> 4);
	assert_near(codes_entropy(&pairs), 8, 1e-4);
	codes_release(&pairs);
	free(random);
}

static void chains_of_letters(void **state)
{
	static const char *const names[] = {"chain", "strand"};

	(void)state;
	for (int i = 0; i < 2; i++) {
		uint8_t *bytes = drawn(names[i], BYTES + 2);
		double h1 = counted(bytes, 1, 1), h2 = counted(bytes, 2, 1);

		/* Order 1: h_2 is the rate and h_3 adds nothing. */
		assert_near(h2 - h1, rate_of(names[i]), .003);
		assert_near(counted(bytes, 3, 1) - h2, rate_of(names[i]), .003);
		free(bytes);
	}
}

static void fields_of_rec(void **state)
{
	uint8_t *bytes = drawn("rec", BYTES);
	double flag, bits, ones = 0, rises = 0, falls = 0;
	struct codes before = {0}, both = {0};

	(void)state;
	for (size_t i = 0; i < BYTES / 8; i++) {
		const uint8_t *record = bytes + 8 * i;

		assert_int_equal(record[0] | record[1] << 8 | record[2] << 16,
				 i);
		assert_int_equal(record[3], 0);
		assert_true(record[5] < 4);
		assert_true(record[6] < 2);
		if (i) {
			codes_add(&before, record[6 - 8]);
			codes_add(&both, record[6 - 8] * 2U + record[6]);
			ones += record[6 - 8];
			rises += !record[6 - 8] && record[6];
			falls += record[6 - 8] && !record[6];
		}
	}
	/* .01 and .1, four standard errors (.0002, .002). */
	assert_near(rises / (BYTES / 8 - 1 - ones), .01, .00085);
	assert_near(falls / ones, .1, .008);
	flag = codes_entropy(&both) - codes_entropy(&before);
	bits = counted(bytes + 4, 2, 8) + flag + counted(bytes + 7, 1, 8);
	/* 12.116084 bits of 250000 records, sd 1.5: .003. */
	assert_near(bits, 8 * rate_of("rec"), .012);
	codes_release(&before);
	codes_release(&both);
	free(bytes);
}

static double occurrences(const char *text, const char *event)
{
	char wanted[64] = "\"event\":\"";
	double count = 0;

	strcat(strcat(wanted, event), "\"");
	for (const char *at = text; (at = strstr(at, wanted)); at++)
		count++;
	return count;
}

/* The stationary law of the feed rests on equal weights within a cycle. */
static void events_of_a_cycle_are_equally_many(void **state)
{
	static const struct {
		const char *one, *other;
		double share; /* of all events */
	} cycles[] = {
		{"gate-open", "gate-closed", 12 / 175.},
		{"pump-start", "pump-stop", 18 / 175.},
		{"pump-start", "pump-steady", 18 / 175.},
		{"level-high", "level-normal", 9 / 175.},
		{"sensor-wake", "sensor-sleep", 24 / 175.},
		{"sensor-wake", "sensor-reading", 24 / 175.},
		{"boat-passing", "boat-passing", 5 / 175.},
		{"seal-sighted", "seal-sighted", 2 / 175.},
	};
	char *text = (char *)drawn("event-feed", 8000000);
	double events = 0;

	(void)state;
	for (const char *at = text; (at = strchr(at, '\n')); at++)
		events++;
	for (size_t i = 0; i < sizeof(cycles) / sizeof(*cycles); i++) {
		double one = occurrences(text, cycles[i].one);
		double other = occurrences(text, cycles[i].other);
		double wanted = cycles[i].share * events;

		/* One from the other: 2 of 5 events begin a run, and the
		 * difference over a run is -1, 0 or 1, so its variance is
		 * below .4 of both; four standard errors. From the share: runs
		 * of mean 2.5 widen the error less than twofold. */
		assert_near(one, other, 4 * sqrt(.4 * (one + other)));
		assert_near(one, wanted, 8 * sqrt(wanted));
	}
	free(text);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(bytes_of_one_kind),
		cmocka_unit_test(independent_bytes_are_independent),
		cmocka_unit_test(chains_of_letters),
		cmocka_unit_test(fields_of_rec),
		cmocka_unit_test(events_of_a_cycle_are_equally_many),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
