/* Writes what a gate found: lines for people, JUnit XML, Markdown. */
#ifndef REPORT_GATE_REPORT_H
#define REPORT_GATE_REPORT_H

#include "verdict/gate.h"

#include <stdio.h>

struct gate_paper {
	const struct gate *gate; /* borrowed, as the rest */
	const char *baseline;    /* path of the baseline, as given */
	const char *set_path;    /* of the set file, or "" */
};

/* Each returns STATUS_IO where the stream refused bytes. */

/* A line for each breach, suspicion, check that was not made, and note. */
MUST_USE enum status gate_lines_write(FILE *out, const struct gate_paper *paper,
				      struct reason *why);
/*
 * The XML that CI servers read (JUnit's report format, by common practice): a
 * suite a corpus, a case a check.
 */
MUST_USE enum status gate_junit_write(FILE *out, const struct gate_paper *paper,
				      struct reason *why);
/* A summary for a page: verdict, breaches, then what else is worth knowing. */
MUST_USE enum status gate_markdown_write(FILE *out,
					 const struct gate_paper *paper,
					 struct reason *why);
/*
 * The same for a comparison that was refused: one case with an error, so that
 * a server that only reads the file does not take silence for success.
 */
MUST_USE enum status gate_junit_refusal(FILE *out, const char *words,
					struct reason *why);
MUST_USE enum status gate_markdown_refusal(FILE *out, const char *words,
					   struct reason *why);

/* "size: duty-log, zlib 9: 2,000 bytes …; since …; again: …" */
#define GATE_LINE_BYTES 2048
void gate_line(const struct gate_paper *paper, const struct gate_check *check,
	       char line[GATE_LINE_BYTES]);
/* "duty-log, zlib 9 4096", "duty-log", or the set's name. */
struct gate_place {
	char text[256];
};
struct gate_place gate_place(const struct gate *gate,
			     const struct gate_check *check);
/* "survey 7 (2031-05-02T01:00:00Z)" */
struct gate_night {
	char text[128];
};
struct gate_night gate_night(int64_t survey, const char *started);

#endif
