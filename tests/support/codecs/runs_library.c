/* A codec as a shared object: runs of a byte, as long as the level says. */
#include "house_codec.h"

#include <stdlib.h>

static int put(uint8_t *out, size_t *used, size_t room, size_t length,
	       uint8_t run)
{
	if (room - *used < 2)
		return RATEFLOOR_FULL;
	out[(*used)++] = (uint8_t)length;
	out[(*used)++] = run;
	return RATEFLOOR_DONE;
}

static int pack(const char *level, const uint8_t *in, size_t in_bytes,
		uint8_t *out, size_t *out_bytes)
{
	size_t most = *level ? (size_t)strtoul(level, NULL, 10) : 255;
	size_t used = 0;

	if (most < 1 || most > 255)
		return 7;
	for (size_t i = 0, length; i < in_bytes; i += length) {
		length = 1;
		while (length < most && i + length < in_bytes &&
		       in[i + length] == in[i])
			length++;
		if (put(out, &used, *out_bytes, length, in[i]) !=
		    RATEFLOOR_DONE)
			return RATEFLOOR_FULL;
	}
	*out_bytes = used;
	return RATEFLOOR_DONE;
}

static int unpack(const uint8_t *in, size_t in_bytes, uint8_t *out,
		  size_t *out_bytes)
{
	size_t used = 0;

	for (size_t i = 0; i + 1 < in_bytes; i += 2) {
		if (*out_bytes - used < in[i])
			return RATEFLOOR_FULL;
		for (size_t j = 0; j < in[i]; j++)
			out[used++] = in[i + 1];
	}
	*out_bytes = used;
	return RATEFLOOR_DONE;
}

static const char *words(int result)
{
	return result == 7 ? "a level is a run's length, 1 to 255" : "unknown";
}

static const struct ratefloor_codec runs = {
	.abi = RATEFLOOR_CODEC_ABI,
	.version = "runs 1.0",
	.compress = pack,
	.decompress = unpack,
	.words = words,
};

const struct ratefloor_codec *ratefloor_codec(void)
{
	return &runs;
}
