/* Context-tree weighting by its definition, in real numbers. */
#ifndef SUPPORT_WEIGHTED_H
#define SUPPORT_WEIGHTED_H

#include <stddef.h>
#include <stdint.h>

/*
 * -log2 P_w at the root after the decisions one[i], i < count, the i-th made
 * after symbols that begin before[i], the nearest first; depth symbols deep.
 * P_w = P_e at the depth, otherwise (P_e + product of the children's P_w) / 2;
 * P_e by lgamma. alphabet is that of the symbols.
 */
double weighted_bits(const uint8_t *one, const uint8_t (*before)[16],
		     size_t count, unsigned alphabet, unsigned depth);

#endif
