/* A program that copies, and is broken in the one way that its word names. */
#include <fcntl.h>
#include <signal.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/stat.h>
#include <time.h>
#include <unistd.h>

static void copy(size_t skipped)
{
	int byte;

	for (size_t i = 0; (byte = getchar()) != EOF; i++) {
		if (i != skipped)
			(void)putchar(byte);
	}
	(void)fflush(stdout);
}

static void crash(void)
{
	(void)raise(SIGSEGV);
}

static void hang(void)
{
	for (;;)
		(void)pause();
}

static void spin(void)
{
	for (volatile unsigned i = 0;; i++)
		;
}

static void flood(void)
{
	for (;;)
		(void)putchar('x');
}

static void lose(void)
{
	copy(1000);
}

/* What the clock says goes before the bytes, where -d skips it. */
static void unstable(void)
{
	struct timespec now;

	(void)clock_gettime(CLOCK_MONOTONIC, &now);
	(void)fwrite(&now, sizeof(now), 1, stdout);
	copy((size_t)-1);
}

static void skip(void)
{
	struct timespec then;

	(void)!fread(&then, sizeof(then), 1, stdin);
	copy((size_t)-1);
}

static void hog(void)
{
	for (;;) {
		char *block = malloc(1 << 20);

		if (!block)
			exit(1);
		memset(block, 1, 1 << 20);
	}
}

/* Out of the process group and of the session, with the pipe in its hand. */
static void leave(void)
{
	copy((size_t)-1);
	if (fork() == 0) {
		(void)setsid();
		if (fork() == 0)
			hang();
		_exit(0);
	}
	(void)nanosleep(&(struct timespec){.tv_nsec = 20000000}, NULL);
}

static void talk(void)
{
	(void)fprintf(stderr, "\033[31mno such\ttable\n\007bye\n");
	exit(3);
}

/* Files and a folder that nobody may enter, then where they were. */
static void litter(void)
{
	char here[4096];
	int file = open("litter", O_WRONLY | O_CREAT, 0600);

	(void)close(file);
	(void)mkdir("folder", 0700);
	file = open("folder/deep", O_WRONLY | O_CREAT, 0600);
	(void)close(file);
	(void)chmod("folder", 0);
	if (getcwd(here, sizeof(here)))
		(void)fputs(here, stdout);
}

/* Descriptors from 3 on that are open. */
static void count_open(void)
{
	int open_now = 0;

	for (int fd = 3; fd < 256; fd++)
		open_now += fcntl(fd, F_GETFD) >= 0;
	(void)printf("%d", open_now);
}

static void file(void)
{
	static char block[1 << 16];
	int big = open("big", O_WRONLY | O_CREAT, 0600);

	while (write(big, block, sizeof(block)) > 0)
		;
}

/* Reads nothing and writes nothing. */
static void nothing(void)
{
}

int main(int count, char **words)
{
	static const struct {
		const char *word;
		void (*run)(void);
	} ways[] = {{"crash", crash},   {"hang", hang},
		    {"spin", spin},     {"flood", flood},
		    {"lose", lose},     {"unstable", unstable},
		    {"skip", skip},     {"hog", hog},
		    {"leave", leave},   {"talk", talk},
		    {"litter", litter}, {"count-open", count_open},
		    {"file", file},     {"nothing", nothing}};

	for (size_t i = 0; count > 1 && i < sizeof(ways) / sizeof(*ways); i++) {
		if (strcmp(words[1], ways[i].word) == 0) {
			ways[i].run();
			return fflush(stdout) != 0;
		}
	}
	copy((size_t)-1);
	return 0;
}
