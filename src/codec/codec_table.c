#include "codec/codec.h"

#include "codec/codec_rows.h"

#include <string.h>

const struct codec *const codecs[] = {
	&codec_store, &codec_zlib, &codec_xz, &codec_zstd, NULL,
};

const struct codec *codec_find(const char *name)
{
	for (size_t i = 0; codecs[i]; i++) {
		if (strcmp(codecs[i]->name, name) == 0)
			return codecs[i];
	}
	return NULL;
}
