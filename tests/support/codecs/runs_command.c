/* A codec as a program: -c packs runs of a byte, -d unpacks them. */
#include <stdio.h>
#include <string.h>

static int pack(void)
{
	int run = getchar(), next, length = 1;

	for (; run != EOF; run = next, length = 1) {
		while ((next = getchar()) == run && length < 255)
			length++;
		(void)putchar(length);
		(void)putchar(run);
	}
	return fflush(stdout) != 0 || ferror(stdin);
}

static int unpack(void)
{
	int length, run;

	while ((length = getchar()) != EOF) {
		run = getchar();
		if (run == EOF) {
			(void)fprintf(stderr, "runs: the stream is cut off\n");
			return 1;
		}
		while (length--)
			(void)putchar(run);
	}
	return fflush(stdout) != 0 || ferror(stdin);
}

int main(int count, char **words)
{
	if (count == 2 && strcmp(words[1], "-c") == 0)
		return pack();
	if (count == 2 && strcmp(words[1], "-d") == 0)
		return unpack();
	(void)fprintf(stderr, "usage: runs_command -c|-d\n");
	return 2;
}
