#include "verdict/gate_parts.h"

#include <stdio.h>
#include <string.h>

#include "cost/findings.h"

bool gate_comparable(const struct gate *gate, const char *corpus)
{
	const struct baseline_corpus *pinned =
		baseline_corpus_find(gate->pin, corpus);
	const struct baseline_corpus *now =
		baseline_corpus_find(gate->tonight, corpus);

	if (!pinned || !now || now->outcome != OUTCOME_DONE)
		return false;
	return now->rolling || strcmp(pinned->sha256, now->sha256) == 0;
}

static void check_library(struct gate *gate, const struct library_fact *now)
{
	const char *before = baseline_version(gate->pin, now->name);

	if (strcmp(before, now->version) != 0)
		gate_say(gate_add(gate, GATE_NOTE, GATE_NOTED, "", NULL),
			 "%s: %s at the pin, %s now: this is what is judged",
			 now->name, *before ? before : "not there",
			 now->version);
}

void gate_notes(struct gate *gate)
{
	const struct baseline *pin = gate->pin, *now = gate->tonight;

	if (strcmp(pin->program, now->program) != 0)
		gate_say(gate_add(gate, GATE_NOTE, GATE_NOTED, "", NULL),
			 "program: %s at the pin, %s now", pin->program,
			 now->program);
	for (size_t i = 0; i < now->library_count; i++)
		check_library(gate, &now->libraries[i]);
	for (size_t i = 0; i < now->corpus_count; i++) {
		const char *name = now->corpora[i].name;

		if (!baseline_corpus_find(pin, name))
			gate_say(gate_add(gate, GATE_NOTE, GATE_NOTED, name,
					  NULL),
				 "new: not in the baseline; pin anew to guard "
				 "it");
	}
}

static void check_bytes(struct gate *gate, const struct baseline_corpus *pinned,
			const struct baseline_corpus *now)
{
	struct gate_check *check;
	bool same;

	if (now->rolling)
		return;
	same = strcmp(pinned->sha256, now->sha256) == 0;
	check = gate_add(gate, GATE_CORPUS_CHANGED,
			 same ? GATE_PASSED : GATE_BREACHED, now->name, NULL);
	if (same)
		gate_say(check, "SHA-256 %.12s as at the pin", now->sha256);
	else
		gate_say(check,
			 "%llu symbols of SHA-256 %.12s at the pin, %llu of "
			 "%.12s now; its cells are not compared",
			 (unsigned long long)pinned->n, pinned->sha256,
			 (unsigned long long)now->n, now->sha256);
}

static void check_floor(struct gate *gate, const struct baseline_corpus *pinned,
			const struct baseline_corpus *now)
{
	bool taken = now->floor_by_codec && !pinned->floor_by_codec &&
		     pinned->floor_known;

	if (!now->floor_known)
		return;
	gate_say(gate_add(gate, GATE_FLOOR_TAKEN,
			  taken ? GATE_BREACHED : GATE_PASSED, now->name, NULL),
		 "%s holds it with %.4f bits per symbol; at the pin %s with "
		 "%.4f",
		 now->floor_held_by, now->floor_bits_per_symbol,
		 pinned->floor_known ? pinned->floor_held_by : "nothing",
		 pinned->floor_bits_per_symbol);
}

static void check_corpus(struct gate *gate,
			 const struct baseline_corpus *pinned)
{
	const struct baseline_corpus *now =
		baseline_corpus_find(gate->tonight, pinned->name);

	if (!now || now->outcome == OUTCOME_SKIPPED) {
		gate_say(gate_add(gate, GATE_MISSING, GATE_BREACHED,
				  pinned->name, NULL),
			 "pinned, but not measured tonight%s%s",
			 now ? ": " : "", now ? now->reason : "");
		return;
	}
	if (now->outcome != OUTCOME_DONE) {
		gate_say(gate_add(gate, GATE_CORPUS_CHANGED, GATE_BREACHED,
				  pinned->name, NULL),
			 "could be used at the pin, cannot now: %s",
			 now->reason);
		return;
	}
	check_bytes(gate, pinned, now);
	gate_say(gate_add(gate, GATE_BROKEN,
			  now->broken[0] ? GATE_BREACHED : GATE_PASSED,
			  pinned->name, NULL),
		 "%s", now->broken[0] ? now->broken : "no method failed");
	if (gate_comparable(gate, pinned->name))
		check_floor(gate, pinned, now);
}

void gate_corpora(struct gate *gate)
{
	for (size_t i = 0; i < gate->pin->corpus_count; i++)
		check_corpus(gate, &gate->pin->corpora[i]);
}
