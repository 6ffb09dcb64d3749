#include "estimate/quick_log2.h"

#include "base/memory.h"

enum status quick_log2_new(struct quick_log2 **table)
{
	TRY(memory_new(1, sizeof(**table), table));
	for (uint64_t i = 0; i < QUICK_LOG2_STEPS; i++) {
		uint64_t x = QUICK_LOG2_STEPS + i; /* 2^11 (1 + i / 2048) */
		uint64_t log_q56 = log2_q56(x) - (UINT64_C(11) << 56);

		(*table)->log_q48[i] = (log_q56 + (1 << 7)) >> 8;
		(*table)->inverse_q63[i] = (uint64_t)(((wide_uint)1 << 74) / x);
	}
	return STATUS_OK;
}
