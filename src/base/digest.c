#include "base/digest.h"

#include <sha2.h>
#include <stdint.h>

void digest_sha256(const void *bytes, size_t length,
		   char text[DIGEST_TEXT_BYTES])
{
	(void)SHA256Data(bytes, length, text);
}
