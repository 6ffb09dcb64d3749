#include "cli/command.h"

#include <stdio.h>
#include <string.h>

#define OPTION_COLUMN 26

static const char *const what_it_does =
	"Runs a fixed set of corpora through entropy-rate estimators and\n"
	"through real codecs, and tabulates the estimated floor against the\n"
	"bits per symbol achieved, with a gap analysis and intervals from\n"
	"resampled blocks.";

static const struct {
	const char *code, *words;
} exits[] = {
	{"0", "done"},
	{"1", "a cell, a method, a corpus or a gate failed; it is recorded "
	      "and shown"},
	{"2", "wrong usage, or input or output that cannot be used"},
};

#define EXIT_COUNT (sizeof(exits) / sizeof(*exits))

static void text_option(const struct option_row *row)
{
	int width = printf("  --%s", row->name);

	if (row->value)
		width += printf(" %s", row->value);
	if (width >= OPTION_COLUMN) {
		(void)printf("\n");
		width = 0;
	}
	(void)printf("%*s%s\n", OPTION_COLUMN - width, "", row->help);
}

static void text_command(const struct command *command)
{
	(void)printf("usage: ratefloor %s%s%s [OPTION]...\n\n%s\n\n%s\n",
		     command->name, command->operands[0] ? " " : "",
		     command->operands, command->summary, command->description);
	(void)printf("\noptions:\n");
	for (size_t i = 0; command->options[i].name; i++)
		text_option(&command->options[i]);
	text_option(&(struct option_row){"help", NULL, "this text"});
	if (command->examples)
		(void)printf("\nexamples:\n%s\n", command->examples);
}

/* Text in roff: hyphens stay hyphens, a leading dot is no request. */
static void roff(const char *text)
{
	int at_start = 1;

	for (; *text; text++) {
		if (at_start && (*text == '.' || *text == '\''))
			(void)printf("\\&");
		if (*text == '-')
			(void)printf("\\-");
		else if (*text == '\\')
			(void)printf("\\e");
		else if (*text == '\n' && text[1] == '\n') {
			(void)printf("\n.PP");
		} else
			(void)putchar(*text);
		at_start = *text == '\n';
	}
	(void)putchar('\n');
}

static void roff_lines(const char *text)
{
	(void)printf(".nf\n");
	roff(text);
	(void)printf(".fi\n");
}

static void roff_head(const char *name, const char *summary)
{
	(void)printf(".TH \"");
	for (const char *c = name; *c; c++)
		(void)putchar(*c >= 'a' && *c <= 'z' ? *c - 'a' + 'A' : *c);
	(void)printf("\" 1 \"\" \"ratefloor %s\" \"User Commands\"\n.SH NAME\n",
		     RATEFLOOR_VERSION);
	roff(name);
	(void)printf("\\- ");
	roff(summary);
}

static void roff_exit_status(void)
{
	(void)printf(".SH EXIT STATUS\n");
	for (size_t i = 0; i < EXIT_COUNT; i++) {
		(void)printf(".TP\n%s\n", exits[i].code);
		roff(exits[i].words);
	}
}

static void man_command(const struct command *command)
{
	char name[64];

	(void)snprintf(name, sizeof(name), "ratefloor-%s", command->name);
	roff_head(name, command->summary);
	(void)printf(".SH SYNOPSIS\n.B ratefloor %s\n", command->name);
	if (command->operands[0])
		(void)printf(".I %s\n", command->operands);
	(void)printf("[\\fIOPTION\\fR]...\n.SH DESCRIPTION\n");
	roff(command->description);
	(void)printf(".SH OPTIONS\n");
	for (size_t i = 0; command->options[i].name; i++) {
		const struct option_row *row = &command->options[i];

		(void)printf(".TP\n\\fB\\-\\-%s\\fR", row->name);
		if (row->value)
			(void)printf(" \\fI%s\\fR", row->value);
		(void)printf("\n");
		roff(row->help);
	}
	roff_exit_status();
	if (command->examples) {
		(void)printf(".SH EXAMPLES\n");
		roff_lines(command->examples);
	}
	(void)printf(".SH SEE ALSO\n.BR ratefloor (1)\n");
}

void help_command(const struct command *command, bool man)
{
	if (man)
		man_command(command);
	else
		text_command(command);
}

static void man_program(void)
{
	roff_head("ratefloor", "how far codecs are above the entropy rate");
	(void)printf(".SH SYNOPSIS\n.B ratefloor\n\\fICOMMAND\\fR "
		     "[\\fIARGUMENT\\fR]...\n.SH DESCRIPTION\n");
	roff(what_it_does);
	(void)printf(".SH COMMANDS\n");
	for (size_t i = 0; commands[i]; i++) {
		(void)printf(".TP\n.BR ratefloor\\-%s (1)\n",
			     commands[i]->name);
		roff(commands[i]->summary);
	}
	roff_exit_status();
}

void help_program(bool man)
{
	if (man) {
		man_program();
		return;
	}
	(void)printf("usage: ratefloor COMMAND [ARGUMENT]...\n\n%s\n\n"
		     "commands:\n",
		     what_it_does);
	for (size_t i = 0; commands[i]; i++)
		(void)printf("  %-10s %s\n", commands[i]->name,
			     commands[i]->summary);
	(void)printf("\nratefloor COMMAND --help tells more; --version the "
		     "version.\n\nexit codes:\n");
	for (size_t i = 0; i < EXIT_COUNT; i++)
		(void)printf("  %s  %s\n", exits[i].code, exits[i].words);
}
