/* Controls: sources so plain that their rate needs no trust. */
#include "source/bytestream.h"
#include "source/record_fields.h"
#include "source/source_rows.h"
#include "source/weights.h"

#include <string.h>

/* Every byte equally likely: H = log2 256 = 8. */
static double random_rate(void)
{
	return 8;
}

static void random_generate(struct source_stream *stream, uint64_t seed)
{
	struct random_stream random;

	random_init(&random, seed, random_name("random"));
	while (!stream_full(stream)) {
		uint32_t word = random_u32(&random);
		const uint8_t bytes[4] = {(uint8_t)word, (uint8_t)(word >> 8),
					  (uint8_t)(word >> 16),
					  (uint8_t)(word >> 24)};

		stream_put(stream, bytes, sizeof(bytes));
	}
}

const struct source source_random = {
	.name = "random",
	.summary = "uniform random bytes: nothing to win",
	.publication = "Shannon 1948",
	.symbols = "byte",
	.default_symbols = 1 << 20,
	.rate_exact = true,
	.bits_per_symbol = random_rate,
	.generate = random_generate,
};

/* One outcome: H = 0. */
static double zeros_rate(void)
{
	return 0;
}

static void zeros_generate(struct source_stream *stream, uint64_t seed)
{
	static const uint8_t zeros[1024];

	(void)seed;
	while (!stream_full(stream))
		stream_put(stream, zeros, sizeof(zeros));
}

const struct source source_zeros = {
	.name = "zeros",
	.summary = "zero bytes: everything to win",
	.publication = "Shannon 1948",
	.symbols = "byte",
	.default_symbols = 1 << 20,
	.rate_exact = true,
	.bits_per_symbol = zeros_rate,
	.generate = zeros_generate,
};

/* Weights floor(2^20 / r) at rank r = 1 .. 256: H = log2 W - sum w log2 w / W.
 */
static void iid_weights(struct weights *weights)
{
	weights_init_zipf(weights, 256, 1 << 20, 1);
}

static double iid_rate(void)
{
	struct weights weights;

	iid_weights(&weights);
	return weights_entropy(&weights);
}

static void iid_generate(struct source_stream *stream, uint64_t seed)
{
	struct random_stream random;
	struct weights weights;

	iid_weights(&weights);
	random_init(&random, seed, random_name("iid"));
	while (!stream_full(stream)) {
		/* An odd factor permutes the bytes, so that rank shows
		 * nowhere in their order. */
		uint8_t byte =
			(uint8_t)(weights_draw(&weights, &random) * 167 + 101);

		stream_put(stream, &byte, 1);
	}
}

const struct source source_iid = {
	.name = "iid",
	.summary = "independent bytes of Zipf-like frequency",
	.publication = "Shannon 1948",
	.symbols = "byte",
	.default_symbols = 1 << 20,
	.rate_exact = true,
	.bits_per_symbol = iid_rate,
	.generate = iid_generate,
};

/* Letters A and B: A to B in 1 of 10 cases, B to A in 3 of 10. */
#define CHAIN_LEAVE_A 1
#define CHAIN_LEAVE_B 3
#define CHAIN_OUT_OF 10

static double chain_rate(void)
{
	return two_state_rate(CHAIN_LEAVE_A, CHAIN_LEAVE_B, CHAIN_OUT_OF);
}

static void chain_generate(struct source_stream *stream, uint64_t seed)
{
	struct random_stream random;
	bool b;

	random_init(&random, seed, random_name("chain"));
	b = random_below(&random, CHAIN_LEAVE_A + CHAIN_LEAVE_B) <
	    CHAIN_LEAVE_A;
	while (!stream_full(stream)) {
		uint8_t byte = b ? 'B' : 'A';

		stream_put(stream, &byte, 1);
		if (random_below(&random, CHAIN_OUT_OF) <
		    (b ? CHAIN_LEAVE_B : CHAIN_LEAVE_A))
			b = !b;
	}
}

const struct source source_chain = {
	.name = "chain",
	.summary = "two letters, first-order chain (.1, .3)",
	.publication = "Cover and Thomas 2006, section 4.2",
	.symbols = "byte",
	.default_symbols = 1 << 20,
	.rate_exact = true,
	.bits_per_symbol = chain_rate,
	.generate = chain_generate,
};

/*
 * Records of 8 bytes, little-endian: u32 counter (0 bits), u16 uniform on
 * 0 .. 1023 (10 bits), u8 flag (0 to 1 in .01, 1 to 0 in .1: .116084 bits), u8
 * zeros before the first one of fair flips (2 bits; Cover and Thomas, problem
 * 2.1). A byte holds 255 at most, which costs 2 * 2^-255 bits.
 */
static double rec_rate(void)
{
	return (10 + two_state_rate(1, 10, 100) + 2) / 8;
}

static void rec_generate(struct source_stream *stream, uint64_t seed)
{
	struct random_stream random;
	uint8_t flag;

	random_init(&random, seed, random_name("rec"));
	flag = random_below(&random, 11) < 1;
	for (uint32_t counter = 0; !stream_full(stream); counter++) {
		uint32_t noise = random_below(&random, 1024);
		uint8_t bytes[8];

		put_u32le(bytes, counter);
		put_u16le(bytes + 4, noise);
		bytes[6] = flag;
		bytes[7] = flips_before_one(&random);
		stream_put(stream, bytes, sizeof(bytes));
		if (random_below(&random, 100) < (flag ? 10U : 1U))
			flag = !flag;
	}
}

const struct source source_rec = {
	.name = "rec",
	.summary = "packed records of 8 bytes: counter, noise, flag, run",
	.publication = "sum of the fields' rates, Cover and Thomas 2006, 4.2",
	.symbols = "byte",
	.records = "8",
	.default_symbols = 4000000,
	.rate_exact = true,
	.bits_per_symbol = rec_rate,
	.generate = rec_generate,
};
