/* Do baselines read back as written, and are reports of a gate well formed? */
#include "report/baseline_report.h"
#include "report/gate_report.h"

#include "base/memory.h"
#include "support/gate_nights.h"
#include "support/near.h"

#include <stdio.h>
#include <stdlib.h>
#include <string.h>

static char *pinned_text(const struct baseline *baseline)
{
	char *text = NULL;
	size_t length = 0;
	FILE *out = open_memstream(&text, &length);

	assert_non_null(out);
	assert_int_equal(baseline_write(out, baseline, NULL), STATUS_OK);
	assert_int_equal(fclose(out), 0);
	return text;
}

static void baselines_read_back(void **state)
{
	struct baseline pin, got;
	struct reason why = {""};
	struct gate gate;
	char *text, *again;

	(void)state;
	gate_night_init(&pin);
	gate_night_cell(&pin, "frames", "zlib", "9")->ratios[0].known = false;
	gate_night_corpus(&pin, "frames")->floor_known = false;
	pin.gap_limit = -1;
	pin.seed = UINT64_MAX;
	text = pinned_text(&pin);
	if (baseline_parse(&got, text, strlen(text), "b.json", &why) !=
	    STATUS_OK)
		fail_msg("%s", why.text);
	again = pinned_text(&got);
	assert_string_equal(text, again);
	assert_near(gate_night_cell(&got, "feed", "zlib", "6")->pair.mean,
		    -0.125, 1e-12);
	assert_false(
		gate_night_cell(&got, "frames", "zlib", "9")->ratios[0].known);
	assert_true(got.gap_limit < 0);
	assert_true(got.seed == UINT64_MAX);
	gate_nights_judge(&got, &pin, &gate);
	assert_int_equal(gate_count(&gate, GATE_BREACHED), 0);
	gate_release(&gate);
	free(text);
	free(again);
	baseline_release(&got);
	baseline_release(&pin);
}

/* One line a library, corpus and cell, sorted: a diff shows what changed. */
static void a_line_a_cell(void **state)
{
	struct baseline pin;
	char *text;
	size_t cells = 0;

	(void)state;
	gate_night_init(&pin);
	text = pinned_text(&pin);
	for (char *line = text; line; line = strchr(line, '\n')) {
		line += *line == '\n';
		cells += strncmp(line, "{\"corpus\": ", 11) == 0 &&
			 strstr(line, "\"codec\": ") != NULL &&
			 strstr(line, "\"codec\": ") < strchr(line, '\n');
	}
	assert_int_equal(cells, 6);
	assert_true(strstr(text, "\"feed\", \"codec\"") <
		    strstr(text, "\"frames\", \"codec\""));
	free(text);
	baseline_release(&pin);
}

static void not_read(const char *text, enum status wanted, const char *words)
{
	struct baseline got;
	struct reason why = {""};

	assert_int_equal(
		baseline_parse(&got, text, strlen(text), "b.json", &why),
		wanted);
	if (!strstr(why.text, words))
		fail_msg("'%s' lacks '%s'", why.text, words);
}

/* The text with one word put in place of another. */
static char *edited(const char *from, const char *to)
{
	struct baseline pin;
	char *text, *place, *made;
	size_t room;

	gate_night_init(&pin);
	text = pinned_text(&pin);
	baseline_release(&pin);
	place = strstr(text, from);
	assert_non_null(place);
	room = strlen(text) + strlen(to) + 1;
	made = malloc(room);
	assert_non_null(made);
	*place = '\0';
	(void)snprintf(made, room, "%s%s%s", text, to, place + strlen(from));
	free(text);
	return made;
}

static void broken_baselines_are_named(void **state)
{
	static const struct {
		const char *from, *to;
		enum status status;
		const char *words;
	} cases[] = {
		{"\"baseline\": 1", "\"baseline\": 7", STATUS_MISMATCH,
		 "schema 7"},
		{"\"bytes\": 20000", "\"bytes\": -4", STATUS_BAD_INPUT,
		 "cells[0].bytes: a whole number is wanted"},
		{"\"symbols\": \"byte\"", "\"symbols\": \"bite\"",
		 STATUS_BAD_INPUT, "corpora[0].symbols"},
		{"\"orders\": 16", "\"orders\": \"x\"", STATUS_BAD_INPUT,
		 "options.orders"},
		{"\"library\"", "\"labrary\"", STATUS_BAD_INPUT,
		 "libraries[0].library"},
		{"\"cells\"", "\"sells\"", STATUS_BAD_INPUT, "cells: a list"},
		{"\"tolerance\": 0.003", "\"tolerance\": true",
		 STATUS_BAD_INPUT, "rules.tolerance: a number"},
		{"}\n]\n}", "", STATUS_BAD_INPUT, "not a baseline"},
	};

	(void)state;
	for (size_t i = 0; i < sizeof(cases) / sizeof(cases[0]); i++) {
		char *text = edited(cases[i].from, cases[i].to);

		not_read(text, cases[i].status, cases[i].words);
		free(text);
	}
	not_read("", STATUS_BAD_INPUT, "b.json:1: not a baseline");
	not_read("[]", STATUS_BAD_INPUT, "baseline: a whole number");
}

/* What each format makes of a breach whose words are hostile. */
static char *written(enum status (*write)(FILE *, const struct gate_paper *,
					  struct reason *))
{
	struct baseline pin, night;
	struct gate gate;
	struct gate_paper paper = {
		.gate = &gate, .baseline = "b.json", .set_path = "bay.set"};
	struct baseline_cell *cell;
	char *text = NULL;
	size_t length = 0;
	FILE *out = open_memstream(&text, &length);

	assert_non_null(out);
	gate_night_init(&pin);
	gate_night_init(&night);
	night.survey = 9;
	cell = gate_night_cell(&night, "frames", "zlib", "9");
	cell->ran = cell->lossless = false;
	(void)snprintf(cell->reason, sizeof(cell->reason), "%s",
		       "</failure> & \"<b>\" \x1b[31m \xff \xef\xbf\xbf |*_ ");
	gate_nights_judge(&pin, &night, &gate);
	assert_int_equal(write(out, &paper, NULL), STATUS_OK);
	assert_int_equal(fclose(out), 0);
	gate_release(&gate);
	baseline_release(&night);
	baseline_release(&pin);
	return text;
}

static void xml_is_escaped(void **state)
{
	char *text = written(gate_junit_write);

	(void)state;
	assert_non_null(strstr(text, "&lt;/failure&gt; &amp; &quot;&lt;b&gt;"));
	assert_null(strchr(text, '\x1b'));
	/* Not UTF-8: U+FFFD; a noncharacter XML refuses (2.2): a mark. */
	assert_non_null(strstr(text, "\xef\xbf\xbd ? |"));
	/* 39 checks of a good night, less 7 of the cell that failed, and 1. */
	assert_non_null(strstr(text, "<testsuites name=\"ratefloor gate\" "
				     "tests=\"33\" failures=\"1\" errors=\"0\" "
				     "skipped=\"0\">"));
	assert_non_null(strstr(text, "timestamp=\"2031-05-02T01:00:00\""));
	free(text);
}

static void lines_say_all(void **state)
{
	char *text = written(gate_lines_write);

	(void)state;
	assert_int_equal(
		strncmp(text,
			"BREACH broken: frames, zlib 9 4096: failed: ", 44),
		0);
	assert_non_null(strstr(text, "; since survey 9 "
				     "(2031-05-02T01:00:00Z); again: ratefloor "
				     "survey bay.set --corpus frames --codec "
				     "zlib --level 9 --no-timing --ledger "
				     "again.ledger\n"));
	assert_null(strchr(text, '\x1b'));
	free(text);
}

static void markdown_is_escaped(void **state)
{
	char *text = written(gate_markdown_write);

	(void)state;
	assert_non_null(strstr(text, "## Gate of marrow-bay: breached"));
	assert_null(strstr(text, "<b>"));
	assert_null(strstr(text, " |*_"));
	assert_null(strchr(text, '\x1b'));
	free(text);
}

static void full_disks_are_seen(void **state)
{
	struct baseline pin;
	FILE *out = fopen("/dev/full", "w");

	(void)state;
	assert_non_null(out);
	gate_night_init(&pin);
	assert_int_equal(baseline_write(out, &pin, NULL), STATUS_IO);
	(void)fclose(out);
	baseline_release(&pin);
}

int main(void)
{
	const struct CMUnitTest tests[] = {
		cmocka_unit_test(baselines_read_back),
		cmocka_unit_test(a_line_a_cell),
		cmocka_unit_test(broken_baselines_are_named),
		cmocka_unit_test(xml_is_escaped),
		cmocka_unit_test(lines_say_all),
		cmocka_unit_test(markdown_is_escaped),
		cmocka_unit_test(full_disks_are_seen),
	};

	return cmocka_run_group_tests(tests, NULL, NULL);
}
