#include "support/fetched.h"

#include "support/near.h"

#include <stdio.h>
#include <stdlib.h>

struct fetched fetched_read(const char *name, size_t most)
{
	const char *folder = getenv("RATEFLOOR_CORPORA");
	struct fetched fetched = {NULL, 0};
	char path[4096];
	FILE *file;

	(void)snprintf(path, sizeof(path), "%s/%s",
		       folder ? folder : "corpora/fetched", name);
	file = fopen(path, "rb");
	if (!file) {
		printf("%s is not fetched\n", name);
		return fetched;
	}
	fetched.bytes = malloc(most);
	assert_non_null(fetched.bytes);
	fetched.length = fread(fetched.bytes, 1, most, file);
	(void)fclose(file);
	return fetched;
}
