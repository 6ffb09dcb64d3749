#include "source/bytestream.h"
#include "source/source_rows.h"
#include "source/weights.h"

#include "base/random.h"

/*
 * A C G T in a ring: stay with 11 of 20, go on by one, two or three letters
 * with 5, 3 and 1. Every letter has the same moves, so the chain's rate is the
 * entropy of a move (Cover and Thomas 2006, section 4.2).
 */
static const uint32_t moves[] = {11, 5, 3, 1};

static void strand_moves(struct weights *weights)
{
	weights_init(weights, moves, sizeof(moves) / sizeof(*moves));
}

static double strand_rate(void)
{
	struct weights weights;

	strand_moves(&weights);
	return weights_entropy(&weights);
}

static void strand_generate(struct source_stream *stream, uint64_t seed)
{
	static const char letters[] = "ACGT";
	struct random_stream random;
	struct weights weights;
	size_t at = 0;

	strand_moves(&weights);
	random_init(&random, seed, random_name("strand"));
	while (!stream_full(stream)) {
		uint8_t byte;

		at = (at + weights_draw(&weights, &random)) % 4;
		byte = (uint8_t)letters[at];
		stream_put(stream, &byte, 1);
	}
}

const struct source source_strand = {
	.name = "strand",
	.summary = "four nucleotides, first-order chain",
	.publication = "Cover and Thomas 2006, section 4.2",
	.symbols = "nucleotide",
	.default_symbols = 1 << 20,
	.rate_exact = true,
	.bits_per_symbol = strand_rate,
	.generate = strand_generate,
};
