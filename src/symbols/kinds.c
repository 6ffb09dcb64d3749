#include "symbols/mapping.h"

#include <stdio.h>
#include <string.h>

/* Code points 0 to 10FFFF without the 2048 surrogates (RFC 3629). */
#define SCALAR_VALUES (0x110000 - 0x800)

const struct mapping mappings[SYMBOL_KIND_COUNT] = {
	[SYMBOL_BYTE] = {.name = "byte",
			 .symbol_bytes = 1,
			 .alphabet = 256,
			 .map = map_byte},
	[SYMBOL_BIT] = {.name = "bit",
			.symbol_bytes = 1,
			.alphabet = 2,
			.map = map_bit},
	[SYMBOL_U16LE] = {.name = "u16le",
			  .symbol_bytes = 2,
			  .alphabet = 65536,
			  .map = map_u16le},
	[SYMBOL_U16BE] = {.name = "u16be",
			  .symbol_bytes = 2,
			  .alphabet = 65536,
			  .map = map_u16be},
	[SYMBOL_U32LE] = {.name = "u32le",
			  .symbol_bytes = 4,
			  .alphabet = UINT64_C(1) << 32,
			  .map = map_u32le},
	[SYMBOL_NUCLEOTIDE] = {.name = "nucleotide",
			       .symbol_bytes = 1,
			       .alphabet = 4,
			       .map = map_nucleotide},
	[SYMBOL_LETTERS27] = {.name = "letters27",
			      .alphabet = 27,
			      .map = map_letters27},
	[SYMBOL_CODEPOINT] = {.name = "codepoint",
			      .alphabet = SCALAR_VALUES,
			      .map = map_codepoint},
	[SYMBOL_WORD] = {.name = "word", .map = map_word},
};

const char *symbol_kind_name(enum symbol_kind kind)
{
	if ((unsigned)kind >= SYMBOL_KIND_COUNT)
		return "unknown";
	return mappings[kind].name;
}

enum status symbol_kind_parse(const char *name, enum symbol_kind *kind,
			      struct reason *why)
{
	char list[128] = "";

	for (unsigned i = 0; i < SYMBOL_KIND_COUNT; i++) {
		if (strcmp(mappings[i].name, name) == 0) {
			*kind = (enum symbol_kind)i;
			return STATUS_OK;
		}
		if (i)
			strcat(list, " ");
		strcat(list, mappings[i].name);
	}
	return reason_give(why, STATUS_BAD_USAGE,
			   "unknown kind of symbol \"%s\"; there are: %s", name,
			   list);
}
