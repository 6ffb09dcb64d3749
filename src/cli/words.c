#include "cli/command.h"

#include <errno.h>
#include <stdlib.h>
#include <string.h>

static const struct option_row *option_at(const struct command *command,
					  size_t i)
{
	return command->options[i].name ? &command->options[i] : NULL;
}

static MUST_USE enum status unknown_option(const struct command *command,
					   const char *text, size_t length,
					   struct reason *why)
{
	const char *names[WORDS_OPTIONS_MAX];
	char wrong[64] = "";
	size_t count = 0;
	const char *near;

	for (size_t i = 0; option_at(command, i) && i < WORDS_OPTIONS_MAX; i++)
		names[count++] = command->options[i].name;
	if (length < sizeof(wrong))
		memcpy(wrong, text, length);
	near = nearest_name(wrong, names, count);
	if (near)
		return reason_give(
			why, STATUS_BAD_USAGE,
			"there is no option --%.*s; did you mean --%s?",
			(int)length, text, near);
	return reason_give(why, STATUS_BAD_USAGE,
			   "there is no option --%.*s; see ratefloor %s --help",
			   (int)length, text, command->name);
}

static MUST_USE enum status add_option(struct words *words, const char *text,
				       const char *next, bool *took_next,
				       struct reason *why)
{
	const char *equals = strchr(text, '=');
	size_t length = equals ? (size_t)(equals - text) : strlen(text);
	size_t i = 0;
	const struct option_row *row;

	while ((row = option_at(words->command, i)) &&
	       (strlen(row->name) != length ||
		strncmp(row->name, text, length) != 0))
		i++;
	if (!row)
		return unknown_option(words->command, text, length, why);
	if (!row->value && equals)
		return reason_give(why, STATUS_BAD_USAGE, "--%s takes no value",
				   row->name);
	*took_next = row->value && !equals;
	if (*took_next && !next)
		return reason_give(why, STATUS_BAD_USAGE,
				   "--%s wants a value: %s", row->name,
				   row->value);
	if (words->given_count == WORDS_VALUES_MAX)
		return reason_give(why, STATUS_BAD_USAGE,
				   "more than %d options", WORDS_VALUES_MAX);
	words->given[words->given_count].option = i;
	words->given[words->given_count].value =
		!row->value ? "" : (equals ? equals + 1 : next);
	words->given_count++;
	return STATUS_OK;
}

static MUST_USE enum status check_operands(const struct words *words,
					   struct reason *why)
{
	const struct command *command = words->command;

	if (words->operand_count < command->operands_min)
		return reason_give(why, STATUS_BAD_USAGE,
				   "wants %s; see ratefloor %s --help",
				   command->operands, command->name);
	if (words->operand_count > command->operands_max)
		return reason_give(why, STATUS_BAD_USAGE,
				   "'%s' is one too many; it takes %s",
				   words->operands[command->operands_max],
				   command->operands[0] ? command->operands
							: "options only");
	return STATUS_OK;
}

enum status words_parse(const struct command *command, int argc, char **argv,
			struct words *words, struct reason *why)
{
	bool options = true;

	*words = (struct words){.command = command};
	for (int i = 0; i < argc; i++) {
		const char *text = argv[i];
		bool took_next = false;

		if (options && strcmp(text, "--") == 0) {
			options = false;
		} else if (options && strcmp(text, "--help") == 0) {
			words->help = true;
			return STATUS_OK;
		} else if (options && strcmp(text, "--help=man") == 0) {
			words->help = words->man = true;
			return STATUS_OK;
		} else if (options && strncmp(text, "--", 2) == 0) {
			TRY(add_option(words, text + 2,
				       i + 1 < argc ? argv[i + 1] : NULL,
				       &took_next, why));
			i += took_next;
		} else if (options && text[0] == '-' && text[1]) {
			return reason_give(why, STATUS_BAD_USAGE,
					   "'%s': options are long ones, like "
					   "--help",
					   text);
		} else if (words->operand_count == WORDS_VALUES_MAX) {
			return reason_give(why, STATUS_BAD_USAGE,
					   "more than %d arguments",
					   WORDS_VALUES_MAX);
		} else {
			words->operands[words->operand_count++] = text;
		}
	}
	return check_operands(words, why);
}

const char *words_nth(const struct words *words, const char *option, size_t i)
{
	for (size_t j = 0; j < words->given_count; j++) {
		const struct option_row *row =
			&words->command->options[words->given[j].option];

		if (strcmp(row->name, option) == 0 && i-- == 0)
			return words->given[j].value;
	}
	return NULL;
}

const char *words_get(const struct words *words, const char *option)
{
	const char *last = NULL, *value;

	for (size_t i = 0; (value = words_nth(words, option, i)); i++)
		last = value;
	return last;
}

enum status words_number(const struct words *words, const char *option,
			 uint64_t low, uint64_t high, uint64_t *value,
			 struct reason *why)
{
	const char *text = words_get(words, option);
	unsigned long long number;
	char *end;

	if (!text)
		return STATUS_OK;
	errno = 0;
	number = strtoull(text, &end, 10);
	if (text[0] < '0' || text[0] > '9' || *end || errno || number < low ||
	    number > high)
		return reason_give(
			why, STATUS_BAD_USAGE,
			"--%s '%s': a whole number from %llu to %llu "
			"is wanted",
			option, text, (unsigned long long)low,
			(unsigned long long)high);
	*value = number;
	return STATUS_OK;
}
