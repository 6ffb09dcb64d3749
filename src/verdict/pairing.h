/* Differences of a codec and its yardstick, paired by block. */
#ifndef VERDICT_PAIRING_H
#define VERDICT_PAIRING_H

#include "gap/lengths.h"
#include "verdict/baseline.h"

/* What the cells of one corpus are paired with. All borrowed. */
struct pairing {
	const struct ground *ground;
	const struct lengths *lengths;
	const struct cell_fact *yardstick; /* NULL: the reference */
};

/* STATUS_NO_MEMORY; where there is no difference, pair->reason says why. */
MUST_USE enum status pairing_find(const struct pairing *pairing,
				  const struct cell_fact *cell,
				  struct baseline_pair *pair);

#endif
