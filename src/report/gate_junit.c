#include "report/gate_report.h"

#include <string.h>

#include "report/clean.h"
#include "report/stream.h"

/*
 * Text inside an element or an attribute: markup escaped, and what XML 1.0
 * does not allow even escaped (section 2.2) put as a question mark.
 */
static void write_xml(FILE *out, const char *text)
{
	char clean[4 * GATE_LINE_BYTES];

	(void)clean_utf8(text, clean, sizeof(clean));
	for (const char *c = clean; *c; c++) {
		unsigned char byte = (unsigned char)*c;

		if (byte == '&')
			(void)fputs("&amp;", out);
		else if (byte == '<')
			(void)fputs("&lt;", out);
		else if (byte == '>')
			(void)fputs("&gt;", out);
		else if (byte == '"')
			(void)fputs("&quot;", out);
		else if (byte == '\t' || byte == '\n' || byte == '\r')
			(void)fprintf(out, "&#%d;", byte);
		else if (byte < 0x20)
			(void)fputc('?', out);
		else if (strncmp(c, "\xef\xbf\xbe", 3) == 0 ||
			 strncmp(c, "\xef\xbf\xbf", 3) == 0) {
			(void)fputc('?', out);
			c += 2;
		} else
			(void)fputc(byte, out);
	}
}

static void attribute(FILE *out, const char *name, const char *value)
{
	(void)fprintf(out, " %s=\"", name);
	write_xml(out, value);
	(void)fputc('"', out);
}

static void write_case(FILE *out, const struct gate_paper *paper,
		       const struct gate_check *check)
{
	const char *rule = gate_rule_name(check->rule);
	bool breached = check->outcome == GATE_BREACHED;
	char name[2 * LEDGER_NAME_BYTES + 64], line[GATE_LINE_BYTES];
	bool cell = check->key.codec[0] != '\0';

	/* Four ratios share two rules: the words tell which. */
	(void)snprintf(name, sizeof(name), "%s%s%s%s",
		       cell ? cell_words(&check->key).text : "corpus", ": ",
		       rule,
		       check->ratio == RATIO_DECODE_TIME ||
				       check->ratio == RATIO_DECODE_MEMORY
			       ? " of decoding"
			       : "");
	(void)fputs("    <testcase", out);
	attribute(out, "classname", check->corpus);
	attribute(out, "name", name);
	if (check->outcome == GATE_PASSED) {
		(void)fputs("/>\n", out);
		return;
	}
	(void)fprintf(out, ">\n      <%s", breached ? "failure" : "skipped");
	if (breached)
		attribute(out, "type", rule);
	attribute(out, "message", check->words);
	if (breached) {
		gate_line(paper, check, line);
		(void)fputc('>', out);
		write_xml(out, line);
		(void)fputs("</failure>\n", out);
	} else {
		(void)fputs("/>\n", out);
	}
	(void)fputs("    </testcase>\n", out);
}

/* Checks of one corpus that are cases: all but notes. */
static size_t count_cases(const struct gate *gate, const char *corpus,
			  enum gate_outcome outcome, bool any)
{
	size_t count = 0;

	for (size_t i = 0; i < gate->count; i++) {
		const struct gate_check *check = &gate->checks[i];

		count += (!corpus || strcmp(check->corpus, corpus) == 0) &&
			 check->outcome != GATE_NOTED &&
			 (any || check->outcome == outcome);
	}
	return count;
}

static void write_counts(FILE *out, const struct gate *gate, const char *corpus)
{
	(void)fprintf(out,
		      " tests=\"%zu\" failures=\"%zu\" errors=\"0\" "
		      "skipped=\"%zu\"",
		      count_cases(gate, corpus, GATE_PASSED, true),
		      count_cases(gate, corpus, GATE_BREACHED, false),
		      count_cases(gate, corpus, GATE_SUSPECTED, false) +
			      count_cases(gate, corpus, GATE_UNJUDGED, false));
}

static void write_notes(FILE *out, const struct gate_paper *paper,
			const char *corpus)
{
	bool any = false;

	for (size_t i = 0; i < paper->gate->count; i++) {
		const struct gate_check *check = &paper->gate->checks[i];
		char line[GATE_LINE_BYTES];

		if (check->outcome != GATE_NOTED ||
		    strcmp(check->corpus, corpus) != 0)
			continue;
		gate_line(paper, check, line);
		(void)fputs(any ? "&#10;" : "    <system-out>", out);
		write_xml(out, line);
		any = true;
	}
	if (any)
		(void)fputs("</system-out>\n", out);
}

static void write_suite(FILE *out, const struct gate_paper *paper,
			const char *corpus)
{
	const struct gate *gate = paper->gate;
	const char *started = gate->tonight->started;
	char stamp[LEDGER_NAME_BYTES];

	/* The format's time stamps have no zone. */
	(void)snprintf(stamp, sizeof(stamp), "%.19s", started);
	(void)fputs("  <testsuite", out);
	attribute(out, "name", *corpus ? corpus : gate->tonight->set_name);
	write_counts(out, gate, corpus);
	if (*started)
		attribute(out, "timestamp", stamp);
	(void)fputs(">\n", out);
	for (size_t i = 0; i < gate->count; i++) {
		const struct gate_check *check = &gate->checks[i];

		if (check->outcome != GATE_NOTED &&
		    strcmp(check->corpus, corpus) == 0)
			write_case(out, paper, check);
	}
	write_notes(out, paper, corpus);
	(void)fputs("  </testsuite>\n", out);
}

enum status gate_junit_write(FILE *out, const struct gate_paper *paper,
			     struct reason *why)
{
	const struct gate *gate = paper->gate;

	(void)fputs("<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n<testsuites",
		    out);
	attribute(out, "name", "ratefloor gate");
	write_counts(out, gate, NULL);
	(void)fputs(">\n", out);
	/* Checks are sorted by corpus. */
	for (size_t i = 0; i < gate->count; i++) {
		if (!i || strcmp(gate->checks[i].corpus,
				 gate->checks[i - 1].corpus) != 0)
			write_suite(out, paper, gate->checks[i].corpus);
	}
	(void)fputs("</testsuites>\n", out);
	return report_finish(out, STATUS_OK, why);
}

enum status gate_junit_refusal(FILE *out, const char *words, struct reason *why)
{
	(void)fputs("<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n"
		    "<testsuites name=\"ratefloor gate\" tests=\"1\" "
		    "failures=\"0\" errors=\"1\" skipped=\"0\">\n"
		    "  <testsuite name=\"gate\" tests=\"1\" failures=\"0\" "
		    "errors=\"1\" skipped=\"0\">\n"
		    "    <testcase classname=\"gate\" name=\"compared\">\n"
		    "      <error type=\"refused\"",
		    out);
	attribute(out, "message", words);
	(void)fputs("/>\n    </testcase>\n  </testsuite>\n</testsuites>\n",
		    out);
	return report_finish(out, STATUS_OK, why);
}
