/* Are the predictor's tables and slots what their headers say? */
#include "predict/cells.h"
#include "predict/plan.h"
#include "predict/tables.h"

#include "base/log2.h"

#include "support/near.h"
#include "support/samples.h"

#include <math.h>
#include <string.h>

static struct predict_tables *built(void)
{
	static struct predict_tables tables;

	tables_build(&tables);
	return &tables;
}

static void squash_is_logistic(void **state)
{
	const struct predict_tables *tables = built();

	(void)state;
	for (int x = -LOGIT_MAX; x <= LOGIT_MAX; x++) {
		/* The logistic function by libm; rounded, within 1..65535. */
		double wanted = 65536 / (1 + exp(-x / 256.0));

		wanted = wanted > 65535 ? 65535 : wanted;
		wanted = wanted < 1 ? 1 : wanted;
		assert_near(tables->squash[x + LOGIT_MAX], wanted, 0.501);
	}
}

static void stretch_is_its_inverse(void **state)
{
	const struct predict_tables *tables = built();

	(void)state;
	for (unsigned i = 0; i < 4096; i++) {
		double p = (i + 0.5) / 4096;
		double wanted = 256 * log(p / (1 - p));
		/* Sixteen bits of squash blur the ends. */
		double blur = 1 + 256 / (65536 * p * (1 - p));

		assert_near(tables->stretch[i], wanted, blur);
		assert_int_equal(tables->stretch[i],
				 -tables->stretch[4095 - i]);
	}
}

static void histories_are_closed(void **state)
{
	const struct predict_tables *tables = built();

	(void)state;
	assert_int_equal(tables->start[0], 1 << (TREND_BITS - 1));
	for (unsigned bit = 0; bit < 2; bit++) {
		unsigned history = 0;
		double before = 0.5;

		for (unsigned i = 0; i < 100; i++) {
			double p;

			history = tables->next[history][bit];
			assert_int_not_equal(history, 0);
			p = tables->start[history] * 0x1p-28;
			p = bit ? p : 1 - p;
			/* Surer with every bit, but never certain. */
			assert_true(p >= before - 1e-8 && p < 1);
			before = p;
		}
		/* One opposite bit after so many is no small thing. */
		history = tables->next[history][!bit];
		assert_true((bit ? tables->start[history] * 0x1p-28
				 : 1 - tables->start[history] * 0x1p-28) <
			    before - 0.1);
	}
}

static void slots_keep_what_is_used(void **state)
{
	_Alignas(64) uint8_t line[LINE_BYTES] = {0};
	uint8_t *slot[LINE_SLOTS];

	(void)state;
	for (unsigned i = 0; i < LINE_SLOTS; i++) {
		slot[i] = slot_find(line, (uint8_t)(i + 1));
		assert_in_range(slot[i] + 1 - line, LINE_SLOTS,
				LINE_BYTES - SLOT_CELLS);
		memset(slot[i] + 1, 10 + (int)i, SLOT_CELLS);
	}
	for (unsigned i = 0; i < LINE_SLOTS; i++)
		assert_ptr_equal(slot_find(line, (uint8_t)(i + 1)), slot[i]);
	/* The youngest history gives way, and its slot is emptied. */
	assert_ptr_equal(slot_find(line, 99), slot[0]);
	for (unsigned i = 1; i <= SLOT_CELLS; i++)
		assert_int_equal(slot[0][i], 0);
	assert_ptr_equal(slot_find(line, 2), slot[1]);
	assert_int_equal(slot[1][SLOT_CELLS], 11);
}

static void second_tags_differ(void **state)
{
	(void)state;
	for (unsigned tag = 0; tag < 256; tag++) {
		for (unsigned nibble = 0; nibble < 16; nibble++)
			assert_int_not_equal(
				slot_second_tag((uint8_t)tag, nibble), tag);
	}
}

static void cells_learn_the_share(void **state)
{
	const struct predict_tables *tables = built();
	uint32_t cell = cell_half();

	(void)state;
	for (unsigned i = 0; i < 4000; i++)
		cell = cell_update(tables, cell, i % 4 == 0, 1020);
	/* A quarter of the bits are ones. */
	assert_near(cell_p16(cell) / 65536.0, 0.25, 0.002);
}

static void lag_of_records_is_found(void **state)
{
	static uint8_t bytes[60000];

	(void)state;
	sample_fill(SAMPLE_RECORDS, 4, bytes, sizeof(bytes));
	/* The samples' records are 12 bytes long. */
	assert_int_equal(lag_find(bytes, sizeof(bytes), STRIDE_MAX), 12);
	assert_int_equal(lag_find(bytes, 3, STRIDE_MAX), 1);
}

static void families_are_found(void **state)
{
	static const struct {
		enum sample_kind kind;
		enum predict_family family;
	} wanted[] = {{SAMPLE_RANDOM, FAMILY_FLAT},
		      {SAMPLE_TABLE, FAMILY_LINES},
		      {SAMPLE_RECORDS, FAMILY_FIELDS}};
	static uint8_t bytes[60000];

	(void)state;
	for (unsigned i = 0; i < 3; i++) {
		struct plan_request request = {.bytes = bytes,
					       .count = sizeof(bytes)};
		struct predict_plan plan;

		sample_fill(wanted[i].kind, 5, bytes, sizeof(bytes));
		assert_int_equal(plan_choose(&request, &plan), STATUS_OK);
		assert_int_equal(plan.family, wanted[i].family);
		/* log2 of up to 8 families, 12 bits for a stride, and log2 3
		 * for each of 12 columns. */
		assert_in_range(plan_charge_q32(&plan), 1, 35 * BIT_Q32);
	}
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(squash_is_logistic),
		cmocka_unit_test(stretch_is_its_inverse),
		cmocka_unit_test(histories_are_closed),
		cmocka_unit_test(slots_keep_what_is_used),
		cmocka_unit_test(second_tags_differ),
		cmocka_unit_test(cells_learn_the_share),
		cmocka_unit_test(lag_of_records_is_found),
		cmocka_unit_test(families_are_found),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
