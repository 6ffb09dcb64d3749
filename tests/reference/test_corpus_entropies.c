/*
 * Do real corpora show the figures that other programs found on them? Needs
 * the fetched corpora in RATEFLOOR_CORPORA (default corpora/fetched); a file
 * that is not there is skipped.
 */
#include "estimate/corrections.h"

#include "support/fetched.h"
#include "support/grams.h"
#include "support/near.h"

#include <math.h>
#include <stdlib.h>

/* A whole fetched file, which must have so many bytes. */
static uint8_t *fetched(const char *name, size_t bytes)
{
	struct fetched file = fetched_read(name, bytes + 1);

	if (file.bytes)
		assert_int_equal(file.length, bytes);
	return file.bytes;
}

/* Order-0 entropies in bits a byte, by an independent count of bytes (common
 * practice, no published source), to the four digits given. */
static void order_zero_figures(void **state)
{
	static const struct {
		const char *name;
		size_t bytes;
		double bits;
	} table[] = {
		{"classic_alice29.txt", 152089, 4.5677},
		{"classic_plrabn12.txt", 481861, 4.5314},
		{"pi_100k.txt", 100003, 3.3222},
		{"sensor_motes.csv", 423028, 3.5003},
		{"dasher_russian_RU.txt", 588645, 4.0773},
		{"speech_ve9qrp.raw", 1799168, 6.8631},
		{"libc_arm64.so", 1651472, 6.3244},
		{"ecoli_mg1655.seq", 4639675, 1.9998},
	};
	size_t found = 0;

	(void)state;
	for (size_t i = 0; i < sizeof(table) / sizeof(*table); i++) {
		uint8_t *bytes = fetched(table[i].name, table[i].bytes);
		struct sequence sequence;
		struct findings findings;
		struct corrected h;

		if (!bytes)
			continue;
		found++;
		sequence = grams_sequence(bytes, table[i].bytes, 1);
		findings = grams_findings(&sequence, 1, NULL);
		corrected_from_counts(&findings.orders[0].all, 8, &h);
		assert_near(h.plugin, table[i].bits, 5e-5);
		findings_release(&findings);
		free(bytes);
	}
	if (!found)
		skip();
}

/* Published nucleotide coders reach 1.9 to 1.95 bits a base, and the corrected
 * h_9 of E. coli is about 1.92 (from memory). */
static void nucleotides_at_order_nine(void **state)
{
	const size_t n = 4639675;
	uint8_t *bytes = fetched("ecoli_mg1655.seq", n);
	struct corrected nine, eight, rate;
	struct sequence sequence;
	struct findings findings;

	(void)state;
	if (!bytes)
		skip();
	sequence = grams_sequence(bytes, n, 1);
	findings = grams_findings(&sequence, 9, NULL);
	corrected_from_counts(&findings.orders[8].all, 18, &nine);
	corrected_from_counts(&findings.orders[7].all, 16, &eight);
	rate = corrected_difference(&nine, &eight);
	assert_near(rate.grassberger, 1.92, .005);
	assert_near(rate.chao_wang_jost, 1.92, .005);
	findings_release(&findings);
	free(bytes);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(order_zero_figures),
		cmocka_unit_test(nucleotides_at_order_nine),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
