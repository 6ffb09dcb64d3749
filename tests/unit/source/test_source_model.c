/* Do models keep their promises: refusals, the same bytes, one law? */
#include "base/digest.h"
#include "source/frozen.h"
#include "source/model.h"

#include "support/near.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

/* An init that must refuse, say why and leave nothing held. */
static void refused(enum status got, enum status wanted,
		    const struct source_model *model, const struct reason *why,
		    const char *words)
{
	assert_int_equal(got, wanted);
	assert_non_null(strstr(why->text, words));
	assert_null(model->rows);
	assert_null(model->edges);
	assert_null(model->begin);
}

static void rows_must_have_weight(void **state)
{
	const uint32_t empty[4] = {1, 1, 0, 0};
	const uint32_t large[2] = {UINT32_MAX, 1};
	const uint32_t full[2] = {UINT32_MAX - 1, 1};
	struct source_model model;
	struct reason why = {{0}};

	(void)state;
	refused(source_model_init_markov(&model, 2, 1, empty, &why),
		STATUS_BAD_INPUT, &model, &why, "row 1 has no weight");
	refused(source_model_init_iid(&model, 2, large, &why), STATUS_BAD_INPUT,
		&model, &why, "1 to 2^32 - 1");
	assert_int_equal(source_model_init_iid(&model, 2, full, &why),
			 STATUS_OK);
	source_model_release(&model);
}

static void moves_must_have_weight(void **state)
{
	const uint32_t moves[4] = {1, 1, 0, 0};
	const uint32_t large[4] = {1, UINT32_MAX, 1, 1};
	const uint32_t emits[4] = {1, 2, 2, 1};
	struct source_model model;
	struct reason why = {{0}};

	(void)state;
	refused(source_model_init_hidden(&model, 2, 2, moves, emits, &why),
		STATUS_BAD_INPUT, &model, &why, "sum to 1 to 2^32 - 1");
	refused(source_model_init_hidden(&model, 2, 2, large, emits, &why),
		STATUS_BAD_INPUT, &model, &why, "sum to 1 to 2^32 - 1");
}

static void shapes_have_limits(void **state)
{
	static const uint32_t weights[300] = {1};
	struct source_model model;
	struct reason why = {{0}};

	(void)state;
	refused(source_model_init_iid(&model, 257, weights, &why),
		STATUS_BAD_INPUT, &model, &why, "256 symbols");
	refused(source_model_init_iid(&model, 0, weights, &why),
		STATUS_BAD_INPUT, &model, &why, "256 symbols");
	refused(source_model_init_hidden(&model, 4, 2, weights, weights, &why),
		STATUS_BAD_INPUT, &model, &why, "regimes");
	refused(source_model_init_markov(&model, 256, 3, weights, &why),
		STATUS_BAD_INPUT, &model, &why, "contexts");
	refused(source_model_init_runs(&model, 3, 3, &why), STATUS_BAD_INPUT,
		&model, &why, "runs of 3 to 3");
	refused(source_model_init_runs(&model, 3, 63, &why), STATUS_BAD_INPUT,
		&model, &why, "at most 62");
	refused(source_model_init_trained(&model, (const uint8_t *)"ab", 2,
					  &why),
		STATUS_TOO_SHORT, &model, &why, "3 bytes or more");
}

static void one_closed_class_only(void **state)
{
	/* 0 and 1 keep to themselves, so do 2 and 3. */
	const uint32_t apart[16] = {1, 1, 0, 0, 1, 1, 0, 0,
				    0, 0, 1, 1, 0, 0, 1, 1};
	/* 0 leads into 1 and 2, which never lead back; 2 is the class's
	 * lowest, so that elimination alone would divide by zero. */
	const uint32_t passing[9] = {1, 1, 0, 0, 1, 1, 0, 1, 3};
	struct source_model model;
	struct reason why = {{0}};

	(void)state;
	refused(source_model_init_markov(&model, 4, 1, apart, &why),
		STATUS_BAD_INPUT, &model, &why, "more than one closed class");
	assert_int_equal(source_model_init_markov(&model, 3, 1, passing, &why),
			 STATUS_OK);
	assert_near(model.stationary[0], 0, 0);
	assert_near(model.stationary[1], 1 / 3., 1e-15);
	assert_near(model.stationary[2], 2 / 3., 1e-15);
	source_model_release(&model);
}

static void bounds_have_limits(void **state)
{
	const uint32_t weights[4] = {9, 1, 3, 7};
	const uint32_t even[2] = {1, 1};
	struct source_model model;
	struct reason why = {{0}};
	double lower = -1, upper = -1;

	(void)state;
	assert_int_equal(source_model_init_markov(&model, 2, 1, weights, NULL),
			 STATUS_OK);
	assert_int_equal(source_model_bounds(&model, 3, &lower, &upper, &why),
			 STATUS_BAD_USAGE);
	source_model_release(&model);
	assert_int_equal(source_model_init_iid(&model, 2, even, NULL),
			 STATUS_OK);
	assert_int_equal(source_model_bounds(&model, 25, &lower, &upper, &why),
			 STATUS_BAD_USAGE);
	assert_int_equal(source_model_bounds(&model, 0, &lower, &upper, &why),
			 STATUS_BAD_USAGE);
	assert_near(lower + upper, -2, 0);
	assert_int_equal(source_model_bounds(&model, 5, &lower, &upper, &why),
			 STATUS_OK);
	assert_near(lower, 1, 1e-13);
	assert_near(upper, 1, 1e-13);
	source_model_release(&model);
}

static void grids_have_limits(void **state)
{
	enum { LETTERS = 64 };
	static uint32_t weights[3 * LETTERS * LETTERS];
	const uint32_t moves[9] = {8, 1, 1, 1, 8, 1, 1, 1, 8};
	struct known_rate rate = {-1, -1};
	struct source_model model;
	struct reason why = {{0}};

	(void)state;
	for (uint32_t i = 0; i < 3 * LETTERS * LETTERS; i++)
		weights[i] = 1 + i % 7;
	assert_int_equal(source_model_init_switching(&model, 3, LETTERS, moves,
						     weights, NULL),
			 STATUS_OK);
	assert_int_equal(source_model_rate(&model, &rate, &why),
			 STATUS_BAD_INPUT);
	assert_non_null(strstr(why.text, "too many"));
	assert_near(rate.bits_per_symbol, -1, 0);
	source_model_release(&model);
}

static void release_takes_the_empty(void **state)
{
	struct source_model model = {0};

	(void)state;
	source_model_release(&model);
	source_model_release(&model);
}

static void a_packed_model_is_its_row(void **state)
{
	const struct source *rec = source_find("rec");
	struct source_model model;
	struct known_rate rate;
	uint8_t here[999], there[999];

	(void)state;
	source_model_init_packed(&model, rec);
	assert_int_equal(source_model_rate(&model, &rate, NULL), STATUS_OK);
	assert_near(rate.bits_per_symbol, 1.514511, 1e-6);
	source_model_make(&model, sizeof(here), 4, here);
	source_fill(rec, sizeof(there), 4, there);
	assert_memory_equal(here, there, sizeof(here));
	source_model_release(&model);
}

/* h_3 = H_3 - H_2 of a text counted by hand in the plainest way. */
static double cyclic_h3(const uint8_t *text, size_t n)
{
	double bits = 0;

	for (size_t i = 0; i < n; i++) {
		unsigned pair = 0, triple = 0;

		for (size_t j = 0; j < n; j++) {
			bool two = text[i] == text[j] &&
				   text[(i + 1) % n] == text[(j + 1) % n];

			pair += two;
			triple += two && text[(i + 2) % n] == text[(j + 2) % n];
		}
		bits += log2((double)pair / triple) / (double)n;
	}
	return bits;
}

static void a_trained_chain_has_the_cyclic_h3_of_its_text(void **state)
{
	enum { BYTES = 3000 };
	struct source_model model;
	struct known_rate rate;
	uint8_t text[BYTES];

	(void)state;
	/* Cyclic counts: H_3 - H_2 is the chain's rate (Cover and Thomas
	 * 2006, theorem 4.2.1 with equality at order 2). */
	source_fill(source_find("duty-log"), BYTES, 3, text);
	assert_int_equal(source_model_init_trained(&model, text, BYTES, NULL),
			 STATUS_OK);
	assert_int_equal(source_model_rate(&model, &rate, NULL), STATUS_OK);
	assert_near(rate.bits_per_symbol, cyclic_h3(text, BYTES), 1e-12);
	source_model_release(&model);
}

static void a_large_trained_chain_too(void **state)
{
	enum { BYTES = 6000 };
	struct source_model model;
	struct known_rate rate;
	uint8_t text[BYTES];

	(void)state;
	/* Over 1024 pairs: the stationary law is that of the row sums. */
	source_fill(source_find("gauge-frames"), BYTES, 3, text);
	assert_int_equal(source_model_init_trained(&model, text, BYTES, NULL),
			 STATUS_OK);
	assert_true(model.contexts > 1024);
	assert_int_equal(source_model_rate(&model, &rate, NULL), STATUS_OK);
	assert_near(rate.bits_per_symbol, cyclic_h3(text, BYTES), 1e-12);
	source_model_release(&model);
}

static void equal_seeds_make_equal_bytes(void **state)
{
	enum { BYTES = 3000 };
	const struct frozen_source *entry;

	(void)state;
	for (size_t i = 0; (entry = frozen_at(i)); i++) {
		uint8_t one[BYTES], same[BYTES], other[BYTES];
		struct source_model model;

		assert_int_equal(entry->init(&model, NULL), STATUS_OK);
		source_model_make(&model, BYTES, 1, one);
		source_model_make(&model, BYTES, 1, same);
		source_model_make(&model, BYTES, 2, other);
		assert_memory_equal(one, same, BYTES);
		assert_int_not_equal(memcmp(one, other, BYTES), 0);
		source_model_release(&model);
	}
}

/* Our own output, pinned: it proves only that the bytes, on which coverage
 * figures rest, are the same on every machine and in every version. */
static void frozen_bytes_are_the_same_everywhere(void **state)
{
	enum { BYTES = 20000 };
	const struct frozen_source *entry;
	char all[32 * DIGEST_TEXT_BYTES] = "", text[DIGEST_TEXT_BYTES];

	(void)state;
	for (size_t i = 0; (entry = frozen_at(i)); i++) {
		static uint8_t bytes[BYTES];
		struct source_model model;

		assert_int_equal(entry->init(&model, NULL), STATUS_OK);
		source_model_make(&model, BYTES, 9, bytes);
		digest_sha256(bytes, BYTES, text);
		strcat(all, text);
		source_model_release(&model);
	}
	digest_sha256(all, strlen(all), text);
	assert_string_equal(text, "2c472590f4789dfe96258c80bc01b1f56af72b917239"
				  "aa72eb8b320217825a33");
}

static void the_frozen_list_is_as_long_as_promised(void **state)
{
	const struct frozen_source *entry;
	unsigned families[3] = {0};

	(void)state;
	for (size_t i = 0; (entry = frozen_at(i)); i++) {
		assert_ptr_equal(frozen_find(entry->name), entry);
		families[entry->family]++;
	}
	assert_true(families[FROZEN_FINITE] + families[FROZEN_HIDDEN] >= 12);
	assert_true(3 * families[FROZEN_HIDDEN] >=
		    families[FROZEN_FINITE] + families[FROZEN_HIDDEN]);
	assert_true(families[FROZEN_SWITCHING] >= 1);
	assert_null(frozen_find("sticky"));
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(rows_must_have_weight),
		cmocka_unit_test(moves_must_have_weight),
		cmocka_unit_test(shapes_have_limits),
		cmocka_unit_test(one_closed_class_only),
		cmocka_unit_test(bounds_have_limits),
		cmocka_unit_test(grids_have_limits),
		cmocka_unit_test(release_takes_the_empty),
		cmocka_unit_test(a_packed_model_is_its_row),
		cmocka_unit_test(a_trained_chain_has_the_cyclic_h3_of_its_text),
		cmocka_unit_test(a_large_trained_chain_too),
		cmocka_unit_test(equal_seeds_make_equal_bytes),
		cmocka_unit_test(frozen_bytes_are_the_same_everywhere),
		cmocka_unit_test(the_frozen_list_is_as_long_as_promised),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
