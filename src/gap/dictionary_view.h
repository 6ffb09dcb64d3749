/* What a trained dictionary won, and what it could have. */
#ifndef GAP_DICTIONARY_VIEW_H
#define GAP_DICTIONARY_VIEW_H

#include "gap/lengths.h"

/* The row of the reference that starts every page warm, and the cold one. */
#define REFERENCE_WARM "mix-warm"
#define REFERENCE_COLD "mix"

/* Of one sound cell; zero where it has no dictionary. STATUS_NO_MEMORY. */
MUST_USE enum status dictionary_find(const struct ground *ground,
				     const struct cell_fact *cell,
				     struct dictionary_row *row);

#endif
