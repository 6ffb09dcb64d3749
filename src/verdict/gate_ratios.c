#include "verdict/gate_parts.h"

#include <stdio.h>

static const struct {
	const char *words;
	enum gate_rule rule;
} kinds[RATIO_COUNT] = {
	[RATIO_ENCODE_TIME] = {"time to encode", GATE_SPEED},
	[RATIO_DECODE_TIME] = {"time to decode", GATE_SPEED},
	[RATIO_ENCODE_MEMORY] = {"memory to encode", GATE_MEMORY},
	[RATIO_DECODE_MEMORY] = {"memory to decode", GATE_MEMORY},
};

/*
 * One survey's reading is rough. Half of the tolerance is enough to have it
 * measured again with care, so that a codec just past the tolerance does not
 * slip through on a lucky night; only the repeat can breach.
 */
#define SUSPICION 0.5

static void say_ratio(const struct gate *gate, struct gate_check *check,
		      const char *repeat)
{
	gate_say(check,
		 "%s %.3g times that of %s, %+.1f%% against the pinned %.3g "
		 "(tolerance %.4g%%)%s%s",
		 kinds[check->ratio].words, check->found,
		 gate->tonight->yardstick,
		 100 * (check->found / check->pinned - 1), check->pinned,
		 100 * gate->tonight->speed_tolerance, repeat,
		 gate_versions(gate, check->key.codec).text);
}

static bool over(const struct gate_check *check, double tolerance)
{
	return check->found > check->pinned * (1 + tolerance);
}

void gate_ratios(struct gate *gate, const struct baseline_cell *pinned,
		 const struct baseline_cell *found)
{
	for (size_t i = 0; i < RATIO_COUNT; i++) {
		const struct relative *before = &pinned->ratios[i];
		const struct relative *now = &found->ratios[i];
		struct gate_check *check;

		if (!before->known || !now->known)
			continue;
		check = gate_add(gate, kinds[i].rule, GATE_PASSED,
				 found->corpus, &found->key);
		if (!check)
			return;
		check->ratio = (enum ratio)i;
		check->pinned = before->value;
		check->found = now->value;
		if (over(check, SUSPICION * gate->tonight->speed_tolerance))
			check->outcome = GATE_SUSPECTED;
		say_ratio(gate, check,
			  check->outcome == GATE_SUSPECTED
				  ? "; not measured again"
				  : "");
	}
}

bool gate_over(const struct gate *gate, const struct gate_check *check,
	       const struct relative *again)
{
	return again->known &&
	       again->value >
		       check->pinned * (1 + gate->tonight->speed_tolerance);
}

double gate_enough(const struct gate *gate, const struct gate_check *check)
{
	return check->pinned * (1 + SUSPICION * gate->tonight->speed_tolerance);
}

void gate_repeat(const struct gate *gate, struct gate_check *check,
		 const struct relative *again, double unrest)
{
	double tolerance = gate->tonight->speed_tolerance;
	char words[80];

	if (check->outcome != GATE_SUSPECTED || !again->known)
		return;
	check->found = again->value;
	if (!over(check, tolerance))
		check->outcome = GATE_PASSED;
	else if (check->rule == GATE_MEMORY || unrest <= SUSPICION * tolerance)
		check->outcome = GATE_BREACHED;
	(void)snprintf(words, sizeof(words),
		       check->outcome == GATE_SUSPECTED
			       ? "; measured again on a machine too busy to "
				 "tell (%.0f%% unrest)"
			       : "; measured again",
		       100 * unrest);
	say_ratio(gate, check, words);
}
