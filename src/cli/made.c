#include "cli/made.h"

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

/* A sink that writes to a file; what goes wrong is seen on closing. */
static enum status take(void *state, const uint8_t *bytes, size_t length)
{
	struct output *output = state;

	if (fwrite(bytes, 1, length, output->file) != length)
		return STATUS_IO;
	return STATUS_OK;
}

enum status made_write(const char *name, uint64_t symbols, uint64_t seed,
		       const char *path, double *rate, struct reason *why)
{
	const struct source *source = source_find(name);
	struct output output;
	struct source_sink sink = {take, &output};
	enum status status, kept;

	if (!source)
		return no_such_source(name, why);
	TRY(output_open(&output, path, why));
	status = source_write(source,
			      symbols ? symbols : source->default_symbols, seed,
			      &sink);
	/* Closing says why a write failed, and leaves no part behind. */
	kept = output_keep(&output, why);
	if (status != STATUS_OK || kept != STATUS_OK)
		return STATUS_IO;
	*rate = source->bits_per_symbol();
	return STATUS_OK;
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
