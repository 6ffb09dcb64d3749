/* The program's commands: what each takes, and what runs it. */
#ifndef CLI_COMMAND_H
#define CLI_COMMAND_H

#include "base/status.h"

#include <stdbool.h>
#include <stddef.h>
#include <stdint.h>

/* Exit codes that scripts can trust. */
enum exit_code {
	EXIT_DONE = 0,
	EXIT_FAILED = 1, /* a cell, method, corpus or gate failed */
	EXIT_USAGE = 2   /* wrong usage, or input or output not usable */
};

/* One long option. A name ends a list with NULL. */
struct option_row {
	const char *name;
	const char *value; /* what it takes, for people; NULL: nothing */
	const char *help;
};

#define WORDS_OPTIONS_MAX 24
#define WORDS_VALUES_MAX 64

struct command;

/* A parsed command line. Texts are borrowed from argv. */
struct words {
	const struct command *command;
	const char *operands[WORDS_VALUES_MAX];
	size_t operand_count;
	struct {
		size_t option; /* index in command->options */
		const char *value;
	} given[WORDS_VALUES_MAX];
	size_t given_count;
	bool help, man;
};

struct command {
	const char *name;
	const char *operands; /* "SET", "" */
	size_t operands_min, operands_max;
	const char *summary;
	const char *description; /* paragraphs, blank line between */
	const char *examples;    /* lines of shell, or NULL */
	const struct option_row *options;
	enum exit_code (*run)(const struct words *words);
};

/* In the order of the help; ended by NULL. */
extern const struct command *const commands[];

/* Parses argv after the command's name. STATUS_BAD_USAGE with a reason. */
MUST_USE enum status words_parse(const struct command *command, int argc,
				 char **argv, struct words *words,
				 struct reason *why);
/* Last value given to an option; NULL where it was not given ("" for flags). */
const char *words_get(const struct words *words, const char *option);
/* The i-th value of an option that may be repeated; NULL past the last. */
const char *words_nth(const struct words *words, const char *option, size_t i);
/*
 * A whole number from low to high given to an option; *value is unchanged when
 * it was not given. STATUS_BAD_USAGE names the option and the range.
 */
MUST_USE enum status words_number(const struct words *words, const char *option,
				  uint64_t low, uint64_t high, uint64_t *value,
				  struct reason *why);

/* Prints help as text, or as a man page (roff), for one command or for all. */
void help_command(const struct command *command, bool man);
void help_program(bool man);

/* "ratefloor NAME: text" on stderr; returns EXIT_USAGE. */
enum exit_code complain(const struct words *words, const struct reason *why);

/* Nearest name to a wrong one, or NULL when none is near. */
const char *nearest_name(const char *wrong, const char *const *names,
			 size_t count);

#endif
