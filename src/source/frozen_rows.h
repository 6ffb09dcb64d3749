/* The entries of the frozen list, by file. */
#ifndef SOURCE_FROZEN_ROWS_H
#define SOURCE_FROZEN_ROWS_H

#include "source/frozen.h"

/* Each of these is an array ended by an entry without a name. */
extern const struct frozen_source frozen_finite[];
extern const struct frozen_source frozen_hidden[];

#endif
