#include "cli/made.h"

#include "base/memory.h"
#include "cli/output.h"
#include "source/source.h"

#include <inttypes.h>
#include <string.h>

static MUST_USE enum status no_such_source(const char *name, struct reason *why)
{
	char all[512] = "";
	size_t used = 0;

	for (size_t i = 0; sources[i] && used < sizeof(all); i++)
		used += (size_t)snprintf(all + used, sizeof(all) - used, " %s",
					 sources[i]->name);
	return reason_give(why, STATUS_NOT_FOUND,
			   "there is no source '%s'; there are:%s", name, all);
}

static MUST_USE enum status write_all(const struct buffer *bytes,
				      const char *path, struct reason *why)
{
	struct output output;

	TRY(output_open(&output, path, why));
	(void)fwrite(bytes->bytes, 1, bytes->length, output.file);
	return output_keep(&output, why);
}

enum status made_write(const char *name, uint64_t symbols, uint64_t seed,
		       const char *path, double *rate, struct reason *why)
{
	const struct source *source = source_find(name);
	struct buffer bytes;
	enum status status;

	if (!source)
		return no_such_source(name, why);
	if (!symbols)
		symbols = source->symbols;
	TRY(source->rate(rate));
	buffer_init(&bytes, SIZE_MAX / 2);
	status = source->make(symbols, seed, &bytes, why);
	if (status == STATUS_NO_MEMORY)
		(void)reason_give(why, status,
				  "out of memory: %" PRIu64 " symbols of %s",
				  symbols, name);
	if (status == STATUS_OK)
		status = write_all(&bytes, path, why);
	buffer_release(&bytes);
	return status;
}

enum status made_origin(const char *origin, char name[64], uint64_t *symbols,
			uint64_t *seed)
{
	char found[64], rest;

	if (sscanf(origin,
		   "ratefloor synth %63s --symbols %" SCNu64 " --seed %" SCNu64
		   " %c",
		   found, symbols, seed, &rest) != 3)
		return STATUS_NOT_FOUND;
	memcpy(name, found, sizeof(found));
	return STATUS_OK;
}
