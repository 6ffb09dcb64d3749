/* Does each rule catch its own fault, at its own edge, and no other? */
#include "verdict/gate.h"

#include "support/gate_nights.h"
#include "support/near.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

/* A pin and a night that is the same until the test changes it. */
struct nights {
	struct baseline pin, night;
	struct gate gate;
};

static struct nights nights;

static int setup(void **state)
{
	nights = (struct nights){.gate = {.pin = NULL}};
	gate_night_init(&nights.pin);
	gate_night_init(&nights.night);
	nights.night.survey = 9;
	*state = &nights;
	return 0;
}

static int teardown(void **state)
{
	struct nights *n = *state;

	gate_release(&n->gate);
	baseline_release(&n->pin);
	baseline_release(&n->night);
	return 0;
}

static void judge(struct nights *n)
{
	gate_release(&n->gate);
	gate_nights_judge(&n->pin, &n->night, &n->gate);
}

static void the_same_night_passes(void **state)
{
	struct nights *n = *state;

	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
	assert_int_equal(gate_count(&n->gate, GATE_SUSPECTED), 0);
	assert_int_equal(gate_count(&n->gate, GATE_UNJUDGED), 0);
	assert_int_equal(gate_count(&n->gate, GATE_NOTED), 0);
	/* 2 corpora: floor and methods, one digest; 6 cells: lossless, size,
	 * gap; 4 of them 4 ratios. */
	assert_int_equal(gate_count(&n->gate, GATE_PASSED), 5 + 18 + 16);
}

static void sizes_of_a_fixed_corpus(void **state)
{
	struct nights *n = *state;
	struct baseline_cell *cell =
		gate_night_cell(&n->night, "frames", "zlib", "6");
	struct gate_check *breach;

	cell->bytes = 20060; /* 0.3% of 20,000 exactly */
	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
	cell->bytes = 20061;
	judge(n);
	breach = gate_only_breach(&n->gate, GATE_SIZE);
	assert_string_equal(breach->corpus, "frames");
	assert_string_equal(breach->words,
			    "20061 bytes, +0.305% against the pinned 20000 "
			    "(tolerance 0.3%); this file: exact; zlib 1.2.13 "
			    "as at the pin");
	n->night.tolerance = 0.00306; /* tonight's is what counts */
	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
	cell->bytes = 15000; /* better is no breach */
	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
}

static void bytes_that_do_not_come_back(void **state)
{
	struct nights *n = *state;
	struct baseline_cell *cell =
		gate_night_cell(&n->night, "feed", "zlib", "9");

	cell->lossless = false;
	(void)snprintf(cell->reason, sizeof(cell->reason),
		       "byte 17 is 4, not 5");
	judge(n);
	assert_non_null(strstr(gate_only_breach(&n->gate, GATE_LOSSLESS)->words,
			       "byte 17"));
	cell->ran = false;
	judge(n);
	(void)gate_only_breach(&n->gate, GATE_BROKEN);
}

static void failed_methods(void **state)
{
	struct nights *n = *state;

	(void)snprintf(gate_night_corpus(&n->night, "feed")->broken, 40,
		       "ngram: out of memory");
	judge(n);
	assert_string_equal(gate_only_breach(&n->gate, GATE_BROKEN)->words,
			    "ngram: out of memory");
}

static void changed_bytes_of_a_fixed_corpus(void **state)
{
	struct nights *n = *state;
	struct baseline_corpus *frames = gate_night_corpus(&n->night, "frames");
	struct baseline_cell *cell =
		gate_night_cell(&n->night, "frames", "zlib", "6");

	(void)snprintf(frames->sha256, sizeof(frames->sha256), "dead");
	frames->floor_by_codec = true;
	cell->bytes = 90000; /* of other bytes: not to be compared */
	judge(n);
	(void)gate_only_breach(&n->gate, GATE_CORPUS_CHANGED);
	frames->outcome = OUTCOME_FAILED;
	n->night.cell_count = 0;
	gate_night_corpus(&n->night, "feed")->outcome = OUTCOME_FAILED;
	judge(n);
	assert_int_equal(
		gate_checks(&n->gate, GATE_CORPUS_CHANGED, GATE_BREACHED), 2);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 2);
}

static void a_rolling_corpus_has_other_bytes(void **state)
{
	struct nights *n = *state;
	struct baseline_corpus *feed = gate_night_corpus(&n->night, "feed");

	(void)snprintf(feed->sha256, sizeof(feed->sha256), "0123");
	feed->n = 91234;
	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
}

static void floors_taken_by_a_codec(void **state)
{
	struct nights *n = *state;

	gate_night_corpus(&n->night, "frames")->floor_by_codec = true;
	judge(n);
	(void)gate_only_breach(&n->gate, GATE_FLOOR_TAKEN);
	gate_night_corpus(&n->pin, "frames")->floor_by_codec = true;
	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
}

static void gaps_over_the_limit(void **state)
{
	struct nights *n = *state;
	struct baseline_cell *now =
		gate_night_cell(&n->night, "frames", "zstd", "3");
	struct baseline_cell *then =
		gate_night_cell(&n->pin, "frames", "zstd", "3");

	now->gap = now->gap_least = 0.401;
	judge(n);
	(void)gate_only_breach(&n->gate, GATE_GAP_LIMIT);
	then->gap = 0.405; /* accepted when it was pinned */
	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
	then->gap = 0.25;
	now->gap_least = 0.399; /* on data of this kind it need not be over */
	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
	now->gap_least = 0.401;
	n->night.gap_limit = -1;
	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
}

/*
 * Both nights have standard error .003 and 61 blocks: 60 degrees of freedom,
 * for which 3.232 leaves .001 above it and 3.460 leaves .0005 (Abramowitz and
 * Stegun, table 26.10). Three cells are judged, so Holm asks the first for a
 * third of .001, at 3.6 (from memory of larger tables). 0.3% of 2 bits are .006
 * that are allowed.
 */
#define ALLOWED 0.006

static void sizes_of_data_of_a_kind(void **state)
{
	struct nights *n = *state;
	struct baseline_cell *cell =
		gate_night_cell(&n->night, "feed", "zlib", "6");
	double error = 0.003 * 1.4142135623730951;

	cell->pair.mean = -0.125 + ALLOWED + 3.46 * error;
	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
	assert_int_equal(gate_checks(&n->gate, GATE_SIZE_KIND, GATE_PASSED), 3);
	cell->pair.mean = -0.125 + ALLOWED + 3.75 * error;
	judge(n);
	(void)gate_only_breach(&n->gate, GATE_SIZE_KIND);
	/* Of the change of .0219, 0.4% allow .008. */
	n->night.tolerance = 0.004;
	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
}

static void one_cell_alone_needs_no_correction(void **state)
{
	struct nights *n = *state;
	struct baseline_cell *cell =
		gate_night_cell(&n->night, "feed", "zlib", "6");
	double error = 0.003 * 1.4142135623730951;

	gate_night_cell(&n->night, "feed", "zlib", "9")->pair.known = false;
	gate_night_cell(&n->night, "feed", "zstd", "3")->pair.known = false;
	cell->pair.mean = -0.125 + ALLOWED + 3.22 * error;
	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
	assert_int_equal(gate_checks(&n->gate, GATE_SIZE_KIND, GATE_UNJUDGED),
			 2);
	cell->pair.mean = -0.125 + ALLOWED + 3.25 * error;
	judge(n);
	(void)gate_only_breach(&n->gate, GATE_SIZE_KIND);
}

/* One night that looks surer than it is does not count as surer. */
static void the_larger_error_counts(void **state)
{
	struct nights *n = *state;
	struct baseline_cell *cell =
		gate_night_cell(&n->night, "feed", "zlib", "6");

	cell->pair.standard_error = 0.0001;
	cell->pair.mean = -0.125 + ALLOWED + 3.46 * 0.003 * sqrt(2);
	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
	cell->pair.standard_error = 0.006;
	cell->pair.mean = -0.125 + ALLOWED + 3.46 * 0.006 * sqrt(2);
	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
}

static void other_pairs_are_not_judged(void **state)
{
	struct nights *n = *state;
	struct baseline_cell *cell =
		gate_night_cell(&n->night, "feed", "zlib", "6");

	(void)snprintf(cell->pair.against, sizeof(cell->pair.against), "mix");
	cell->pair.mean = 5;
	judge(n);
	assert_int_equal(gate_checks(&n->gate, GATE_SIZE_KIND, GATE_UNJUDGED),
			 1);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
}

static void speed_is_measured_again(void **state)
{
	struct nights *n = *state;
	struct baseline_cell *cell =
		gate_night_cell(&n->night, "frames", "zlib", "6");
	struct relative again = {true, 2.5 * 1.16};
	struct gate_check *check;

	cell->ratios[RATIO_ENCODE_TIME].value = 2.5 * 1.07;
	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_SUSPECTED), 0);
	cell->ratios[RATIO_ENCODE_TIME].value = 2.5 * 1.20;
	judge(n);
	/* Once is no breach. */
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
	assert_int_equal(gate_checks(&n->gate, GATE_SPEED, GATE_SUSPECTED), 1);
	for (size_t i = 0; i < n->gate.count; i++) {
		if (n->gate.checks[i].outcome == GATE_SUSPECTED)
			gate_repeat(&n->gate, &n->gate.checks[i], &again, 0.02);
	}
	check = gate_only_breach(&n->gate, GATE_SPEED);
	assert_near(check->found, 2.9, 1e-12);
	judge(n); /* half of the tolerance of unrest: nobody can tell */
	for (size_t i = 0; i < n->gate.count; i++)
		gate_repeat(&n->gate, &n->gate.checks[i], &again, 0.08);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
	assert_int_equal(gate_count(&n->gate, GATE_SUSPECTED), 1);
	judge(n);
	again.value = 2.5 * 1.14;
	for (size_t i = 0; i < n->gate.count; i++)
		gate_repeat(&n->gate, &n->gate.checks[i], &again, 0.02);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
	assert_int_equal(gate_count(&n->gate, GATE_SUSPECTED), 0);
}

static void memory_has_its_own_rule(void **state)
{
	struct nights *n = *state;
	struct baseline_cell *cell =
		gate_night_cell(&n->night, "frames", "zlib", "6");
	struct relative again = {true, 5.5 * 2};

	cell->ratios[RATIO_DECODE_MEMORY].value = 5.5 * 2;
	judge(n);
	for (size_t i = 0; i < n->gate.count; i++)
		gate_repeat(&n->gate, &n->gate.checks[i], &again, 0.02);
	assert_int_equal(gate_only_breach(&n->gate, GATE_MEMORY)->ratio,
			 RATIO_DECODE_MEMORY);
}

static void missing_and_new_cells_are_named(void **state)
{
	struct nights *n = *state;
	struct baseline_cell *cell =
		gate_night_cell(&n->night, "frames", "zlib", "6");

	(void)snprintf(cell->key.level, sizeof(cell->key.level), "5");
	baseline_sort(&n->night);
	judge(n);
	assert_string_equal(gate_only_breach(&n->gate, GATE_MISSING)->key.level,
			    "6");
	assert_int_equal(gate_count(&n->gate, GATE_NOTED), 1);
	gate_night_corpus(&n->night, "frames")->outcome = OUTCOME_SKIPPED;
	judge(n);
	assert_string_equal(gate_only_breach(&n->gate, GATE_MISSING)->key.codec,
			    "");
}

static void versions_are_named_not_refused(void **state)
{
	struct nights *n = *state;
	struct baseline_cell *cell =
		gate_night_cell(&n->night, "frames", "zlib", "6");

	n->night.libraries[1] = (struct library_fact){"zlib", "1.3.1"};
	judge(n);
	assert_int_equal(gate_count(&n->gate, GATE_BREACHED), 0);
	assert_int_equal(gate_count(&n->gate, GATE_NOTED), 1);
	cell->bytes = 21000;
	judge(n);
	assert_non_null(strstr(gate_only_breach(&n->gate, GATE_SIZE)->words,
			       "zlib 1.2.13 at the pin, 1.3.1 now"));
}

static void refused(struct nights *n, const char *words)
{
	struct reason why = {""};

	assert_int_equal(gate_init(&n->gate, &n->pin, &n->night, &why),
			 STATUS_MISMATCH);
	if (!strstr(why.text, words))
		fail_msg("'%s' lacks '%s'", why.text, words);
}

static void what_cannot_be_compared(void **state)
{
	struct nights *n = *state;

	gate_night_corpus(&n->night, "frames")->kind = SYMBOL_U16LE;
	refused(n, "symbols of frames: 'byte' at the pin, 'u16le' now");
	gate_night_corpus(&n->night, "feed")->rolling = false;
	refused(n, "feed of feed: 'rolling' at the pin, 'fixed' now");
	n->night.seed = 2;
	refused(n, "--seed: 1 at the pin, 2 now");
	n->night.orders = 8;
	refused(n, "--orders: 16 at the pin, 8 now");
	n->night.libraries[0] = (struct library_fact){"mix", "2"};
	refused(n, "version of the reference mix: '1' at the pin, '2' now");
	(void)snprintf(n->night.yardstick, sizeof(n->night.yardstick), "xz 1");
	refused(n, "yardstick: 'zstd 3' at the pin, 'xz 1' now");
	(void)snprintf(n->night.set_name, sizeof(n->night.set_name), "delta");
	refused(n, "set: 'marrow-bay' at the pin, 'delta' now");
}

static void breaches_are_followed_back(void **state)
{
	struct nights *n = *state;
	struct baseline older;
	struct gate gate;
	const struct gate_check *breach;

	gate_night_cell(&n->night, "frames", "zlib", "6")->bytes = 21000;
	judge(n);
	gate_night_init(&older);
	for (int64_t survey = 8; survey >= 5; survey--) {
		/* The run began with survey 7; 5 is another run. */
		gate_night_cell(&older, "frames", "zlib", "6")->bytes =
			survey == 6 ? 20000 : 21000;
		older.survey = survey;
		gate_nights_judge(&n->pin, &older, &gate);
		assert_int_equal(gate_reach_back(&n->gate, &gate), survey > 6);
		gate_release(&gate);
		if (survey == 6)
			break;
	}
	breach = gate_only_breach(&n->gate, GATE_SIZE);
	assert_int_equal(breach->since, 7);
	assert_string_equal(breach->since_started, "2031-05-02T01:00:00Z");
	baseline_release(&older);
}

static void commands_that_measure_again(void **state)
{
	char command[GATE_COMMAND_BYTES];
	struct gate_check check = {.rule = GATE_SIZE,
				   .corpus = "frames",
				   .key = {"zlib", "9", "4096"}};

	(void)state;
	gate_command(&check, "sets/bay.set", command);
	assert_string_equal(command, "ratefloor survey sets/bay.set --corpus "
				     "frames --codec zlib --level 9 "
				     "--no-timing --ledger again.ledger");
	check.rule = GATE_SPEED;
	check.key.codec[0] = '\0';
	gate_command(&check, "it's $(here).set", command);
	assert_string_equal(command,
			    "ratefloor survey 'it'\\''s $(here).set' --corpus "
			    "frames --ledger again.ledger");
}

#define gate_test(f) cmocka_unit_test_setup_teardown(f, setup, teardown)

int main(void)
{
	const struct CMUnitTest tests[] = {
		gate_test(the_same_night_passes),
		gate_test(sizes_of_a_fixed_corpus),
		gate_test(bytes_that_do_not_come_back),
		gate_test(failed_methods),
		gate_test(changed_bytes_of_a_fixed_corpus),
		gate_test(a_rolling_corpus_has_other_bytes),
		gate_test(floors_taken_by_a_codec),
		gate_test(gaps_over_the_limit),
		gate_test(sizes_of_data_of_a_kind),
		gate_test(one_cell_alone_needs_no_correction),
		gate_test(the_larger_error_counts),
		gate_test(other_pairs_are_not_judged),
		gate_test(speed_is_measured_again),
		gate_test(memory_has_its_own_rule),
		gate_test(missing_and_new_cells_are_named),
		gate_test(versions_are_named_not_refused),
		gate_test(what_cannot_be_compared),
		gate_test(breaches_are_followed_back),
		gate_test(commands_that_measure_again),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
