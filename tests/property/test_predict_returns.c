/* Two threads give the length of one, and a predictor goes back exactly. */
#include "support/samples.h"

#include "predict/predictor.h"

#include <setjmp.h>
#include <stdarg.h>
#include <stdbool.h>
#include <string.h>
/* after the four above */
#include <cmocka.h>

#define PAST 40000
#define PAGE 6000
#define PAGES 3

static struct predictor *made(const uint8_t *bytes, size_t count,
			      enum predict_strength strength)
{
	struct plan_request request = {
		.bytes = bytes, .count = count, .strength = strength};
	struct predictor *predictor;
	struct predict_plan plan;

	assert_int_equal(plan_choose(&request, &plan), STATUS_OK);
	assert_int_equal(predictor_new(&plan, &predictor), STATUS_OK);
	return predictor;
}

static int64_t whole(enum sample_kind kind, enum predict_strength strength,
		     unsigned threads)
{
	static uint8_t bytes[PAST];
	struct predictor *predictor;
	int64_t bits;

	sample_fill(kind, 3, bytes, PAST);
	predictor = made(bytes, PAST, strength);
	predictor_set_threads(predictor, threads);
	predictor_restart(predictor, bytes);
	bits = predictor_measure_q32(predictor, 20001);
	bits += predictor_measure_q32(predictor, PAST - 20001);
	predictor_free(predictor);
	return bits;
}

static void threads_change_nothing(void **state)
{
	(void)state;
	for (enum sample_kind kind = 0; kind < SAMPLE_KINDS; kind++) {
		assert_int_equal(whole(kind, STRENGTH_NIGHTLY, 1),
				 whole(kind, STRENGTH_NIGHTLY, 2));
		assert_int_equal(whole(kind, STRENGTH_DEEP, 1),
				 whole(kind, STRENGTH_DEEP, 2));
	}
}

/* A page after the past, by a predictor that has seen nothing else. */
static int64_t fresh(const uint8_t *bytes, struct predictor *predictor)
{
	predictor_restart(predictor, bytes);
	(void)predictor_measure_q32(predictor, PAST);
	return predictor_measure_q32(predictor, PAGE);
}

static void check_pages(enum sample_kind kind, enum predict_strength strength)
{
	static uint8_t bytes[PAST + PAGE], pages[PAGES * PAGE];
	struct predictor *predictor, *other;
	int64_t won = 0;

	sample_fill(kind, 3, bytes, PAST + PAGE);
	sample_fill(kind, 4, pages, sizeof(pages));
	predictor = made(bytes, PAST + PAGE, strength);
	other = made(bytes, PAST + PAGE, strength);
	predictor_restart(predictor, bytes);
	(void)predictor_measure_q32(predictor, PAST);
	if (predictor_remember(predictor, PAGE) != STATUS_OK) {
		assert_true(kind == SAMPLE_BASES || kind == SAMPLE_RANDOM);
		predictor_free(predictor);
		predictor_free(other);
		return;
	}
	for (unsigned i = 0; i < PAGES; i++) {
		int64_t bits;

		memcpy(bytes + PAST, pages + (size_t)i * PAGE, PAGE);
		bits = predictor_measure_q32(predictor, PAGE);
		predictor_rewind(predictor);
		assert_int_equal(bits, fresh(bytes, other));
		predictor_restart(other, bytes + PAST);
		won += predictor_measure_q32(other, PAGE) - bits;
	}
	/* What text has been seen makes more of it cheaper. */
	assert_true(kind > SAMPLE_TABLE || won > 0);
	predictor_free(predictor);
	predictor_free(other);
}

static void goes_back_exactly(void **state)
{
	(void)state;
	for (enum sample_kind kind = 0; kind < SAMPLE_KINDS; kind++) {
		check_pages(kind, STRENGTH_NIGHTLY);
		check_pages(kind, STRENGTH_DEEP);
	}
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(threads_change_nothing),
		cmocka_unit_test(goes_back_exactly),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
