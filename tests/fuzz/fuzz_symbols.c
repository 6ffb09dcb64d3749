/*
 * Can any bytes make a symbol kind crash, leak, or break what sequence.h
 * promises? The first byte chooses kind and records. Built as fuzz_set.c is.
 */
#include "symbols/sequence.h"

#include <stdlib.h>

int LLVMFuzzerTestOneInput(const uint8_t *bytes, size_t length);

static uint32_t code_at(const struct sequence *sequence, size_t i)
{
	uint32_t code = 0;

	for (unsigned j = 0; j < sequence->code_width; j++)
		code = code << 8 |
		       sequence->codes[i * sequence->code_width + j];
	return code;
}

static void check_sequence(const struct sequence *sequence)
{
	size_t end = sequence_byte_of(sequence, sequence->n);

	if (!sequence->n || end != sequence->canonical_bytes ||
	    sequence->distinct > sequence->code_count ||
	    sequence->distinct > sequence->alphabet)
		abort();
	for (size_t i = 0; i < sequence->n; i++) {
		if (code_at(sequence, i) >= sequence->code_count)
			abort();
		if (sequence_byte_of(sequence, i) >
		    sequence_byte_of(sequence, i + 1))
			abort();
	}
}

static void check_cuts(const struct sequence *sequence)
{
	struct cuts cuts;

	if (cuts_init(&cuts, sequence) != STATUS_OK)
		abort();
	for (size_t i = 0; i < cuts.blocks; i++) {
		if (cuts.symbol[i] >= cuts.symbol[i + 1] ||
		    cuts.byte[i] >= cuts.byte[i + 1])
			abort();
	}
	if (cuts.blocks && cuts.symbol[cuts.blocks] != sequence->n)
		abort();
	cuts_release(&cuts);
}

int LLVMFuzzerTestOneInput(const uint8_t *bytes, size_t length)
{
	struct symbol_rules rules = {.kind = SYMBOL_BYTE};
	struct sequence sequence = {0};
	struct reason why = {""};

	if (!length)
		return 0;
	rules.kind = (enum symbol_kind)((bytes[0] & 15) % SYMBOL_KIND_COUNT);
	rules.record_bytes = bytes[0] >> 5;
	rules.record_lines = bytes[0] >> 4 & 1;
	if (sequence_init(&sequence, (struct slice){bytes + 1, length - 1},
			  &rules, &why) != STATUS_OK) {
		if (!why.text[0])
			abort();
		return 0;
	}
	check_sequence(&sequence);
	check_cuts(&sequence);
	sequence_release(&sequence);
	return 0;
}
