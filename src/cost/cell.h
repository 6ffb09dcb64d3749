/* The facts of one cell: a codec at a level and a layout on a corpus. */
#ifndef COST_CELL_H
#define COST_CELL_H

#include "base/status.h"
#include "cost/costs.h"

#define CELL_NAME_BYTES 32

/* What stands in a level's text before the size of a trained dictionary. */
#define CELL_DICTIONARY " dict:"

/* What to run. level and layout are text: "9", "9e"; "whole" or page bytes. */
struct cell_key {
	char codec[CELL_NAME_BYTES];
	char level[CELL_NAME_BYTES];
	char layout[CELL_NAME_BYTES];
};

struct cell_facts {
	uint64_t bytes; /* compressed, container included: the headline */
	uint64_t framing_bytes;    /* of these: header, trailer, check, index,
				      padding */
	uint64_t dictionary_bytes; /* of these: both dictionaries; payload */
	uint64_t storage_unit;     /* bytes; 0: stored_bytes is not known */
	uint64_t stored_bytes;     /* each stream, and each dictionary, in whole
				      units; not part of bytes */
	int framing_known; /* 0 where nobody counts it (framing_bytes 0) */
	int lossless;      /* decoded and equal, byte for byte */
	uint64_t pages;    /* 1 for layout "whole" */
	/*
	 * Bits by resampling block, from a run flushed at the cuts (whole), or
	 * page bits spread by overlap; block_q16 sums to flushed bytes x 8, not
	 * to the headline. blocks is 0 where the codec cannot flush.
	 */
	struct costs flushed;
	uint64_t flushed_bytes;
	/* Peak of the allocator, or CELL_MEMORY_UNKNOWN. */
	uint64_t encode_memory_bytes, decode_memory_bytes;
};

/* Not the same twice: threads, and other people's processes. */
#define CELL_MEMORY_UNKNOWN UINT64_MAX

void cell_facts_release(struct cell_facts *facts);

/* Times of one cell: medians over rounds, and the spread; not facts. */
struct cell_timing {
	unsigned rounds;
	double encode_cpu_seconds, decode_cpu_seconds;
	double encode_wall_seconds, decode_wall_seconds;
	/* (largest - smallest) / median over the rounds, CPU time. */
	double encode_spread, decode_spread;
	/*
	 * Resident bytes of a user's own codec at their most; 0: not known.
	 * They are not the same twice, so they are no facts.
	 */
	uint64_t encode_peak_bytes, decode_peak_bytes;
};

#endif
