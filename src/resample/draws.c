#include "resample/draws.h"

#include <assert.h>

#include "base/memory.h"
#include "base/random.h"

enum status draws_init(struct draws *draws, size_t count, size_t blocks,
		       size_t length, uint64_t seed, const char *corpus)
{
	size_t pieces;
	struct random_stream random;
	uint16_t *starts;

	assert(blocks && blocks <= DRAWS_BLOCKS_MAX && length);
	pieces = (blocks + length - 1) / length;
	TRY(memory_new(count, pieces * sizeof(*starts), &starts));
	random_init(&random, seed,
		    random_name(corpus) + (uint64_t)length * 0x10000 + blocks);
	for (size_t i = 0; i < count * pieces; i++)
		starts[i] = (uint16_t)random_below(&random, (uint32_t)blocks);
	*draws = (struct draws){starts, count, pieces, blocks, length};
	return STATUS_OK;
}

void draws_release(struct draws *draws)
{
	memory_free(draws->starts);
	*draws = (struct draws){0};
}
