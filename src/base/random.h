/* Counter-based random numbers: the same for a key, whatever the threads do. */
#ifndef BASE_RANDOM_H
#define BASE_RANDOM_H

#include <stdint.h>

/*
 * A stream of Philox4x32-10 (Salmon, Moraes, Dror, Shaw 2011), named by a seed
 * and two stream numbers. Equal names give equal numbers; different names give
 * independent ones. No ownership: copy it freely.
 */
struct random_stream {
	uint32_t key[2];
	uint64_t block;  /* next counter */
	uint64_t stream; /* upper half of the counter */
	uint32_t ready[4];
	unsigned left; /* words of ready not yet handed out */
};

void random_init(struct random_stream *random, uint64_t seed, uint64_t stream);
/* One Philox4x32-10 block, as the reference vectors give it. */
void random_block(const uint32_t key[2], const uint32_t counter[4],
		  uint32_t out[4]);
uint32_t random_u32(struct random_stream *random);
uint64_t random_u64(struct random_stream *random);
/* Uniform on 0 .. limit - 1 without bias (Lemire 2019); limit >= 1. */
uint32_t random_below(struct random_stream *random, uint32_t limit);
/* Uniform on [0, 1) in steps of 2^-53. */
double random_unit(struct random_stream *random);
/* A 64-bit stream number made of a name, for random_init (FNV-1a). */
uint64_t random_name(const char *name);

#endif
