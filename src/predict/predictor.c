#include "predict/predictor.h"

#include "predict/bases.h"
#include "predict/components.h"
#include "predict/journal.h"
#include "predict/steps.h"

#include "base/log2.h"
#include "base/memory.h"

#include <assert.h>

/* Sums of the weights that contexts start with, in 2^-14. */
#define FIRST_WEIGHTS 36000U
#define FIRST_SHARES 6000U

/* Lines of a context: enough for the bytes at hand, within the memory given. */
static unsigned lines_log2_for(const struct predict_plan *plan)
{
	bool deep = plan->strength == STRENGTH_DEEP;
	unsigned most = deep ? 19 : 18, log2 = 8;
	size_t bytes_a_line = deep ? 2 : 4;

	while (log2 < most && bytes_a_line << log2 < plan->bytes)
		log2++;
	return log2;
}

/* Prose changes least as it goes on, and deep mixers have most to weigh. */
static int32_t rate_last_for(const struct predict_plan *plan)
{
	if (plan->family != FAMILY_PROSE)
		return plan->strength == STRENGTH_DEEP ? 60 : 90;
	return plan->strength == STRENGTH_DEEP ? 28 : 40;
}

static MUST_USE enum status predictor_allocate(struct predictor *made)
{
	size_t inputs = made->mixer.inputs;

	TRY(past_init(&made->past, &made->plan));
	/* One line more than used, to begin at a multiple of their size. */
	TRY(memory_new_zeroed(((size_t)made->contexts << made->lines_log2) + 1,
			      LINE_BYTES, &made->lines_block));
	made->lines =
		(uint8_t *)(((uintptr_t)made->lines_block + LINE_BYTES - 1) &
			    ~(uintptr_t)(LINE_BYTES - 1));
	made->fresh = true;
	TRY(memory_new_lines((size_t)made->mixer.sets * SET_ROWS * inputs,
			     sizeof(int16_t), &made->mixer.weights));
	TRY(memory_new_lines(65536, sizeof(uint16_t), &made->order1));
	TRY(memory_new(2 * CHUNK, sizeof(*made->views), &made->views));
	return memory_new_lines(CHUNK * 8 * inputs, sizeof(int16_t),
				&made->chunk_inputs);
}

enum status predictor_new(const struct predict_plan *plan,
			  struct predictor **predictor)
{
	struct predictor *made;
	enum status status;

	TRY(memory_new_lines(1, sizeof(*made), &made));
	made->plan = *plan;
	if (made->plan.stride == 0)
		made->plan.stride = 1;
	made->contexts = past_contexts(plan);
	made->lines_log2 = lines_log2_for(plan);
	mixer_shape(&made->mixer, plan->strength == STRENGTH_DEEP,
		    rate_last_for(plan));
	assert(2 * made->contexts + COMMON <= made->mixer.inputs);
	tables_build(&made->mixer.tables);
	predictor_set_lanes(made, LANES_BEST);
	status = plan->family == FAMILY_BASES ? bases_new(plan, &made->bases)
					      : predictor_allocate(made);
	if (status != STATUS_OK) {
		predictor_free(made);
		return status;
	}
	*predictor = made;
	return STATUS_OK;
}

void predictor_free(struct predictor *predictor)
{
	if (!predictor)
		return;
	bases_free(predictor->bases);
	journal_free(predictor->journal);
	past_release(&predictor->past);
	memory_free(predictor->lines_block);
	memory_free(predictor->mixer.weights);
	memory_free(predictor->order1);
	memory_free(predictor->views);
	memory_free(predictor->chunk_inputs);
	memory_free(predictor);
}

void predictor_set_lanes(struct predictor *predictor, enum predict_lanes lanes)
{
	const struct lanes *fast = lanes_fast();

	if (predictor->bases)
		bases_set_plain(predictor->bases, lanes == LANES_PLAIN);
	predictor->lanes = lanes == LANES_BEST && fast ? fast : &lanes_plain;
}

void predictor_set_threads(struct predictor *predictor, unsigned threads)
{
	predictor->threads = threads;
}

void predictor_restart(struct predictor *predictor, const uint8_t *bytes)
{
	const struct predict_tables *tables = &predictor->mixer.tables;

	if (predictor->bases) {
		bases_restart(predictor->bases, bytes);
		return;
	}
	journal_free(predictor->journal);
	predictor->journal = NULL;
	past_restart(&predictor->past, bytes);
	/* New ones are zeroed, and not yet touched. */
	if (!predictor->fresh)
		memset(predictor->lines, 0,
		       ((size_t)predictor->contexts << predictor->lines_log2) *
			       LINE_BYTES);
	predictor->fresh = false;
	/* The more contexts, the less each says at first. */
	mixer_restart(&predictor->mixer,
		      (int16_t)(FIRST_WEIGHTS / predictor->contexts),
		      (int16_t)(FIRST_SHARES / predictor->contexts));
	for (unsigned i = 0; i < CONTEXTS_MAX; i++)
		memcpy(predictor->trend[i], tables->start,
		       sizeof(tables->start));
	for (unsigned i = 0; i < 256; i++)
		predictor->order0[i] = cell_half();
	for (unsigned i = 0; i < 65536; i++)
		predictor->order1[i] = 32768;
	for (unsigned i = 0; i < MATCH_STEPS; i++) {
		/* A match of n bytes is right about n + 1 times in n + 2. */
		uint32_t right = UINT32_MAX / (i + 2) * (i + 1);

		predictor->match_cell[0][i] = (right & ~1023U) | 6;
		predictor->match_cell[1][i] = (right & ~1023U) | 6;
		for (unsigned j = 0; j < 256; j++)
			predictor->lane_cell[i][j] =
				(UINT32_MAX / 64 * 63 & ~1023U) | 20;
	}
	for (unsigned i = 0; i < LANE_CELLS; i++)
		predictor->lane.weight[i] = 32768;
	for (unsigned i = 0; i < LANE_ROWS; i++) {
		for (unsigned j = 0; j < LANE_CELLS - 1; j++)
			predictor->lane_row[j][i] =
				(UINT32_MAX / 16 * 15 & ~1023U) | 2;
	}
	predictor->tally = (struct tally){.mantissa = UINT64_C(1) << 63};
	predictor->lane_tally = predictor->tally;
	predictor->begun = predictor->pending = false;
	predictor->bit = 0;
	predictor->partial = 1;
}

enum status predictor_remember(struct predictor *predictor, size_t bytes)
{
	struct journal *journal;

	if (predictor->bases || predictor->plan.family == FAMILY_FLAT)
		return STATUS_BAD_USAGE;
	journal_free(predictor->journal);
	predictor->journal = NULL;
	TRY(journal_new(predictor, bytes, &journal));
	predictor->journal = journal;
	return STATUS_OK;
}

void predictor_rewind(struct predictor *predictor)
{
	struct journal *journal = predictor->journal;

	journal_rewind(journal, predictor);
	predictor->journal = journal;
}

static void begin_byte(struct predictor *p)
{
	if (p->pending)
		past_push(&p->past);
	p->pending = false;
	past_look(&p->past, &p->view);
	p->in_lane = p->view.lane;
	p->lane_failed = false;
	p->bit = 0;
	p->partial = 1;
	p->begun = true;
}

/* All inputs of the next bit. */
static void gather(struct predictor *p)
{
	const struct predict_tables *tables = &p->mixer.tables;
	int16_t *common = p->inputs + p->mixer.inputs - COMMON;

	for (unsigned i = 0; i < p->contexts; i++) {
		struct place *place = &p->place[i];
		uint32_t trend;

		if (p->bit == 0)
			p->trend[i][0] = TREND_HALF;
		if (p->bit == 0)
			place_begin(place, context_lines(p, i), p->lines_log2,
				    p->view.hash[i]);
		if (p->bit == 0)
			p->view.hits =
				(uint8_t)(p->view.hits + (place->slot[1] != 0));
		if (p->bit == 4)
			place_middle(place, p->partial & 15);
		trend = p->trend[i]
				[place->slot[nibble_node(p->partial, p->bit)]];
		p->inputs[2 * i] = trend_logit(tables, trend);
		p->inputs[2 * i + 1] = trend_share(trend);
	}
	common_inputs(p, &p->view, p->partial, p->bit, p->lane_failed, common);
}

unsigned predictor_probability(struct predictor *p)
{
	struct selection at;

	if (p->plan.family == FAMILY_FLAT)
		return 32768;
	if (p->bases)
		return bases_probability(p->bases);
	if (!p->begun)
		begin_byte(p);
	if (p->in_lane)
		return lane_predict(p, &p->view);
	gather(p);
	at = (struct selection){.partial = p->partial, .bit = p->bit};
	at.view = &p->view;
	at.step = match_holds(&p->view, 0, p->partial, p->bit, p->lane_failed);
	p->mixing.inputs = p->inputs;
	return p->lanes->predict(&p->mixer, &at, &p->mixing);
}

unsigned predictor_decision(const struct predictor *p, uint8_t byte)
{
	if (p->bases)
		return bases_decision(p->bases, byte);
	byte = (uint8_t)(byte - p->view.base);
	if (p->plan.family != FAMILY_FLAT && p->in_lane)
		return byte == p->view.expected[0];
	return byte >> (7 - p->bit) & 1;
}

static bool complete(struct predictor *p, uint8_t value, uint8_t *byte)
{
	value = (uint8_t)(value + p->view.base);
	p->begun = false;
	p->pending = true;
	p->bit = 0;
	p->partial = 1;
	*byte = value;
	return true;
}

static bool update_lane(struct predictor *p, unsigned decision, uint8_t *byte)
{
	lane_update(p, &p->view, decision);
	p->in_lane = false;
	if (decision)
		return complete(p, p->view.expected[0], byte);
	p->lane_failed = true;
	return false;
}

static void learn_history(struct predictor *p, unsigned i, unsigned bit)
{
	uint8_t *history = &p->place[i].slot[nibble_node(p->partial, p->bit)];
	uint32_t *trend = &p->trend[i][*history];

	*trend = trend_moved(*trend, bit);
	*history = p->mixer.tables.next[*history][bit];
}

/* A bit that a failed lane leaves no choice: the byte is not the expected. */
static bool implied(const struct predictor *p)
{
	return p->lane_failed && p->bit == 7 &&
	       p->partial == (p->view.expected[0] | 256U) >> 1;
}

/* All models take the bit in; the mixer, if it was a decision, has done so. */
static void learn(struct predictor *p, unsigned bit)
{
	for (unsigned i = 0; i < p->contexts; i++)
		learn_history(p, i, bit);
	common_update(p, &p->view, p->partial, p->bit, p->lane_failed, bit);
	p->partial = p->partial * 2 + bit;
	p->bit++;
}

bool predictor_update(struct predictor *p, unsigned decision, uint8_t *byte)
{
	if (p->bases)
		return bases_update(p->bases, decision, byte);
	if (p->plan.family == FAMILY_FLAT) {
		p->partial = p->partial * 2 + decision;
		if (++p->bit < 8)
			return false;
		return complete(p, (uint8_t)p->partial, byte);
	}
	if (p->in_lane)
		return update_lane(p, decision, byte);
	p->lanes->update(&p->mixer, &p->mixing, decision);
	learn(p, decision);
	if (implied(p)) {
		gather(p);
		learn(p, ~p->view.expected[0] & 1U);
	}
	if (p->bit < 8)
		return false;
	return complete(p, (uint8_t)p->partial, byte);
}
