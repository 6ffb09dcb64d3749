/* Sources whose behaviour is plain: controls for every method. */
#include "source/source_rows.h"

#include "base/random.h"
#include "source/weights.h"

#include <math.h>

#define SYMBOLS_DEFAULT 1000000

/* Calls next for each byte. */
static MUST_USE enum status make_bytes(uint64_t symbols, struct buffer *out,
				       uint8_t (*next)(void *state),
				       void *state)
{
	for (uint64_t i = 0; i < symbols; i++) {
		uint8_t byte = next(state);

		TRY(buffer_add(out, &byte, 1));
	}
	return STATUS_OK;
}

/* random: 256 equal outcomes, rate log2 256 = 8. */

static uint8_t next_random(void *state)
{
	return (uint8_t)(random_u32(state) >> 24);
}

static enum status random_rate(double *bits_per_symbol)
{
	*bits_per_symbol = 8;
	return STATUS_OK;
}

static enum status random_make(uint64_t symbols, uint64_t seed,
			       struct buffer *out, struct reason *why)
{
	struct random_stream random;

	(void)why;
	random_init(&random, seed, random_name("random"));
	return make_bytes(symbols, out, next_random, &random);
}

const struct source source_random = {
	.name = "random",
	.summary = "uniform random bytes",
	.symbols = SYMBOLS_DEFAULT,
	.rate = random_rate,
	.make = random_make,
};

/* zeros: one outcome, rate 0. */

static uint8_t next_zero(void *state)
{
	(void)state;
	return 0;
}

static enum status zeros_rate(double *bits_per_symbol)
{
	*bits_per_symbol = 0;
	return STATUS_OK;
}

static enum status zeros_make(uint64_t symbols, uint64_t seed,
			      struct buffer *out, struct reason *why)
{
	(void)seed;
	(void)why;
	return make_bytes(symbols, out, next_zero, NULL);
}

const struct source source_zeros = {
	.name = "zeros",
	.summary = "zero bytes and nothing else",
	.symbols = SYMBOLS_DEFAULT,
	.rate = zeros_rate,
	.make = zeros_make,
};

/* iid: independent bytes, weight 65536 / (i + 1) for byte i; rate H. */

#define IID_SCALE 65536

struct iid {
	struct random_stream random;
	uint32_t weight[256];
};

static uint8_t next_iid(void *state)
{
	struct iid *iid = state;
	const struct weights weights = {iid->weight, 256};

	return (uint8_t)weights_draw(&weights, &iid->random);
}

static enum status iid_rate(double *bits_per_symbol)
{
	uint32_t weight[256];
	const struct weights weights = {weight, 256};

	weights_zipf(weight, 256, IID_SCALE);
	*bits_per_symbol = weights_entropy(&weights);
	return STATUS_OK;
}

static enum status iid_make(uint64_t symbols, uint64_t seed, struct buffer *out,
			    struct reason *why)
{
	struct iid iid;

	(void)why;
	random_init(&iid.random, seed, random_name("iid"));
	weights_zipf(iid.weight, 256, IID_SCALE);
	return make_bytes(symbols, out, next_iid, &iid);
}

const struct source source_iid = {
	.name = "iid",
	.summary = "independent bytes with Zipf-like weights",
	.symbols = SYMBOLS_DEFAULT,
	.rate = iid_rate,
	.make = iid_make,
};

/*
 * chain: two states, a to b with 1/10, b to a with 3/10. Stationary (3/4, 1/4),
 * rate 3/4 h2(.1) + 1/4 h2(.3) = .572069 (Cover and Thomas, section 4.2).
 */

#define LEAVE_A 1
#define LEAVE_B 3
#define OF 10

struct chain {
	struct random_stream random;
	uint8_t state;
};

static uint8_t next_chain(void *state)
{
	struct chain *chain = state;
	uint8_t now = chain->state;

	if (random_below(&chain->random, OF) < (now == 'a' ? LEAVE_A : LEAVE_B))
		chain->state = now == 'a' ? 'b' : 'a';
	return now;
}

static enum status chain_rate(double *bits_per_symbol)
{
	double alpha = (double)LEAVE_A / OF, beta = (double)LEAVE_B / OF;

	*bits_per_symbol =
		(beta * binary_entropy(alpha) + alpha * binary_entropy(beta)) /
		(alpha + beta);
	return STATUS_OK;
}

static enum status chain_make(uint64_t symbols, uint64_t seed,
			      struct buffer *out, struct reason *why)
{
	struct chain chain = {.state = 'a'};

	(void)why;
	random_init(&chain.random, seed, random_name("chain"));
	if (random_below(&chain.random, LEAVE_A + LEAVE_B) < LEAVE_A)
		chain.state = 'b';
	return make_bytes(symbols, out, next_chain, &chain);
}

const struct source source_chain = {
	.name = "chain",
	.summary = "a two-state chain, leaving with 1/10 and 3/10",
	.symbols = SYMBOLS_DEFAULT,
	.rate = chain_rate,
	.make = chain_make,
};

/*
 * strand: A C G T in a ring; stays with 11/20, goes on by one, two or three
 * with 5/20, 3/20, 1/20. All states are alike, so the rate is the entropy of
 * the move.
 */

static const uint32_t strand_weights[] = {11, 5, 3, 1};
static const struct weights strand_move = {strand_weights, 4};

struct strand {
	struct random_stream random;
	size_t base;
};

static uint8_t next_base(void *state)
{
	struct strand *strand = state;

	strand->base =
		(strand->base + weights_draw(&strand_move, &strand->random)) %
		4;
	return (uint8_t) "ACGT"[strand->base];
}

static enum status strand_rate(double *bits_per_symbol)
{
	*bits_per_symbol = weights_entropy(&strand_move);
	return STATUS_OK;
}

static enum status strand_make(uint64_t symbols, uint64_t seed,
			       struct buffer *out, struct reason *why)
{
	struct strand strand = {.base = 0};

	(void)why;
	random_init(&strand.random, seed, random_name("strand"));
	return make_bytes(symbols, out, next_base, &strand);
}

const struct source source_strand = {
	.name = "strand",
	.summary = "a chain over the letters A, C, G and T",
	.symbols = SYMBOLS_DEFAULT,
	.rate = strand_rate,
	.make = strand_make,
};
