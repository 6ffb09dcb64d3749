/* A shared object that copies, broken in the way that its level names. */
#include "house_codec.h"

#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <time.h>
#include <unistd.h>

static int copy(const uint8_t *in, size_t in_bytes, uint8_t *out,
		size_t *out_bytes)
{
	if (*out_bytes < in_bytes)
		return RATEFLOOR_FULL;
	memcpy(out, in, in_bytes);
	*out_bytes = in_bytes;
	return RATEFLOOR_DONE;
}

static int hog(void)
{
	for (;;) {
		char *block = malloc(1 << 20);

		if (!block)
			abort();
		memset(block, 1, 1 << 20);
	}
}

static int leave(void)
{
	if (fork() == 0) {
		(void)setsid();
		for (;;)
			(void)pause();
	}
	return RATEFLOOR_DONE;
}

static void spoil(uint8_t *out)
{
	struct timespec now;

	(void)clock_gettime(CLOCK_MONOTONIC, &now);
	memcpy(out, &now.tv_nsec, 4);
}

static int pack(const char *level, const uint8_t *in, size_t in_bytes,
		uint8_t *out, size_t *out_bytes)
{
	size_t room = *out_bytes;

	if (strcmp(level, "crash") == 0)
		(void)raise(SIGSEGV);
	while (strcmp(level, "hang") == 0)
		(void)pause();
	if (strcmp(level, "flood") == 0)
		memset(out, 'x', room + 4096);
	if (strcmp(level, "more") == 0) {
		*out_bytes = room + 1;
		return RATEFLOOR_DONE;
	}
	if (strcmp(level, "hog") == 0)
		return hog();
	if (strcmp(level, "error") == 0)
		return 42;
	if (strcmp(level, "exit") == 0)
		exit(5);
	if (strcmp(level, "print") == 0)
		(void)printf("this must not be in the stream\n");
	if (strcmp(level, "leave") == 0)
		(void)leave();
	if (copy(in, in_bytes, out, out_bytes) != RATEFLOOR_DONE)
		return RATEFLOOR_FULL;
	if (strcmp(level, "lose") == 0 && *out_bytes)
		(*out_bytes)--;
	if (strcmp(level, "unstable") == 0 && *out_bytes > 4)
		spoil(out);
	return RATEFLOOR_DONE;
}

static const struct ratefloor_codec broken = {
	.abi = RATEFLOOR_CODEC_ABI,
	.compress = pack,
	.decompress = copy,
};

const struct ratefloor_codec *ratefloor_codec(void)
{
	return &broken;
}
