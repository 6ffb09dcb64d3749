/* The frozen list of sources that estimators are calibrated on. */
#ifndef SOURCE_FROZEN_H
#define SOURCE_FROZEN_H

#include "source/model.h"

enum frozen_family {
	FROZEN_FINITE,    /* Markov of a finite order */
	FROZEN_HIDDEN,    /* hidden Markov: infinite order */
	FROZEN_SWITCHING, /* slow regimes: what a drift flag must find */
};

/*
 * A source with all its parameters. Frozen: entries are added, never changed,
 * since coverage figures are stated over the list.
 */
struct frozen_source {
	const char *name;
	const char *summary;
	enum frozen_family family;
	unsigned order;    /* finite: rate = h_(order + 1); else 0 */
	unsigned alphabet; /* symbols are bytes below this; 256: any */
	/* As the inits of source/model.h. */
	enum status (*init)(struct source_model *model, struct reason *why);
};

/* Entry i, from 0 in the order they are shown; NULL past the last. */
const struct frozen_source *frozen_at(size_t i);

/* NULL where there is none. */
const struct frozen_source *frozen_find(const char *name);

#endif
