#include "estimate/ngram_blocks.h"

#include <assert.h>
#include <string.h>

#define BUCKETS_MAX 16384
#define FOLLOW_MAX 15
#define SIZE_BYTE_MAX 255

static MUST_USE enum status make_guesses(struct block_losses *losses)
{
	const struct cuts *cuts = losses->cuts;
	size_t n = losses->suffix->n, buckets, block = 0;

	while (n >> losses->bucket_shift >= BUCKETS_MAX)
		losses->bucket_shift++;
	buckets = (n >> losses->bucket_shift) + 1;
	TRY(memory_new(buckets, sizeof(*losses->guess), &losses->guess));
	for (size_t i = 0; i < buckets; i++) {
		size_t symbol = i << losses->bucket_shift;

		while (block + 1 < cuts->blocks &&
		       cuts->symbol[block + 1] <= symbol)
			block++;
		losses->guess[i] = (uint16_t)block;
	}
	return STATUS_OK;
}

/* symbol < n */
static size_t block_of(const struct block_losses *losses, size_t symbol)
{
	size_t block = losses->guess[symbol >> losses->bucket_shift];

	while (losses->cuts->symbol[block + 1] <= symbol)
		block++;
	return block;
}

static void make_places(struct block_losses *losses)
{
	const struct suffix *suffix = losses->suffix;

	for (size_t r = 0; r < suffix->n; r++) {
		size_t symbol = (size_t)suffix->start[r];
		size_t block = block_of(losses, symbol);
		size_t follow = losses->cuts->symbol[block + 1] - symbol - 1;

		if (follow > FOLLOW_MAX)
			follow = FOLLOW_MAX;
		losses->place[r] = (uint16_t)(block << 4 | follow);
	}
}

static MUST_USE enum status build(struct block_losses *losses)
{
	size_t n = losses->suffix->n;

	TRY(memory_new_zeroed(losses->orders * losses->cuts->blocks,
			      sizeof(*losses->sum_q32), &losses->sum_q32));
	TRY(memory_new(n, sizeof(*losses->place), &losses->place));
	TRY(memory_new(n, 1, &losses->size));
	memset(losses->size, 1, n);
	TRY(make_guesses(losses));
	make_places(losses);
	return STATUS_OK;
}

enum status block_losses_init(struct block_losses *losses,
			      const struct suffix *suffix,
			      const struct cuts *cuts,
			      const struct count_logs *logs, unsigned orders)
{
	struct block_losses made = {
		.suffix = suffix, .cuts = cuts, .logs = logs, .orders = orders};

	assert(cuts->blocks >= 1 && cuts->blocks <= UINT16_MAX >> 4);
	if (build(&made) != STATUS_OK) {
		block_losses_release(&made);
		return STATUS_NO_MEMORY;
	}
	*losses = made;
	return STATUS_OK;
}

void block_losses_release(struct block_losses *losses)
{
	memory_free(losses->sum_q32);
	memory_free(losses->place);
	memory_free(losses->size);
	memory_free(losses->guess);
	*losses = (struct block_losses){0};
}

static size_t size_at(const struct block_losses *losses, size_t r)
{
	uint32_t size = losses->size[r];

	if (size == 0)
		memcpy(&size, losses->size + r + 1, sizeof(size));
	return size;
}

static void set_size(struct block_losses *losses, size_t r, size_t count)
{
	uint32_t size = (uint32_t)count;

	losses->size[r] = size <= SIZE_BYTE_MAX ? (uint8_t)size : 0;
	if (size > SIZE_BYTE_MAX)
		memcpy(losses->size + r + 1, &size, sizeof(size));
}

static int64_t plain_log(const struct block_losses *losses, size_t count)
{
	if (count < COUNT_LOGS_TABLED)
		return losses->logs[count].plain_q32;
	return (int64_t)log2_q32(count);
}

/* The block of the symbol offset after suffix r, round the end if need be. */
static size_t block_far(const struct block_losses *losses, size_t r,
			unsigned offset)
{
	size_t symbol = (size_t)losses->suffix->start[r] + offset;

	return block_of(losses, symbol % losses->suffix->n);
}

static void spread(const struct block_losses *losses, size_t begin, size_t end,
		   unsigned offset, int64_t loss_q32)
{
	int64_t *sum = losses->sum_q32 + offset * losses->cuts->blocks;

	for (size_t r = begin; r < end; r++) {
		unsigned place = losses->place[r];

		if (offset <= (place & FOLLOW_MAX))
			sum[place >> 4] += loss_q32;
		else
			sum[block_far(losses, r, offset)] += loss_q32;
	}
}

void block_losses_add(struct block_losses *losses, size_t begin, size_t end,
		      unsigned depth)
{
	int64_t whole_q32 = plain_log(losses, end - begin);
	size_t r = begin;

	while (depth < losses->orders && r < end) {
		size_t size = size_at(losses, r);
		int64_t loss_q32 = whole_q32 - plain_log(losses, size);

		spread(losses, r, r + size, depth, loss_q32);
		r += size;
	}
	set_size(losses, begin, end - begin);
}
