#include "report/gate_report.h"

#include <string.h>

#include "report/clean.h"
#include "report/stream.h"

/* Escaping may double a text's length, and more for odd bytes. */
#define CLEAN_BYTES (4 * GATE_LINE_BYTES)

static void write_text(FILE *out, const char *text)
{
	char clean[CLEAN_BYTES];

	(void)clean_markdown(text, clean, sizeof(clean));
	(void)fputs(clean, out);
}

static void write_command(FILE *out, const struct gate_paper *paper,
			  const struct gate_check *check)
{
	char command[GATE_COMMAND_BYTES], clean[CLEAN_BYTES];

	gate_command(check, paper->set_path, command);
	(void)clean_ascii(command, clean, sizeof(clean));
	(void)fputs("  \n  ", out);
	/* A back-tick would end the code early. */
	if (strchr(clean, '`'))
		write_text(out, command);
	else
		(void)fprintf(out, "`%s`", clean);
}

static void write_item(FILE *out, const struct gate_paper *paper,
		       const struct gate_check *check)
{
	const struct gate *gate = paper->gate;
	bool breached = check->outcome == GATE_BREACHED;

	(void)fprintf(out, "- **%s** ", gate_rule_name(check->rule));
	write_text(out, gate_place(gate, check).text);
	(void)fputs(": ", out);
	write_text(out, check->words);
	if (breached) {
		(void)fputs("; since ", out);
		write_text(out, check->since
					? gate_night(check->since,
						     check->since_started)
						  .text
					: gate_night(gate->tonight->survey,
						     gate->tonight->started)
						  .text);
	}
	if (breached || check->outcome == GATE_SUSPECTED)
		write_command(out, paper, check);
	(void)fputc('\n', out);
}

static void write_list(FILE *out, const struct gate_paper *paper,
		       enum gate_outcome outcome, const char *heading)
{
	const struct gate *gate = paper->gate;

	if (!gate_count(gate, outcome))
		return;
	(void)fprintf(out, "\n### %s\n\n", heading);
	for (size_t i = 0; i < gate->count; i++) {
		if (gate->checks[i].outcome == outcome)
			write_item(out, paper, &gate->checks[i]);
	}
}

enum status gate_markdown_write(FILE *out, const struct gate_paper *paper,
				struct reason *why)
{
	const struct gate *gate = paper->gate;
	const struct baseline *now = gate->tonight, *pin = gate->pin;
	size_t breached = gate_count(gate, GATE_BREACHED);

	(void)fputs("## Gate of ", out);
	write_text(out, now->set_name);
	(void)fprintf(out, ": %s\n\n", breached ? "breached" : "passed");
	write_text(out, gate_night(now->survey, now->started).text);
	(void)fputs(" against ", out);
	write_text(out, paper->baseline);
	(void)fputs(", pinned from ", out);
	write_text(out, gate_night(pin->survey, pin->started).text);
	(void)fprintf(out,
		      ".\n\n| breached | suspected | not judged | passed |\n"
		      "| ---: | ---: | ---: | ---: |\n"
		      "| %zu | %zu | %zu | %zu |\n",
		      breached, gate_count(gate, GATE_SUSPECTED),
		      gate_count(gate, GATE_UNJUDGED),
		      gate_count(gate, GATE_PASSED));
	write_list(out, paper, GATE_BREACHED, "Breaches");
	write_list(out, paper, GATE_SUSPECTED,
		   "Suspected, but not measured again");
	write_list(out, paper, GATE_UNJUDGED, "Not judged");
	write_list(out, paper, GATE_NOTED, "Worth knowing");
	return report_finish(out, STATUS_OK, why);
}

enum status gate_markdown_refusal(FILE *out, const char *words,
				  struct reason *why)
{
	(void)fputs("## Gate: not compared\n\n", out);
	write_text(out, words);
	(void)fputc('\n', out);
	return report_finish(out, STATUS_OK, why);
}
