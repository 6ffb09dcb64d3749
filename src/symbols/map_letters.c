/* English text folded to the 26 letters and the space (Shannon 1951). */
#include "symbols/mapping.h"

/* ASCII only, whatever the locale; 0 for what is no letter. */
static uint8_t letter(uint8_t byte)
{
	if (byte >= 'A' && byte <= 'Z')
		return (uint8_t)(byte - 'A' + 'a');
	return byte >= 'a' && byte <= 'z' ? byte : 0;
}

enum status map_letters27(struct sequence *sequence, struct slice bytes,
			  struct reason *why)
{
	size_t n = 0, letters = 0;
	uint8_t *folded;

	TRY(memory_new(bytes.length, 1, &folded));
	sequence->owned[0] = folded;
	for (size_t i = 0; i < bytes.length; i++) {
		uint8_t found = letter(bytes.bytes[i]);

		if (found)
			letters++;
		if (found || !n || folded[n - 1] != ' ')
			folded[n++] = found ? found : ' ';
	}
	if (!letters)
		return reason_give(why, STATUS_BAD_INPUT,
				   "no letter a to z in %zu bytes: letters27 "
				   "is for English text",
				   bytes.length);
	map_as_bytes(sequence, folded, n);
	return STATUS_OK;
}
