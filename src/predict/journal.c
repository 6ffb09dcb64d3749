#include "predict/journal.h"

#include "predict/steps.h"

#include "base/memory.h"

#include <string.h>

struct kept_line {
	size_t number;
	uint8_t bytes[LINE_BYTES];
};

struct kept_entry {
	size_t number;
	uint32_t value;
};

struct journal {
	struct predictor *state; /* owned; what lies in the struct itself */
	int16_t *weights;        /* owned */
	uint16_t *order1;        /* owned */
	uint32_t *turn; /* owned; of each line: when it was last kept */
	uint32_t now;
	struct kept_line *lines; /* owned */
	size_t line_count;
	struct kept_entry *entries[2]; /* owned; of each match */
	size_t entry_count[2];
};

static size_t weights_count(const struct predictor *p)
{
	return (size_t)p->mixer.sets * SET_ROWS * p->mixer.inputs;
}

static MUST_USE enum status
journal_allocate(struct journal *made, const struct predictor *p, size_t bytes)
{
	size_t all = (size_t)p->contexts << p->lines_log2;
	size_t most = bytes < all / p->contexts ? bytes * p->contexts : all;

	TRY(memory_new_lines(1, sizeof(*made->state), &made->state));
	TRY(memory_new(weights_count(p), sizeof(*made->weights),
		       &made->weights));
	TRY(memory_new(65536, sizeof(*made->order1), &made->order1));
	TRY(memory_new_zeroed(all, sizeof(*made->turn), &made->turn));
	TRY(memory_new(most, sizeof(*made->lines), &made->lines));
	/* One more: the last byte before is pushed after it. */
	for (unsigned i = 0; i < 2; i++)
		TRY(memory_new(bytes + 1, sizeof(*made->entries[i]),
			       &made->entries[i]));
	return STATUS_OK;
}

enum status journal_new(struct predictor *p, size_t bytes,
			struct journal **journal)
{
	struct journal *made;

	TRY(memory_new_zeroed(1, sizeof(*made), &made));
	if (journal_allocate(made, p, bytes) != STATUS_OK) {
		journal_free(made);
		return STATUS_NO_MEMORY;
	}
	made->now = 1;
	*made->state = *p;
	memcpy(made->weights, p->mixer.weights,
	       weights_count(p) * sizeof(*made->weights));
	memcpy(made->order1, p->order1, 65536 * sizeof(*made->order1));
	*journal = made;
	return STATUS_OK;
}

void journal_free(struct journal *journal)
{
	if (!journal)
		return;
	memory_free(journal->state);
	memory_free(journal->weights);
	memory_free(journal->order1);
	memory_free(journal->turn);
	memory_free(journal->lines);
	memory_free(journal->entries[0]);
	memory_free(journal->entries[1]);
	memory_free(journal);
}

void journal_matches(struct journal *journal, const struct predictor *p)
{
	for (unsigned i = 0; i < 2; i++) {
		const struct match *match = &p->past.match[i];
		size_t number;

		if (!match->table)
			continue;
		number = past_match_entry(&p->past, i);
		journal->entries[i][journal->entry_count[i]++] =
			(struct kept_entry){number, match->table[number]};
	}
}

void journal_lines(struct journal *journal, const struct predictor *p,
		   const struct chunk *chunk)
{
	for (size_t i = 0; i < chunk->count; i++) {
		const struct view *view = &chunk->views[i];

		for (unsigned k = 0; k < p->contexts; k++) {
			size_t line = view->hash[k] >> (32 - p->lines_log2);
			size_t number = ((size_t)k << p->lines_log2) + line;
			struct kept_line *kept;

			if (journal->turn[number] == journal->now)
				continue;
			journal->turn[number] = journal->now;
			kept = &journal->lines[journal->line_count++];
			kept->number = number;
			memcpy(kept->bytes, p->lines + number * LINE_BYTES,
			       LINE_BYTES);
		}
	}
}

void journal_rewind(struct journal *journal, struct predictor *p)
{
	for (size_t i = 0; i < journal->line_count; i++)
		memcpy(p->lines + journal->lines[i].number * LINE_BYTES,
		       journal->lines[i].bytes, LINE_BYTES);
	/* Backwards: an entry set twice gets what it held first. */
	for (unsigned i = 0; i < 2; i++) {
		while (journal->entry_count[i]) {
			const struct kept_entry *kept =
				&journal->entries[i][--journal->entry_count[i]];

			p->past.match[i].table[kept->number] = kept->value;
		}
	}
	journal->line_count = 0;
	journal->now++;
	/* The tables stay where they are: only what they point to changes. */
	*p = *journal->state;
	memcpy(p->mixer.weights, journal->weights,
	       weights_count(p) * sizeof(*journal->weights));
	memcpy(p->order1, journal->order1, 65536 * sizeof(*journal->order1));
}
