#include "predict/bases.h"

#include "predict/components.h"
#include "predict/strands.h"

#include "base/log2.h"
#include "base/memory.h"

/* Contexts whose counts are dense, and those that learn from both strands. */
#define DENSE 3
#define SPARSE 3
static const uint8_t dense_order[DENSE] = {3, 6, 8};
static const uint8_t sparse_order[SPARSE] = {11, 12, 16};

/* Contexts up to this order have an entry each; others share by hash. */
#define DIRECT_ORDER 12
#define SHARED_LOG2 22

/* Bases by which the tables are called for ahead. */
#define WARM 12

/* Where the counts of a cell end, by order: how fast it follows. */
static const uint8_t sparse_limit[SPARSE] = {15, 15, 6};

/* A sparse cell: 12 bits of probability over 4 bits of count. */
#define CELL_HALF 0x8000
#define TREND_RATE 6
#define REPEAT_FIRST ((UINT32_MAX / 8 * 7 & ~1023U) | 4)

/* Cells of a context: a check, the first bit, and the second after either. */
struct group {
	uint16_t cell[4];
};

struct sparse {
	struct group *groups; /* owned */
	unsigned log2;
	unsigned order;
	/* what follows a cell, by node's bit, count and 64 shares */
	uint16_t trend[2][16][64];
};

struct bases {
	struct mixer mixer;
	const struct lanes *lanes;
	const uint8_t *bytes;
	size_t at;
	bool begun;
	unsigned node; /* 1, then 2 or 3 */
	struct strands strands;
	struct repeats repeats;
	uint32_t repeat_cell[2][REPEAT_STEPS];
	uint32_t *dense[DENSE]; /* owned; 4 cells a context */
	struct sparse sparse[SPARSE];
	/* of the base being coded */
	uint32_t *dense_at[DENSE];
	uint16_t *sparse_at[SPARSE];
	uint16_t *trend_at[SPARSE];
	unsigned expected[2], step[2];
	struct view view;
	struct mixing mixing;
	struct tally tally;
	_Alignas(64) int16_t inputs[INPUTS_NIGHTLY];
};

/* 65536 / (n + 3/2), the step after n observations. */
static const uint16_t count_rate[16] = {
	43690, 26214, 18724, 14563, 11915, 10082, 8738, 7710,
	6898,  6241,  5698,  5242,  4854,  4519,  4228, 3971};

static inline uint16_t sparse_moved(uint16_t cell, unsigned bit, unsigned limit)
{
	unsigned count = cell & 15;
	int32_t p = cell >> 4, target = bit ? 4095 : 0;

	p += ((target - p) * count_rate[count] + 32768) >> 16;
	return (uint16_t)((unsigned)p << 4 |
			  (count < limit ? count + 1 : count));
}

static struct group *group_of(struct sparse *sparse, uint64_t context,
			      uint16_t *check)
{
	uint64_t hash;

	if (sparse->order <= DIRECT_ORDER &&
	    sparse->log2 == 2 * sparse->order) {
		*check = 1;
		return &sparse->groups[context];
	}
	hash = (context + 1) * UINT64_C(0xd6e8feb86659fd93);
	hash ^= hash >> 32;
	hash *= UINT64_C(0xd6e8feb86659fd93);
	*check = (uint16_t)(hash | 1);
	return &sparse->groups[hash >> (64 - sparse->log2)];
}

/* The cells of a context, fresh where another one had them. */
static uint16_t *cells_of(struct sparse *sparse, uint64_t context)
{
	uint16_t check;
	struct group *group = group_of(sparse, context, &check);

	if (group->cell[0] != check) {
		group->cell[0] = check;
		group->cell[1] = group->cell[2] = group->cell[3] = CELL_HALF;
	}
	return group->cell;
}

static unsigned group_log2(unsigned order, size_t bytes)
{
	unsigned most = order <= DIRECT_ORDER ? 2 * order : SHARED_LOG2;
	unsigned log2 = 8;

	while (log2 < most && ((size_t)1 << log2) < 2 * bytes)
		log2++;
	return log2;
}

static MUST_USE enum status bases_allocate(struct bases *made, size_t bytes)
{
	TRY(repeats_init(&made->repeats, bytes));
	TRY(memory_new_lines((size_t)SETS_NIGHTLY * SET_ROWS * INPUTS_NIGHTLY,
			     sizeof(int16_t), &made->mixer.weights));
	for (unsigned i = 0; i < DENSE; i++)
		TRY(memory_new((size_t)4 << (2 * dense_order[i]),
			       sizeof(uint32_t), &made->dense[i]));
	for (unsigned i = 0; i < SPARSE; i++) {
		struct sparse *sparse = &made->sparse[i];

		sparse->order = sparse_order[i];
		sparse->log2 = group_log2(sparse->order, bytes);
		TRY(memory_new_lines((size_t)1 << sparse->log2,
				     sizeof(*sparse->groups), &sparse->groups));
	}
	return STATUS_OK;
}

enum status bases_new(const struct predict_plan *plan, struct bases **bases)
{
	struct bases *made;
	enum status status;

	TRY(memory_new_lines(1, sizeof(*made), &made));
	tables_build(&made->mixer.tables);
	mixer_shape(&made->mixer, false, 40);
	bases_set_plain(made, false);
	status = bases_allocate(made, plan->bytes);
	if (status != STATUS_OK) {
		bases_free(made);
		return status;
	}
	*bases = made;
	return STATUS_OK;
}

void bases_free(struct bases *bases)
{
	if (!bases)
		return;
	repeats_release(&bases->repeats);
	memory_free(bases->mixer.weights);
	for (unsigned i = 0; i < DENSE; i++)
		memory_free(bases->dense[i]);
	for (unsigned i = 0; i < SPARSE; i++)
		memory_free(bases->sparse[i].groups);
	memory_free(bases);
}

void bases_set_plain(struct bases *bases, bool plain)
{
	const struct lanes *fast = lanes_fast();

	bases->lanes = fast && !plain ? fast : &lanes_plain;
}

static void restart_sparse(struct sparse *sparse)
{
	memset(sparse->groups, 0, sizeof(*sparse->groups) << sparse->log2);
	for (unsigned bit = 0; bit < 2; bit++) {
		for (unsigned n = 0; n < 16; n++) {
			for (unsigned i = 0; i < 64; i++)
				sparse->trend[bit][n][i] =
					(uint16_t)(24576 + 256 * i);
		}
	}
}

void bases_restart(struct bases *bases, const uint8_t *bytes)
{
	mixer_restart(&bases->mixer, 2000, 1000);
	repeats_restart(&bases->repeats);
	for (unsigned i = 0; i < DENSE; i++) {
		for (size_t j = 0; j < (size_t)4 << (2 * dense_order[i]); j++)
			bases->dense[i][j] = cell_half();
	}
	for (unsigned i = 0; i < SPARSE; i++)
		restart_sparse(&bases->sparse[i]);
	for (unsigned i = 0; i < 2 * REPEAT_STEPS; i++)
		bases->repeat_cell[i & 1][i / 2] = REPEAT_FIRST;
	bases->bytes = bytes;
	bases->at = 0;
	bases->begun = false;
	bases->strands = (struct strands){0, 0};
	bases->tally = (struct tally){.mantissa = UINT64_C(1) << 63};
}

static void begin_base(struct bases *b)
{
	for (unsigned i = 0; i < DENSE; i++)
		b->dense_at[i] =
			b->dense[i] +
			4 * strands_context(&b->strands, dense_order[i]);
	for (unsigned i = 0; i < SPARSE; i++)
		b->sparse_at[i] =
			cells_of(&b->sparse[i],
				 strands_context(&b->strands, sparse_order[i]));
	for (unsigned i = 0; i < 2; i++) {
		b->expected[i] = repeats_expected(&b->repeats, i, b->bytes);
		b->step[i] = repeats_step(&b->repeats, i);
	}
	b->view.last = (uint8_t)(b->strands.forward & 255);
	b->view.hash[1] = (uint32_t)strands_context(&b->strands, 6) << 16;
	b->node = 1;
	b->begun = true;
}

/* Step of repeat i while its first bit is that of the base. */
static inline unsigned repeat_holds(const struct bases *b, unsigned i)
{
	if (b->expected[i] == 4)
		return 0;
	return b->node == 1 || b->expected[i] >> 1 == (b->node & 1) ? b->step[i]
								    : 0;
}

static inline unsigned repeat_bit(const struct bases *b, unsigned i)
{
	return b->node == 1 ? b->expected[i] >> 1 & 1 : b->expected[i] & 1;
}

static void gather_inputs(struct bases *b)
{
	const struct predict_tables *tables = &b->mixer.tables;
	int16_t *input = b->inputs;

	for (unsigned i = 0; i < SPARSE; i++) {
		unsigned cell = b->sparse_at[i][b->node], count = cell & 15;
		uint16_t *trend =
			&b->sparse[i].trend[b->node > 1][count][cell >> 10];

		b->trend_at[i] = trend;
		*input++ = tables->stretch[*trend >> 4];
		*input++ =
			(int16_t)(count ? tables->stretch[cell >> 4] / 2 : 0);
	}
	for (unsigned i = 0; i < DENSE; i++)
		*input++ = tables->stretch[b->dense_at[i][b->node] >> 20];
	for (unsigned i = 0; i < 2; i++) {
		unsigned step = repeat_holds(b, i);

		match_inputs(tables, b->repeat_cell[i][step], step,
			     repeat_bit(b, i), input);
		input += 2;
	}
	*input = 256;
}

unsigned bases_probability(struct bases *b)
{
	struct selection at = {.view = &b->view};
	unsigned a;

	if (!b->begun)
		begin_base(b);
	gather_inputs(b);
	a = repeat_holds(b, 0);
	at.partial = b->node;
	at.bit = b->node > 1 ? 2 : 0;
	at.bit += repeat_holds(b, 1) ? 1 : 0;
	at.step = a ? a : repeat_holds(b, 1);
	b->view.select[0] =
		(uint16_t)(strands_context(&b->strands, 3) * 4 + b->node);
	b->mixing.inputs = b->inputs;
	return b->lanes->predict(&b->mixer, &at, &b->mixing);
}

unsigned bases_decision(const struct bases *b, uint8_t byte)
{
	unsigned base = base_code(byte);

	return b->begun && b->node > 1 ? base & 1 : base >> 1;
}

/* The other strand: the base REPEAT back, complemented, after the last ones. */
static void learn_opposite(struct bases *b, struct sparse *sparse,
			   unsigned limit)
{
	unsigned order = sparse->order, base;
	uint16_t *cells;

	if (b->at <= order)
		return;
	base = 3 - (unsigned)(b->strands.forward >> (2 * order) & 3);
	cells = cells_of(sparse, strands_opposite(&b->strands, order));
	cells[1] = sparse_moved(cells[1], base >> 1, limit);
	cells[2 + (base >> 1)] =
		sparse_moved(cells[2 + (base >> 1)], base & 1, limit);
}

static void end_base(struct bases *b, unsigned base)
{
	b->at++;
	strands_push(&b->strands, base);
	repeats_push(&b->repeats, &b->strands, b->bytes, b->at);
	for (unsigned i = 0; i < SPARSE; i++)
		learn_opposite(b, &b->sparse[i], sparse_limit[i]);
	b->begun = false;
}

static void learn_bit(struct bases *b, unsigned bit)
{
	for (unsigned i = 0; i < SPARSE; i++) {
		uint16_t *cell = &b->sparse_at[i][b->node];
		uint16_t *trend = b->trend_at[i];

		*cell = sparse_moved(*cell, bit, sparse_limit[i]);
		direct_update(trend, bit, TREND_RATE);
	}
	for (unsigned i = 0; i < DENSE; i++)
		b->dense_at[i][b->node] =
			cell_update(&b->mixer.tables, b->dense_at[i][b->node],
				    bit, RATE_ROOM - 4);
	for (unsigned i = 0; i < 2; i++) {
		unsigned step = repeat_holds(b, i);
		uint32_t *cell = &b->repeat_cell[i][step];

		if (step)
			*cell = cell_update(&b->mixer.tables, *cell,
					    repeat_bit(b, i) == bit, 255);
	}
}

bool bases_update(struct bases *b, unsigned decision, uint8_t *byte)
{
	unsigned base = (b->node & 1) * 2 + decision;

	b->lanes->update(&b->mixer, &b->mixing, decision);
	learn_bit(b, decision);
	if (b->node == 1) {
		b->node = 2 + decision;
		return false;
	}
	*byte = (uint8_t) "ACGT"[base];
	end_base(b, base);
	return true;
}

/* Calls for what the base after these strands will touch. */
static void warm(struct bases *b, const struct strands *ahead)
{
	for (unsigned i = 0; i < SPARSE; i++) {
		struct sparse *sparse = &b->sparse[i];
		uint64_t opposite = strands_opposite(ahead, sparse->order);
		uint16_t check;

		__builtin_prefetch(
			group_of(sparse, strands_context(ahead, sparse->order),
				 &check),
			1);
		__builtin_prefetch(group_of(sparse, opposite, &check), 1);
	}
	repeats_warm(&b->repeats, ahead);
}

int64_t bases_measure_q32(struct bases *b, size_t count)
{
	int64_t before = tally_q32(&b->tally);
	struct strands ahead = b->strands;
	size_t end = b->at + count, known = b->at;

	while (b->at < end) {
		uint8_t letter = b->bytes[b->at], byte;
		bool done = false;

		for (; known < end && known < b->at + WARM; known++) {
			strands_push(&ahead, base_code(b->bytes[known]));
			warm(b, &ahead);
		}
		while (!done) {
			unsigned p = bases_probability(b);
			unsigned bit = bases_decision(b, letter);

			tally_add(&b->tally, bit ? p : 65536 - p);
			done = bases_update(b, bit, &byte);
		}
	}
	return tally_q32(&b->tally) - before;
}
