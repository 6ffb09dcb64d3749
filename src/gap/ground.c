#include "gap/ground.h"

#include <stdarg.h>
#include <stdio.h>
#include <string.h>

#include "base/memory.h"

/* Beyond this the flushed run is another stream than the headline's. */
#define FLUSH_COST_MOST 0.10

enum status ground_init(struct ground *ground, const struct survey *survey,
			const struct corpus_fact *fact,
			const struct analysis_rules *rules)
{
	const struct bootstrap_rules asked = {
		.draws = rules->draws,
		.confidence = rules->confidence,
		.seed = survey->seed,
		.corpus = fact->name,
	};
	struct ground made = {.fact = fact};
	enum status status;

	status = memory_new(2 * fact->blocks, sizeof(*made.symbols),
			    &made.symbols);
	if (status == STATUS_OK)
		status = bootstrap_new(&asked, &made.bootstrap);
	if (status != STATUS_OK) {
		ground_release(&made);
		return status;
	}
	made.scratch = made.symbols + fact->blocks;
	for (size_t i = 0; i < fact->blocks; i++)
		made.symbols[i] = (double)fact->block_symbols[i];
	*ground = made;
	return STATUS_OK;
}

void ground_release(struct ground *ground)
{
	memory_free(ground->symbols);
	bootstrap_free(ground->bootstrap);
	*ground = (struct ground){0};
}

struct contribution contribution_of_series(const struct series *series,
					   double total_bits)
{
	return (struct contribution){
		.costs = &series->costs,
		.total_bits = total_bits,
	};
}

double cell_flush_cost(const struct cell_facts *facts)
{
	if (!facts->flushed.blocks || !facts->bytes)
		return 0;
	return (double)facts->flushed_bytes / (double)facts->bytes - 1;
}

struct contribution contribution_of_cell(const struct cell_fact *cell,
					 double total_bits)
{
	double cost = cell_flush_cost(&cell->facts);
	struct contribution made = {
		.costs = &cell->facts.flushed,
		.total_bits = total_bits,
		.learns = true,
	};

	if (!cell->facts.flushed.blocks)
		(void)snprintf(
			made.reason, sizeof(made.reason),
			"%s%s%s cannot be flushed at block cuts, so its bits "
			"cannot be told apart by block; compare it on "
			"several files of this kind instead",
			cell->key.codec, cell->key.level[0] ? " " : "",
			cell->key.level);
	else if (cost > FLUSH_COST_MOST)
		(void)snprintf(made.reason, sizeof(made.reason),
			       "flushing at block cuts costs %.1f%%, over the "
			       "%.0f%% allowed: a longer corpus has longer "
			       "blocks and pays less",
			       100 * cost, 100 * FLUSH_COST_MOST);
	return made;
}

struct interval interval_exact(const struct ground *ground, double value)
{
	return (struct interval){
		.known = true,
		.low = value,
		.high = value,
		.effective_blocks = (double)ground->fact->blocks,
		.block_length = 1,
	};
}

struct interval interval_none(const char *format, ...)
{
	struct interval interval = {0};
	va_list arguments;

	va_start(arguments, format);
	(void)vsnprintf(interval.reason, sizeof(interval.reason), format,
			arguments);
	va_end(arguments);
	return interval;
}

double interval_half_width(const struct interval *interval)
{
	return interval->known ? (interval->high - interval->low) / 2 : 0;
}

/* Adds sign x the contribution to each block's bits. */
static void add(const struct ground *ground, const struct contribution *part,
		double sign)
{
	double total = bits_from_q16(costs_block_total(part->costs));
	double shift = (part->total_bits - total) / (double)ground->fact->n;

	for (size_t i = 0; i < ground->fact->blocks; i++)
		ground->scratch[i] +=
			sign * (bits_from_q16(part->costs->block_q16[i]) +
				shift * ground->symbols[i]);
}

/* "" where the blocks of the part can be used. */
static struct interval usable(const struct ground *ground,
			      const struct contribution *part)
{
	if (!ground->fact->blocks)
		return interval_none("%llu symbols; intervals need %d",
				     (unsigned long long)ground->fact->n,
				     CUTS_SYMBOLS_MIN);
	if (part->reason[0])
		return interval_none("%s", part->reason);
	if (part->costs->blocks != ground->fact->blocks)
		return interval_none("no bits by block were recorded; survey "
				     "it again");
	return interval_none("%s", "");
}

static struct interval shown(const struct bootstrap_result *result,
			     double point)
{
	struct interval interval = {
		.known = result->known,
		.standard_error = result->known ? result->standard_error : 0,
		.effective_blocks = result->effective_blocks,
		.block_length = (unsigned)result->block_length,
	};

	(void)snprintf(interval.reason, sizeof(interval.reason), "%s",
		       result->reason);
	/* The point is exact; block sums carry the rounding of their sum. */
	interval.low = result->low < point ? result->low : point;
	interval.high = result->high > point ? result->high : point;
	return interval;
}

enum status ground_interval(const struct ground *ground,
			    const struct contribution *a,
			    const struct contribution *b,
			    struct interval *interval, bool *drifts)
{
	const struct block_series series = {
		.bits = ground->scratch,
		.symbols = ground->symbols,
		.blocks = ground->fact->blocks,
		.learns = a->learns || (b && b->learns),
		.excess = a->excess + (b ? b->excess : 0),
	};
	struct interval refused = usable(ground, a);
	double bits = a->total_bits - (b ? b->total_bits : 0);
	struct bootstrap_result result;

	if (!refused.reason[0] && b)
		refused = usable(ground, b);
	if (refused.reason[0]) {
		*interval = refused;
		return STATUS_OK;
	}
	memset(ground->scratch, 0,
	       ground->fact->blocks * sizeof(*ground->scratch));
	add(ground, a, 1);
	if (b)
		add(ground, b, -1);
	TRY(bootstrap_interval(ground->bootstrap, &series, &result));
	*interval = shown(&result, bits / (double)ground->fact->n);
	if (drifts)
		*drifts = result.drifts;
	return STATUS_OK;
}
