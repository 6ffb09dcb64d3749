/* Does a code length depend on bytes that come later? */
#include "support/modelled.h"
#include "support/near.h"
#include "support/samples.h"

#include "base/random.h"

#include <math.h>
#include <string.h>

#define BYTES 16384
#define PAGE 4096
#define CUTS 64
/* Leaking models may read past the end of what there is. */
#define ROOM (2 * BYTES)

/*
 * A number that tells what a model says of the bytes before cut, and of the
 * first decision after it where it can be asked; all BYTES bytes are in place.
 */
struct priced {
	void *self;
	int64_t (*price)(void *self, const uint8_t *bytes, size_t cut);
};

/* The cut for i: a line's start, a page's start or anywhere, by turns. */
static size_t cut_at(struct random_stream *random, const uint8_t *bytes,
		     unsigned i)
{
	size_t cut = 1 + random_below(random, BYTES - 1);
	const uint8_t *line;

	if (i % 4 == 1)
		return PAGE * (1 + i / 4 % (BYTES / PAGE - 1));
	if (i % 4 != 0)
		return cut;
	line = memchr(bytes + cut, '\n', BYTES - cut);
	return line && line + 1 < bytes + BYTES ? (size_t)(line + 1 - bytes)
						: cut;
}

/* Number of cuts at which the price changes with what comes after. */
static unsigned leaks(const struct priced *model, const uint8_t *bytes)
{
	static uint8_t scrambled[ROOM];
	struct random_stream random;
	unsigned found = 0;

	random_init(&random, 5, 0);
	for (unsigned i = 0; i < CUTS; i++) {
		size_t cut = cut_at(&random, bytes, i);
		int64_t wanted = model->price(model->self, bytes, cut);

		memcpy(scrambled, bytes, BYTES);
		for (size_t j = cut; j < BYTES; j++)
			scrambled[j] ^=
				(uint8_t)(1 + random_below(&random, 255));
		found += model->price(model->self, scrambled, cut) != wanted;
	}
	return found;
}

/*
 * The estimator's way, restarted at pages. Beyond the cut it goes on to the
 * end of the page, so that a chunk holds bytes of both sides.
 */
static int64_t price_mix(void *self, const uint8_t *bytes, size_t cut)
{
	int64_t total = 0;

	for (size_t page = 0; page < cut; page += PAGE) {
		size_t end = page + PAGE < cut ? page + PAGE : cut;

		predictor_restart(self, bytes + page);
		total += predictor_measure_q32(self, end - page);
	}
	return total;
}

/* One decision after another, never told that there is a cut. */
static int64_t price_decisions(void *self, const uint8_t *bytes, size_t cut)
{
	int64_t total = 0;
	uint8_t byte;

	predictor_restart(self, bytes);
	for (size_t i = 0; i < cut; i++) {
		unsigned decision;

		do {
			total = total * 31 + predictor_probability(self);
			total &= INT64_MAX >> 8;
			decision = predictor_decision(self, bytes[i]);
		} while (!predictor_update(self, decision, &byte));
	}
	return total + predictor_probability(self);
}

/* A deliberately simple model, sound or leaking in one of two ways. */
enum leak { SOUND, LEAK_COLUMN, LEAK_MATCH };

struct toy {
	enum leak leak;
	const uint8_t *bytes;
	size_t at, line, line_before;
	size_t pointer; /* of the match; survives a restart when leaking */
	unsigned partial;
	uint16_t p[257][256];
};

static void toy_restart(void *self, const uint8_t *bytes)
{
	struct toy *toy = self;

	toy->bytes = bytes;
	toy->at = toy->line = toy->line_before = 0;
	if (toy->leak != LEAK_MATCH)
		toy->pointer = 0;
	toy->partial = 1;
	for (unsigned i = 0; i < 257; i++) {
		for (unsigned j = 0; j < 256; j++)
			toy->p[i][j] = 32768;
	}
}

/* The byte above in the column, or what the match goes on with. */
static unsigned toy_context(const struct toy *toy)
{
	size_t above = toy->line_before + (toy->at - toy->line);

	if (toy->leak == LEAK_MATCH)
		return toy->pointer ? toy->bytes[toy->pointer] : 256;
	/* Steps over an empty line, and then stands in this one. */
	if (toy->leak == LEAK_COLUMN && toy->line == toy->line_before + 1)
		return toy->bytes[above + 1];
	return above < toy->line ? toy->bytes[above] : 256;
}

static unsigned toy_probability(void *self)
{
	struct toy *toy = self;
	unsigned p = toy->p[toy_context(toy)][toy->partial];

	return p < 64 ? 64 : p > 65472 ? 65472 : p;
}

static unsigned toy_decision(const void *self, uint8_t byte)
{
	const struct toy *toy = self;
	unsigned done = 31 - (unsigned)__builtin_clz(toy->partial);

	return byte >> (7 - done) & 1;
}

static bool toy_update(void *self, unsigned decision, uint8_t *byte)
{
	struct toy *toy = self;
	uint16_t *p = &toy->p[toy_context(toy)][toy->partial];

	*p = (uint16_t)(decision ? *p + (65535 - *p) / 16 : *p - *p / 16);
	toy->partial = toy->partial * 2 + decision;
	if (toy->partial < 256)
		return false;
	*byte = (uint8_t)toy->partial;
	toy->partial = 1;
	toy->at++;
	if (*byte == '\n') {
		toy->line_before = toy->line;
		toy->line = toy->at;
	}
	toy->pointer++;
	return true;
}

static int64_t price_toy(void *self, const uint8_t *bytes, size_t cut)
{
	int64_t total = 0;

	((struct toy *)self)->pointer = 0;
	for (size_t i = 0; i < cut; i++) {
		unsigned decision;
		uint8_t byte;

		if (i % PAGE == 0)
			toy_restart(self, bytes + i);
		do {
			unsigned p = toy_probability(self);

			decision = toy_decision(self, bytes[i]);
			total += decision ? p : 65536 - p;
		} while (!toy_update(self, decision, &byte));
	}
	if (cut % PAGE == 0)
		toy_restart(self, bytes + cut);
	return total * 65536 + toy_probability(self);
}

/* Lines, some of them empty. */
static void fill_lines(uint8_t *bytes)
{
	sample_fill(SAMPLE_TABLE, 3, bytes, BYTES);
	for (size_t i = 1; i < BYTES; i++) {
		if (bytes[i - 1] == '\n' && i % 3 == 0)
			bytes[i] = '\n';
	}
}

static void future_changes_nothing(void **state)
{
	static uint8_t bytes[ROOM];

	(void)state;
	for (unsigned family = 0; family < FAMILY_COUNT; family++) {
		struct predict_plan plan = {
			.family = family, .stride = 24, .bytes = PAGE};
		struct priced way = {.price = price_mix};
		struct predictor *predictor;

		if (family == FAMILY_FLAT)
			continue;
		if (family == FAMILY_BASES)
			continue;
		fill_lines(bytes);
		assert_int_equal(predictor_new(&plan, &predictor), STATUS_OK);
		way.self = predictor;
		assert_int_equal(leaks(&way, bytes), 0);
		if (family == FAMILY_LINES) {
			way.price = price_decisions;
			assert_int_equal(leaks(&way, bytes), 0);
		}
		predictor_free(predictor);
	}
}

/* Sum over all values of the byte at cut of 2^-bits; 1 for a sound model. */
static double kraft_sum(struct predictor *predictor, uint8_t *bytes, size_t cut)
{
	uint8_t kept = bytes[cut];
	double sum = 0;

	for (unsigned value = 0; value < 256; value++) {
		int64_t before;

		bytes[cut] = (uint8_t)value;
		predictor_restart(predictor, bytes);
		before = predictor_measure_q32(predictor, cut);
		assert_true(before >= 0);
		sum += exp2((double)-predictor_measure_q32(predictor, 1) *
			    0x1p-32);
	}
	bytes[cut] = kept;
	return sum;
}

/* A context that sees the byte being coded makes room for more than all. */
static void values_of_a_byte_share_one(void **state)
{
	static const enum predict_family families[] = {
		FAMILY_FIELDS, FAMILY_RECORDS, FAMILY_IMAGE};
	static const size_t cuts[] = {1, 17, 263, 700};
	static uint8_t bytes[ROOM];

	(void)state;
	for (unsigned i = 0; i < 6; i++) {
		/* The shortest strides are the ones that go wrong. */
		struct predict_plan plan = {.family = families[i / 2],
					    .stride = i % 2 ? 24 : 1,
					    .bytes = 1024};
		struct predictor *predictor;

		fill_lines(bytes);
		/* A long repeat: the lane's decision is part of the sum. */
		memcpy(bytes + 600, bytes + 100, 200);
		assert_int_equal(predictor_new(&plan, &predictor), STATUS_OK);
		for (unsigned j = 0; j < 4; j++) {
			/* 256 lengths, each right to half a unit of Q32. */
			assert_near(kraft_sum(predictor, bytes, cuts[j]), 1,
				    1e-6);
		}
		predictor_free(predictor);
	}
}

static void planted_leaks_are_found(void **state)
{
	static struct toy toy;
	static uint8_t bytes[ROOM];
	struct priced way = {.self = &toy, .price = price_toy};

	(void)state;
	fill_lines(bytes);
	toy.leak = SOUND;
	assert_int_equal(leaks(&way, bytes), 0);
	toy.leak = LEAK_COLUMN;
	assert_true(leaks(&way, bytes) > 0);
	toy.leak = LEAK_MATCH;
	assert_true(leaks(&way, bytes) > 0);
}

/* Bytes that come back from the toy's own code. */
static bool toy_comes_back(struct toy *toy, const uint8_t *bytes)
{
	static uint8_t decoded[ROOM];
	struct coded_model model = {toy, toy_restart, toy_probability,
				    toy_decision, toy_update};
	struct buffer code;

	/* As left by a page before; a sound restart clears it. */
	buffer_init(&code, 4 * BYTES);
	toy->pointer = BYTES / 4;
	coder_encode(&model, bytes, BYTES / 2, &code);
	toy->pointer = BYTES / 4;
	coder_decode(&model, &code, decoded, BYTES / 2);
	buffer_release(&code);
	return memcmp(decoded, bytes, BYTES / 2) == 0;
}

static void planted_leaks_do_not_decode(void **state)
{
	static struct toy toy;
	static uint8_t bytes[ROOM];

	(void)state;
	fill_lines(bytes);
	toy.leak = SOUND;
	assert_true(toy_comes_back(&toy, bytes));
	toy.leak = LEAK_COLUMN;
	assert_false(toy_comes_back(&toy, bytes));
	toy.leak = LEAK_MATCH;
	assert_false(toy_comes_back(&toy, bytes));
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(future_changes_nothing),
		cmocka_unit_test(values_of_a_byte_share_one),
		cmocka_unit_test(planted_leaks_are_found),
		cmocka_unit_test(planted_leaks_do_not_decode),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
