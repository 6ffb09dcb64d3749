/* Runs a fuzz target on the files named, for compilers without a fuzzer. */
#include <stdint.h>
#include <stdio.h>
#include <stdlib.h>

#define INPUT_BYTES_MAX (1u << 20)

int LLVMFuzzerTestOneInput(const uint8_t *bytes, size_t length);

/* On a copy of just its length, so that sanitizers see every overrun. */
static int replay(const char *path)
{
	uint8_t *bytes = malloc(INPUT_BYTES_MAX), *exact;
	FILE *file = fopen(path, "rb");
	size_t length = 0;

	if (!bytes || !file)
		return 1;
	length = fread(bytes, 1, INPUT_BYTES_MAX, file);
	(void)fclose(file);
	exact = realloc(bytes, length ? length : 1);
	if (!exact)
		return 1;
	(void)LLVMFuzzerTestOneInput(exact, length);
	free(exact);
	return 0;
}

int main(int argc, char **argv)
{
	int failed = argc < 2;

	for (int i = 1; i < argc; i++) {
		if (replay(argv[i]) != 0) {
			(void)fprintf(stderr, "%s: cannot be read\n", argv[i]);
			failed = 1;
		}
	}
	(void)printf("%d inputs replayed\n", argc - 1);
	return failed;
}
