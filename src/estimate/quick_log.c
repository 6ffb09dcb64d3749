#include "estimate/quick_log.h"

#include "base/memory.h"

enum status quick_log_new(struct quick_log **log)
{
	struct quick_log *made;

	TRY(memory_new(1, sizeof(*made), &made));
	for (uint64_t i = 0; i < QUICK_LOG_STEPS; i++) {
		wide_uint one = (wide_uint)QUICK_LOG_STEPS << 63;
		uint64_t divisor = QUICK_LOG_STEPS + i;
		uint64_t inverse = (uint64_t)((one + divisor - 1) / divisor);

		made->inverse_q63[i] = inverse;
		/* of the inverse as rounded, so that the two agree */
		made->log_q56[i] = (UINT64_C(63) << 56) - log2_q56(inverse);
	}
	*log = made;
	return STATUS_OK;
}
