#include "source/frozen.h"

#include "source/frozen_rows.h"

#include <string.h>

const struct frozen_source *frozen_at(size_t i)
{
	const struct frozen_source *const parts[] = {frozen_finite,
						     frozen_hidden};

	for (size_t part = 0; part < 2; part++) {
		for (const struct frozen_source *s = parts[part]; s->name;
		     s++) {
			if (i-- == 0)
				return s;
		}
	}
	return NULL;
}

const struct frozen_source *frozen_find(const char *name)
{
	const struct frozen_source *entry;

	for (size_t i = 0; (entry = frozen_at(i)); i++) {
		if (strcmp(entry->name, name) == 0)
			return entry;
	}
	return NULL;
}
