#include "report/gate_report.h"

#include "report/clean.h"
#include "report/stream.h"

struct gate_place gate_place(const struct gate *gate,
			     const struct gate_check *check)
{
	struct gate_place place;
	bool cell = check->key.codec[0] != '\0';

	(void)snprintf(
		place.text, sizeof(place.text), "%s%s%s",
		check->corpus[0] ? check->corpus : gate->tonight->set_name,
		cell ? ", " : "", cell ? cell_words(&check->key).text : "");
	return place;
}

struct gate_night gate_night(int64_t survey, const char *started)
{
	struct gate_night night;

	(void)snprintf(night.text, sizeof(night.text), "survey %lld%s%s%s",
		       (long long)survey, *started ? " (" : "", started,
		       *started ? ")" : "");
	return night;
}

static struct gate_night since(const struct gate *gate,
			       const struct gate_check *check)
{
	if (check->since)
		return gate_night(check->since, check->since_started);
	return gate_night(gate->tonight->survey, gate->tonight->started);
}

void gate_line(const struct gate_paper *paper, const struct gate_check *check,
	       char line[GATE_LINE_BYTES])
{
	char command[GATE_COMMAND_BYTES];
	const char *rule = gate_rule_name(check->rule);
	struct gate_place place = gate_place(paper->gate, check);

	if (check->outcome != GATE_BREACHED &&
	    check->outcome != GATE_SUSPECTED) {
		(void)snprintf(line, GATE_LINE_BYTES, "%s: %s: %s", rule,
			       place.text, check->words);
		return;
	}
	gate_command(check, paper->set_path, command);
	(void)snprintf(line, GATE_LINE_BYTES, "%s: %s: %s; since %s; again: %s",
		       rule, place.text, check->words,
		       since(paper->gate, check).text, command);
}

static void write_outcome(FILE *out, const struct gate_paper *paper,
			  enum gate_outcome outcome, const char *word)
{
	char line[GATE_LINE_BYTES], clean[4 * GATE_LINE_BYTES];

	for (size_t i = 0; i < paper->gate->count; i++) {
		const struct gate_check *check = &paper->gate->checks[i];

		if (check->outcome != outcome)
			continue;
		gate_line(paper, check, line);
		(void)clean_ascii(line, clean, sizeof(clean));
		(void)fprintf(out, "%s%s\n", word, clean);
	}
}

enum status gate_lines_write(FILE *out, const struct gate_paper *paper,
			     struct reason *why)
{
	const struct gate *gate = paper->gate;

	write_outcome(out, paper, GATE_BREACHED, "BREACH ");
	write_outcome(out, paper, GATE_SUSPECTED, "suspected ");
	write_outcome(out, paper, GATE_UNJUDGED, "not judged ");
	write_outcome(out, paper, GATE_NOTED, "");
	(void)fprintf(
		out,
		"%s: %zu checks passed, %zu breached, %zu suspected, "
		"%zu not judged\n",
		gate_night(gate->tonight->survey, gate->tonight->started).text,
		gate_count(gate, GATE_PASSED), gate_count(gate, GATE_BREACHED),
		gate_count(gate, GATE_SUSPECTED),
		gate_count(gate, GATE_UNJUDGED));
	return report_finish(out, STATUS_OK, why);
}
