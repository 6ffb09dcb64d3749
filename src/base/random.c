#include "base/random.h"

#include <Random123/philox.h>

void random_init(struct random_stream *random, uint64_t seed, uint64_t stream)
{
	*random = (struct random_stream){
		.key = {(uint32_t)seed, (uint32_t)(seed >> 32)},
		.stream = stream,
	};
}

void random_block(const uint32_t key[2], const uint32_t counter[4],
		  uint32_t out[4])
{
	philox4x32_key_t k = {{key[0], key[1]}};
	philox4x32_ctr_t c = {{counter[0], counter[1], counter[2], counter[3]}};
	philox4x32_ctr_t r = philox4x32_R(10, c, k);

	for (unsigned i = 0; i < 4; i++)
		out[i] = r.v[i];
}

uint32_t random_u32(struct random_stream *random)
{
	if (!random->left) {
		const uint32_t counter[4] = {(uint32_t)random->block,
					     (uint32_t)(random->block >> 32),
					     (uint32_t)random->stream,
					     (uint32_t)(random->stream >> 32)};

		random_block(random->key, counter, random->ready);
		random->block++;
		random->left = 4;
	}
	return random->ready[4 - random->left--];
}

uint64_t random_u64(struct random_stream *random)
{
	uint64_t low = random_u32(random);

	return low | (uint64_t)random_u32(random) << 32;
}

uint32_t random_below(struct random_stream *random, uint32_t limit)
{
	uint64_t product = (uint64_t)random_u32(random) * limit;
	uint32_t low = (uint32_t)product;

	if (low < limit) {
		uint32_t uneven = (uint32_t)-limit % limit;

		while (low < uneven) {
			product = (uint64_t)random_u32(random) * limit;
			low = (uint32_t)product;
		}
	}
	return (uint32_t)(product >> 32);
}

double random_unit(struct random_stream *random)
{
	return (double)(random_u64(random) >> 11) * 0x1p-53;
}

uint64_t random_name(const char *name)
{
	uint64_t hash = UINT64_C(14695981039346656037);

	for (; *name; name++)
		hash = (hash ^ (uint8_t)*name) * UINT64_C(1099511628211);
	return hash;
}
