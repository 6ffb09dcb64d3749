/* Entropies counted from codes, for checks against exact rates. */
#ifndef SUPPORT_PLUGIN_H
#define SUPPORT_PLUGIN_H

#include <stddef.h>
#include <stdint.h>

/* A growing list of codes; start from {0}, give back with codes_release. */
struct codes {
	uint64_t *values;
	size_t count, room;
};

void codes_add(struct codes *codes, uint64_t value);
void codes_release(struct codes *codes);
/*
 * Entropy in bits of the codes' frequencies with the Miller-Madow correction
 * (distinct - 1) / (2 n ln 2); sorts the codes.
 */
double codes_entropy(struct codes *codes);
/* FNV-1a of a text, for use as a code. */
uint64_t codes_text(const char *text);

#endif
