#include "symbols/mapping.h"

#define BLOCK_BYTES_MIN 4096
#define BLOCKS_MIN 100

static size_t greatest_divisor(size_t a, size_t b)
{
	while (b) {
		size_t rest = a % b;

		a = b;
		b = rest;
	}
	return a;
}

/*
 * Symbols between places where a cut may fall: the least common multiple of
 * byte, symbol and record. The length is a multiple of each, so of this too.
 */
static size_t symbols_apart(const struct sequence *sequence)
{
	size_t symbol_bytes = mappings[sequence->kind].symbol_bytes;
	size_t record_bytes = sequence->record_bytes;
	size_t bits = sequence->kind == SYMBOL_BIT ? 8 : 1;

	if (!record_bytes || !symbol_bytes)
		return bits;
	return bits *
	       (record_bytes / greatest_divisor(record_bytes, symbol_bytes));
}

/* The symbol at which block i of blocks begins; no overflow at any length. */
static size_t cut_at(size_t i, size_t blocks, size_t units, size_t apart)
{
	return (units / blocks * i + units % blocks * i / blocks) * apart;
}

static int all_long_enough(const struct sequence *sequence, size_t blocks,
			   size_t units, size_t apart)
{
	for (size_t i = 0; i < blocks; i++) {
		size_t from = cut_at(i, blocks, units, apart);
		size_t to = cut_at(i + 1, blocks, units, apart);

		if (sequence_byte_of(sequence, to) -
			    sequence_byte_of(sequence, from) <
		    BLOCK_BYTES_MIN)
			return 0;
	}
	return 1;
}

static size_t choose_blocks(const struct sequence *sequence, size_t units,
			    size_t apart)
{
	size_t blocks = CUTS_BLOCKS_MAX;

	if (sequence->n < CUTS_SYMBOLS_MIN || units < BLOCKS_MIN)
		return 0;
	while (blocks > BLOCKS_MIN &&
	       (units < blocks ||
		!all_long_enough(sequence, blocks, units, apart)))
		blocks /= 2;
	return blocks;
}

static void place_cuts(struct cuts *cuts, const struct sequence *sequence,
		       size_t units, size_t apart)
{
	for (size_t i = 0; i <= cuts->blocks; i++) {
		cuts->symbol[i] = cut_at(i, cuts->blocks, units, apart);
		cuts->byte[i] = sequence_byte_of(sequence, cuts->symbol[i]);
	}
	/* White space before the first word belongs to it. */
	cuts->byte[0] = 0;
}

enum status cuts_init(struct cuts *cuts, const struct sequence *sequence)
{
	size_t apart = symbols_apart(sequence);
	size_t units = sequence->n / apart;
	struct cuts made = {.blocks = choose_blocks(sequence, units, apart)};

	if (made.blocks) {
		TRY(memory_new(made.blocks + 1, sizeof(size_t), &made.symbol));
		if (memory_new(made.blocks + 1, sizeof(size_t), &made.byte) !=
		    STATUS_OK) {
			memory_free(made.symbol);
			return STATUS_NO_MEMORY;
		}
		place_cuts(&made, sequence, units, apart);
	}
	*cuts = made;
	return STATUS_OK;
}

void cuts_release(struct cuts *cuts)
{
	memory_free(cuts->symbol);
	memory_free(cuts->byte);
	*cuts = (struct cuts){0};
}
