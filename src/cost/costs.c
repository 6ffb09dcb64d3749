#include "cost/costs.h"

#include "base/memory.h"

enum status costs_init(struct costs *costs, size_t blocks)
{
	int64_t *block_q16 = NULL;

	if (blocks)
		TRY(memory_new_zeroed(blocks, sizeof(*block_q16), &block_q16));
	*costs = (struct costs){.block_q16 = block_q16, .blocks = blocks};
	return STATUS_OK;
}

void costs_release(struct costs *costs)
{
	memory_free(costs->block_q16);
	*costs = (struct costs){0};
}

void costs_set_q32(struct costs *costs, const int64_t *block_q32)
{
	wide_int running = 0;
	int64_t before = 0;

	for (size_t i = 0; i < costs->blocks; i++) {
		int64_t now;

		running += block_q32[i];
		now = q16_from_q32(running);
		costs->block_q16[i] = now - before;
		before = now;
	}
	costs->headline_q16 = before;
}

int64_t costs_block_total(const struct costs *costs)
{
	int64_t total = 0;

	for (size_t i = 0; i < costs->blocks; i++)
		total += costs->block_q16[i];
	return total;
}
