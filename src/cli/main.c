#include "cli/command.h"

#include <stdio.h>
#include <string.h>

static enum exit_code unknown_command(const char *name)
{
	const char *names[32];
	size_t count = 0;
	const char *near;

	while (count < 32 && commands[count]) {
		names[count] = commands[count]->name;
		count++;
	}
	near = nearest_name(name, names, count);
	(void)fprintf(stderr, "ratefloor: there is no command '%s'", name);
	if (near)
		(void)fprintf(stderr, "; did you mean %s?\n", near);
	else
		(void)fprintf(stderr, "; see ratefloor --help\n");
	return EXIT_USAGE;
}

static enum exit_code run_command(const struct command *command, int argc,
				  char **argv)
{
	struct words words;
	struct reason why = {""};

	if (words_parse(command, argc, argv, &words, &why) != STATUS_OK)
		return complain(&words, &why);
	if (words.help) {
		help_command(command, words.man);
		return EXIT_DONE;
	}
	return command->run(&words);
}

/* A full disk behind a pipe must not pass for success. */
static enum exit_code finish_output(enum exit_code code)
{
	if (fflush(stdout) == 0 && !ferror(stdout))
		return code;
	(void)fprintf(stderr, "ratefloor: standard output: cannot write\n");
	return EXIT_USAGE;
}

enum exit_code complain(const struct words *words, const struct reason *why)
{
	(void)fprintf(stderr, "ratefloor %s: %s\n", words->command->name,
		      why->text);
	return EXIT_USAGE;
}

int main(int argc, char **argv)
{
	if (argc < 2) {
		help_program(false);
		return EXIT_USAGE;
	}
	if (strcmp(argv[1], "--help") == 0 ||
	    strcmp(argv[1], "--help=man") == 0) {
		help_program(argv[1][6] == '=');
		return (int)finish_output(EXIT_DONE);
	}
	if (strcmp(argv[1], "--version") == 0) {
		(void)printf("ratefloor %s\n", RATEFLOOR_VERSION);
		return (int)finish_output(EXIT_DONE);
	}
	if (strcmp(argv[1], "--commands") == 0) {
		for (size_t i = 0; commands[i]; i++)
			(void)printf("%s\n", commands[i]->name);
		return (int)finish_output(EXIT_DONE);
	}
	for (size_t i = 0; commands[i]; i++) {
		if (strcmp(argv[1], commands[i]->name) == 0)
			return (int)finish_output(
				run_command(commands[i], argc - 2, argv + 2));
	}
	return (int)unknown_command(argv[1]);
}
