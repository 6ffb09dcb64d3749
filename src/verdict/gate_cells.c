#include "verdict/gate_parts.h"

#include <math.h>
#include <stdio.h>
#include <string.h>

#include "base/memory.h"
#include "resample/multiplicity.h"
#include "resample/tail.h"

static bool check_runs(struct gate *gate, const struct baseline_cell *found)
{
	struct gate_check *check;

	if (!found->ran && !found->lossless) {
		check = gate_add(gate, GATE_BROKEN, GATE_BREACHED,
				 found->corpus, &found->key);
		gate_say(check, "failed: %s%s", found->reason,
			 gate_versions(gate, found->key.codec).text);
		return false;
	}
	check = gate_add(gate, GATE_LOSSLESS,
			 found->lossless ? GATE_PASSED : GATE_BREACHED,
			 found->corpus, &found->key);
	if (found->lossless)
		gate_say(check, "every byte came back");
	else
		gate_say(check, "other bytes came back: %s%s", found->reason,
			 gate_versions(gate, found->key.codec).text);
	return found->lossless;
}

/* Bytes that are just the tolerance over are no breach; products round. */
#define ROUNDING 1e-12

/* A fixed corpus and a fixed build have no sampling error. */
static void check_size(struct gate *gate, const struct baseline_cell *pinned,
		       const struct baseline_cell *found)
{
	double before = (double)pinned->bytes, now = (double)found->bytes;
	double change = before > 0 ? now / before - 1 : 0;
	double tolerance = gate->tonight->tolerance;
	struct gate_check *check = gate_add(
		gate, GATE_SIZE,
		now > before * (1 + tolerance) * (1 + ROUNDING) ? GATE_BREACHED
								: GATE_PASSED,
		found->corpus, &found->key);

	if (!check)
		return;
	check->pinned = before;
	check->found = now;
	if (pinned->bytes == found->bytes)
		gate_say(check, "%llu bytes as at the pin; this file: exact",
			 (unsigned long long)found->bytes);
	else
		gate_say(check,
			 "%llu bytes, %+.3f%% against the pinned %llu "
			 "(tolerance %.4g%%); this file: exact%s",
			 (unsigned long long)found->bytes, 100 * change,
			 (unsigned long long)pinned->bytes, 100 * tolerance,
			 gate_versions(gate, found->key.codec).text);
}

static void check_gap(struct gate *gate, const struct baseline_cell *pinned,
		      const struct baseline_cell *found)
{
	double limit = gate->tonight->gap_limit;
	bool over_now, over_then;

	if (limit < 0 || !found->has_gap)
		return;
	over_now = found->gap_least > limit;
	over_then = pinned->has_gap && pinned->gap > limit;
	gate_say(gate_add(gate, GATE_GAP_LIMIT,
			  over_now && !over_then ? GATE_BREACHED : GATE_PASSED,
			  found->corpus, &found->key),
		 "gap %.1f%% of the floor, limit %.4g%%, at the pin %.1f%%%s%s",
		 100 * found->gap, 100 * limit, 100 * pinned->gap,
		 over_now && over_then ? ", over it since then" : "",
		 gate_versions(gate, found->key.codec).text);
}

/* Bits per symbol that a cell of a rolling corpus may lose. */
static double allowance(const struct gate *gate,
			const struct baseline_cell *pinned)
{
	const struct baseline_corpus *corpus =
		baseline_corpus_find(gate->pin, pinned->corpus);

	if (!corpus || !corpus->n)
		return 0;
	return gate->tonight->tolerance * 8 * (double)pinned->bytes /
	       (double)corpus->n;
}

/*
 * The share of nights on which chance alone takes a cell so far past what is
 * allowed. Both nights measure the same spread; the larger of the two errors
 * counts for both, for the error of one night is itself a rough figure, and the
 * pin's is met again every night.
 */
static double chance(const struct baseline_pair *pinned,
		     const struct baseline_pair *found, double allowed)
{
	double excess = found->mean - pinned->mean - allowed;
	double error =
		sqrt(2.0) * fmax(pinned->standard_error, found->standard_error);
	double blocks = fmin(pinned->effective_blocks, found->effective_blocks);

	if (!(error > 0))
		return excess > 0 ? 0 : 1;
	return student_upper(excess / error, blocks > 2 ? blocks - 1 : 1);
}

/* Holm's rule over all cells decides later: see gate_kinds. */
static void check_kind(struct gate *gate, const struct baseline_cell *pinned,
		       const struct baseline_cell *found)
{
	const struct baseline_pair *before = &pinned->pair, *now = &found->pair;
	struct gate_check *check = gate_add(gate, GATE_SIZE_KIND, GATE_UNJUDGED,
					    found->corpus, &found->key);

	if (!check)
		return;
	if (!before->known || !now->known) {
		gate_say(check, "no interval %s: %s",
			 now->known ? "at the pin" : "tonight",
			 now->known ? "none was pinned" : now->reason);
		return;
	}
	if (strcmp(before->against, now->against) != 0) {
		gate_say(check, "paired with %s at the pin, with %s now",
			 before->against, now->against);
		return;
	}
	check->outcome = GATE_PASSED;
	check->pinned = before->mean;
	check->found = now->mean;
	check->p = chance(before, now, allowance(gate, pinned));
	gate_say(check,
		 "%.5f bits per symbol less those of %s, standard error %.5f; "
		 "at the pin %.5f, %.5f: %+.5f, of which %.5f are allowed; "
		 "chance takes it as far with p = %.2g; data of this kind%s",
		 now->mean, now->against, now->standard_error, before->mean,
		 before->standard_error, now->mean - before->mean,
		 allowance(gate, pinned), check->p,
		 gate_versions(gate, found->key.codec).text);
}

static void check_cell(struct gate *gate, const struct baseline_cell *pinned)
{
	const struct baseline_cell *found =
		baseline_cell_find(gate->tonight, pinned->corpus, &pinned->key);
	const struct baseline_corpus *corpus =
		baseline_corpus_find(gate->tonight, pinned->corpus);

	if (!corpus || corpus->outcome != OUTCOME_DONE)
		return; /* said once, of the corpus */
	if (!found) {
		gate_say(gate_add(gate, GATE_MISSING, GATE_BREACHED,
				  pinned->corpus, &pinned->key),
			 "pinned with %llu bytes, but not measured tonight",
			 (unsigned long long)pinned->bytes);
		return;
	}
	if (!check_runs(gate, found) || !gate_comparable(gate, pinned->corpus))
		return;
	if (corpus->rolling)
		check_kind(gate, pinned, found);
	else
		check_size(gate, pinned, found);
	check_gap(gate, pinned, found);
	gate_ratios(gate, pinned, found);
}

static void name_new(struct gate *gate, const struct baseline_cell *cell)
{
	if (!baseline_corpus_find(gate->pin, cell->corpus) ||
	    baseline_cell_find(gate->pin, cell->corpus, &cell->key))
		return;
	/* What fails is heard of on its first night, too. */
	if (!cell->lossless)
		(void)check_runs(gate, cell);
	gate_say(
		gate_add(gate, GATE_NOTE, GATE_NOTED, cell->corpus, &cell->key),
		"new: not in the baseline; pin anew to guard it");
}

void gate_cells(struct gate *gate)
{
	for (size_t i = 0; i < gate->pin->cell_count; i++)
		check_cell(gate, &gate->pin->cells[i]);
	for (size_t i = 0; i < gate->tonight->cell_count; i++)
		name_new(gate, &gate->tonight->cells[i]);
}

static bool is_tested(const struct gate_check *check)
{
	return check->rule == GATE_SIZE_KIND && check->outcome == GATE_PASSED;
}

enum status gate_kinds(struct gate *gate)
{
	double *p, *adjusted;
	size_t count = 0;

	TRY(memory_new(2 * gate->count, sizeof(*p), &p));
	adjusted = p + gate->count;
	for (size_t i = 0; i < gate->count; i++) {
		if (is_tested(&gate->checks[i]))
			p[count++] = gate->checks[i].p;
	}
	if (adjust_holm(p, count, adjusted) != STATUS_OK) {
		memory_free(p);
		return STATUS_NO_MEMORY;
	}
	for (size_t i = 0, next = 0; i < gate->count; i++) {
		struct gate_check *check = &gate->checks[i];

		if (!is_tested(check))
			continue;
		if (adjusted[next++] <= GATE_ALPHA)
			check->outcome = GATE_BREACHED;
	}
	memory_free(p);
	return STATUS_OK;
}
